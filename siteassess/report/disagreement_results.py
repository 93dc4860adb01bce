"""Where the sources of a horizon disagree, for the JSON results."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from siteassess.report.plain_json import rounded

if TYPE_CHECKING:
    from siteassess.horizon.skyline import Skyline

__all__ = ["disagreement_records"]


def disagreement_records(skyline: Skyline) -> list[dict[str, Any]]:
    """All disagreements by fixed keys."""
    return [
        {
            "survey": one.survey,
            "model": one.model,
            "from_deg": rounded(one.start_deg, "deg"),
            "to_deg": rounded(one.end_deg, "deg"),
            "azimuth_deg": rounded(one.azimuth_deg, "deg"),
            "difference_deg": rounded(one.difference_deg, "deg"),
            "survey_elevation_deg": rounded(one.survey_elevation_deg, "deg"),
            "model_elevation_deg": rounded(one.model_elevation_deg, "deg"),
            "tolerance_deg": rounded(one.tolerance_deg, "deg"),
            "survey_obstacle": one.survey_obstacle or None,
            "model_obstacle": one.model_obstacle or None,
        }
        for one in skyline.disagreements
    ]
