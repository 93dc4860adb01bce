"""Causes and cures of a verdict: what comes back if something goes, and what could be asked of the spot."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.pattern import GainPattern
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import edge_elevation_deg, foliage_obstacles
from siteassess.link_budget.budget import LinkBudget
from siteassess.site_file.model import Site
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.causes import cost_rank
from siteassess.verdict.cures.angular import angular_form
from siteassess.verdict.cures.askable import ALL_SIGNALS, Askable, askable, lowest_masks_deg
from siteassess.verdict.cures.heights import Heights, heights
from siteassess.verdict.cures.returns import (
    LostSky,
    lost_sky,
    returned_alone,
    returned_in_order,
    returned_share,
    returned_without,
)
from siteassess.verdict.states import sample_states, sample_weights
from siteassess.verdict.verdict import Verdict

__all__ = ["ALL_LEAVES", "Explanation", "TreeCut", "explanation"]

CUT_TO_DEG = (5.0, 10.0, 15.0, 20.0)  # own default: elevations to which trees are cut, and the mask
MOST_TREES = 10
EDGE_POINTS = 181
ALL_LEAVES = "all leaves"


@dataclass(frozen=True, slots=True, kw_only=True)
class TreeCut:
    """What comes back when trees are cut.

    Attributes
    ----------
    obstacle : str
        Name of the leaves that are cut; `ALL_LEAVES` for all of them together.
    cut_to_deg : float
        Elevation above which nothing of them is left.
    returned_satellite_time_share : dict of str to float
        Open-sky satellite-time above the mask that becomes usable, by signal.
    """

    obstacle: str
    cut_to_deg: float
    returned_satellite_time_share: Mapping[str, float]


@dataclass(frozen=True, slots=True, kw_only=True)
class Explanation:
    """Causes and cures.

    Attributes
    ----------
    order : tuple of int
        Obstacles by index in `Skyline.obstacles`, the one whose going alone returns most first.
    returned_in_order : dict of str to tuple of float
        By signal, one element an entry of `order`: what returns when that obstacle and all before it go. The
        last is all that obstacles take.
    held_by_several_share : dict of str to float
        By signal: lost satellite-time that no obstacle returns by going alone.
    tree_cuts : tuple of TreeCut
        Obstacle by obstacle, the lowest cut first.
    heights : Heights or None
        What a taller mast brings; None where nothing would change.
    askable : tuple of Askable
        What could be asked of the spot as it is, signal by signal.
    lowest_mask_for_all_deg : float or None
        Lowest mask, in whole degrees, above which all signals pass with the C/N0 asked for now.
    """

    order: tuple[int, ...]
    returned_in_order: Mapping[str, tuple[float, ...]]
    held_by_several_share: Mapping[str, float]
    tree_cuts: tuple[TreeCut, ...]
    heights: Heights | None
    askable: tuple[Askable, ...]
    lowest_mask_for_all_deg: float | None


def explanation(
    site: Site,
    skyline: Skyline,
    pattern: GainPattern,
    tracks: SkyTracks,
    budget: LinkBudget,
    verdict: Verdict,
    assessed_at: Callable[[float], Verdict],
) -> tuple[Verdict, Explanation]:
    """The verdict with what each obstacle returns, and the rest of its explanation.

    Parameters
    ----------
    site, skyline, pattern, tracks, budget, verdict : Site, Skyline and so on
        The assessment as it stands.
    assessed_at : function
        The verdict of a whole assessment with a mast of a given height [m].
    """
    weight = sample_weights(budget.samples, tracks)
    weakened = site.require.count_weakened
    states = {
        signal.signal.name: sample_states(signal, budget.samples, weight, count_weakened=weakened)
        for signal in budget.signals
    }
    lost = {
        signal.signal.name: lost_sky(
            skyline, budget.samples, signal, states[signal.signal.name], count_weakened=weakened
        )
        for signal in budget.signals
    }
    alone = {signal: returned_alone(one) for signal, one in lost.items()}
    obstacles = tuple(
        replace(
            cost,
            returned_satellite_time_share={
                signal: returned_share(lost[signal], returned[index]) for signal, returned in alone.items()
            },
        )
        for index, cost in enumerate(verdict.obstacles)
    )
    order = tuple(sorted(range(len(obstacles)), key=lambda index: cost_rank(obstacles[index]), reverse=True))
    form = angular_form(site, pattern, tracks, budget)
    masks_deg = lowest_masks_deg(form, skyline, site.require.min_usable_share)
    explained = replace(verdict, obstacles=obstacles)
    return explained, Explanation(
        order=order,
        returned_in_order={signal: tuple(returned_in_order(one, order)) for signal, one in lost.items()},
        held_by_several_share={
            signal: returned_share(lost[signal], np.logical_not(np.any(returned, axis=0)))
            for signal, returned in alone.items()
        },
        tree_cuts=_tree_cuts(site, skyline, order, lost, alone),
        heights=heights(site, skyline, form, verdict, assessed_at),
        askable=askable(
            masks_deg, budget.signals, states, site.require.min_usable_share, count_weakened=weakened
        ),
        lowest_mask_for_all_deg=masks_deg[ALL_SIGNALS],
    )


def _tree_cuts(
    site: Site,
    skyline: Skyline,
    order: tuple[int, ...],
    lost: dict[str, LostSky],
    alone: dict[str, NDArray[np.bool_]],
) -> tuple[TreeCut, ...]:
    leaves = foliage_obstacles(skyline)
    mask_deg = site.require.elevation_mask_deg
    cuts_deg = (mask_deg, *(cut_deg for cut_deg in CUT_TO_DEG if cut_deg > mask_deg))
    named = [index for index in order if index in leaves][:MOST_TREES]
    found = []
    for index in named:
        obstacle = skyline.obstacles[index]
        top_deg = _top_deg(obstacle)
        free = {signal: returned[index] for signal, returned in alone.items()}
        found += [_cut(obstacle.name, cut_deg, lost, free) for cut_deg in cuts_deg if cut_deg < top_deg]
    if len(leaves) > 1:
        top_deg = max(_top_deg(skyline.obstacles[index]) for index in leaves)
        free = {signal: returned_without(one, leaves) for signal, one in lost.items()}
        found += [_cut(ALL_LEAVES, cut_deg, lost, free) for cut_deg in cuts_deg if cut_deg < top_deg]
    return tuple(found)


def _top_deg(obstacle: Obstacle) -> float:
    """Highest elevation of an edge, which bulges upward between its points where it is straight in space."""
    azimuth_deg = np.linspace(obstacle.azimuth_deg[0], obstacle.azimuth_deg[-1], EDGE_POINTS)
    between_deg = np.nanmax(edge_elevation_deg(obstacle, azimuth_deg))
    return float(max(between_deg, obstacle.elevation_deg.max()))


def _cut(name: str, cut_deg: float, lost: dict[str, LostSky], free: dict[str, NDArray[np.bool_]]) -> TreeCut:
    """What stands below the cut stays; above it the leaves are gone."""
    return TreeCut(
        obstacle=name,
        cut_to_deg=cut_deg,
        returned_satellite_time_share={
            signal: returned_share(one, free[signal] & (one.apparent_elevation_deg >= cut_deg))
            for signal, one in lost.items()
        },
    )
