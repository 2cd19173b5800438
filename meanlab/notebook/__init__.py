"""What is kept between two visits: the page as it was left. SQLAlchemy is imported here and nowhere else."""

from meanlab.notebook.working_state import Kept, WorkingStates

__all__ = ["Kept", "WorkingStates"]
