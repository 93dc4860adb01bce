"""What is said of the sources of a horizon and of where they disagree."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import azimuth_range, number, plain
from siteassess.report.pieces import Table

if TYPE_CHECKING:
    from siteassess.horizon.skyline import Disagreement, Skyline

__all__ = ["disagreement_sentence", "disagreement_tables"]

MOST_ROWS = 20


def disagreement_tables(skyline: Skyline) -> tuple[Table, ...]:
    """The largest disagreements as a table; none where everything fits together."""
    found = sorted(skyline.disagreements, key=lambda one: -abs(one.difference_deg))
    if not found:
        return ()
    left_out = len(found) - MOST_ROWS
    rest = f" {left_out} smaller ones are left out." if left_out > 0 else ""
    return (
        Table(
            caption="Where a survey and a model of the same surroundings differ by more than their errors "
            f"explain, two standard deviations; the report counts the higher one. Check these places.{rest}",
            header=(
                "Azimuths",
                "Most at",
                "Survey",
                "shows",
                "Model",
                "shows",
                "Difference",
                "Errors\nexplain",
            ),
            rows=tuple(
                (
                    azimuth_range(one.start_deg, one.end_deg),
                    f"{number(one.azimuth_deg)}°",
                    plain(one.survey),
                    _shown(one.survey_obstacle, one.survey_elevation_deg),
                    plain(one.model),
                    _shown(one.model_obstacle, one.model_elevation_deg),
                    f"{number(one.difference_deg)}°",
                    f"{number(one.tolerance_deg)}°",
                )
                for one in found[:MOST_ROWS]
            ),
            align="lrllllrr",
        ),
    )


def disagreement_sentence(found: Disagreement) -> str:
    """One disagreement as a line."""
    return (
        f"{azimuth_range(found.start_deg, found.end_deg)}: at {number(found.azimuth_deg)}° "
        f"{plain(found.survey)} shows {_shown(found.survey_obstacle, found.survey_elevation_deg)}, "
        f"{plain(found.model)} {_shown(found.model_obstacle, found.model_elevation_deg)}; "
        f"errors explain {number(found.tolerance_deg)}°"
    )


def _shown(obstacle: str, elevation_deg: float) -> str:
    return f"{plain(obstacle)}, {number(elevation_deg)}°" if obstacle else "nothing above the horizon"
