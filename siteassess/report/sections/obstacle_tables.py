"""What leaves and thin things do to a signal, obstacle by obstacle."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import decibels, number, plain
from siteassess.report.pieces import Table

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.verdict import ObstacleCost

__all__ = ["leaves_table", "thin_table"]


def leaves_table(assessment: Assessment, ranked: list[tuple[int, ObstacleCost]]) -> Table | None:
    """Loss through leaves by every model; None where there are none."""
    rows = []
    for rank, obstacle in ranked:
        by_model = obstacle.foliage_loss_db
        if by_model is not None:
            losses_db = list(by_model.values())
            times = number(max(losses_db) / min(losses_db)) if min(losses_db) > 0.0 else number(None)
            rows.append((str(rank), plain(obstacle.name), *map(decibels, losses_db), f"{times} to 1"))
            models = tuple(by_model)
    if not rows:
        return None
    return Table(
        caption=(
            "Loss through leaves on L1, in dB, at the highest point of each obstacle, by every model. "
            f"Used here: {assessment.site.foliage.model}. No model is right for every tree: the spread says "
            "how far to trust any of them."
        ),
        header=("No.", "Leaves", *models, "Spread"),
        rows=tuple(rows),
        align="rl" + "r" * len(models) + "r",
    )


def thin_table(ranked: list[tuple[int, ObstacleCost]]) -> Table | None:
    """Loss behind thin things, and how often satellites pass near; None where there are none."""
    rows = tuple(
        (
            str(rank),
            plain(obstacle.name),
            decibels(obstacle.behind_loss_db),
            number(obstacle.grazing_hours_per_day),
        )
        for rank, obstacle in ranked
        if obstacle.behind_loss_db is not None
    )
    if not rows:
        return None
    return Table(
        caption=(
            "Thin things, which a wave passes on both sides. Straight behind: loss on L1 by diffraction at "
            "both edges, in dB. Grazing: satellite-hours a day above the mask, all satellites together, with "
            "the thing within the first Fresnel zone of the line of sight."
        ),
        header=("No.", "Thing", "Straight behind", "Grazing, hours a day"),
        rows=rows,
        align="rlrr",
    )
