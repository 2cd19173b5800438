"""How many readings, and what those at hand can show: power, type II risk, agreement, width of the interval."""

from meanlab.planning.of_analysis import analysis_power, operating_characteristic
from meanlab.planning.plans import plan_agreement, plan_detection, plan_interval, power, power_agreement

__all__ = [
    "analysis_power",
    "operating_characteristic",
    "plan_agreement",
    "plan_detection",
    "plan_interval",
    "power",
    "power_agreement",
]
