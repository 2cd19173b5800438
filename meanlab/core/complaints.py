"""Everything meanlab refuses is said through one tree of errors.

    Complaint (ValueError)
    ├── IntakeComplaint      a text or file that cannot be read as readings
    ├── ReadingsComplaint    readings that contradict themselves or a limit
    ├── QuestionComplaint    a question that contradicts itself
    ├── PlanComplaint        a planning question without a meaning
    └── NotebookComplaint    a notebook that cannot be opened, kept or trusted

A complaint says what was found, where, and what to do.
"""


class Complaint(ValueError):
    """Input that cannot be used; the message is one plain sentence for the technician.

    ``where`` names the field or entry concerned ("target", "readings", "significance"), so that the page can show the
    sentence beside it; it is empty where no single place is to blame.
    """

    def __init__(self, message: str, where: str = "") -> None:
        super().__init__(message)
        self.where = where


class IntakeComplaint(Complaint):
    """A text or file that cannot be read as readings."""


class ReadingsComplaint(Complaint):
    """Readings that contradict themselves or pass a stated limit."""


class QuestionComplaint(Complaint):
    """A question that contradicts itself."""


class PlanComplaint(Complaint):
    """A planning question without a meaning."""


class NotebookComplaint(Complaint):
    """A notebook that cannot be opened, kept or trusted."""
