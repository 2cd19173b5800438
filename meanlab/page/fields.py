"""Every field of the page with its default; the name of a field is the key of its widget."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Any

FIELDS: Mapping[str, Any] = MappingProxyType(
    {
        # the readings
        "readings_text": "",
        "decimal_sign": "as written",
        "sheet": None,
        "column": None,
        "replicates": [],
        "filter_column": None,
        "filter_value": "",
        "preparation": None,
        "labels_name_preparations": False,
        # the question
        "target": "",
        "unit": "",
        "target_kind": "nominal value",
        "significance": "5 %",
        "alternative": "two-sided",
        "quantity": "",
        "material": "",
        # what else is known
        "units_are": "not stated",
        "conditions": "not stated",
        "run_order": False,
        "certificate_value": "",
        "certificate_meaning": "not given",
        "certificate_k": "",
        "certificate_df": "",
        "historical_count": "",
        "own_uncertainty": "",
        "sigma": "",
        "sigma_origin": "",
        "sigma_df": "",
        "limit": "",
        "matters": "",
        "procedure": "rule",
        "parameter": "mean",
        "resolution": "",
        "fixed_before": False,
        # what is written about the result
        "written_title": "",
        "written_by": "",
        "written_note": "",
        "written_instrument": "",
        "written_method": "",
        # below the panel
        "part": "What was read",
        "plan_kind": "a difference that matters",
        "plan_difference": "",
        "plan_limit": "",
        "plan_true": "",
        "plan_half_width": "",
        "plan_s": "",
        "plan_power": "80 %",
        "many_sheet": None,
        "many_values": [],
        "many_samples": [],
        "many_target_column": None,
        "many_preparation": None,
        "many_filter": "all",
    }
)
MANY_FIELDS = tuple(name for name in FIELDS if name.startswith("many_"))
READINGS_FIELDS = (
    "readings_text",
    "decimal_sign",
    "sheet",
    "column",
    "replicates",
    "filter_column",
    "filter_value",
    "preparation",
    "labels_name_preparations",
)
PICKS = READINGS_FIELDS[1:]
WRITTEN = ("title", "by", "note", "instrument", "method")  # each with a field written_…
# Fields that a new page begins with as at the last entry (the unit only in grey), by the name of the bench default.
BENCH_FIELDS: Mapping[str, str] = MappingProxyType(
    {
        "unit": "unit",
        "significance": "significance",
        "by": "written_by",
        "instrument": "written_instrument",
        "method": "written_method",
    }
)
# Fields that no sample set and no opened entry changes.
STAYING = ("part", "written_by", "written_instrument", "written_method", *MANY_FIELDS)
