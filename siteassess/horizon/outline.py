"""The upper envelope of many obstacles, exact, by merging them two by two round the whole circle."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

import numpy as np

from siteassess.horizon.crossings import SAME_EDGE_DEG, crossing_azimuths
from siteassess.horizon.curves import Curves, FloatArray, IndexArray, curves_between, edge_elevation
from siteassess.horizon.skyline import Obstacle, Outline

__all__ = [
    "Circle",
    "circle_of",
    "envelope",
    "envelopes",
    "obstacle_curves",
    "outline_curves",
    "upper_envelope",
]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Circle:
    """One edge round the whole circle: a curve from each start to the next; -1 where there is none.

    Attributes
    ----------
    start_deg : array, shape (piece,)
        Ascending from 0.
    curve : integer array, shape (piece,)
        Index in a table of curves.
    """

    start_deg: FloatArray
    curve: IndexArray

    @property
    def end_deg(self) -> FloatArray:
        return np.append(self.start_deg[1:], 360.0)

    def curve_at(self, azimuth_deg: FloatArray) -> IndexArray:
        """Curve at azimuths within 0..360; at a break the one that starts there."""
        return self.curve[np.searchsorted(self.start_deg, azimuth_deg, side="right") - 1]


def upper_envelope(obstacles: Sequence[Obstacle]) -> Outline:
    """The one outline of the solid obstacles that stand on the ground.

    Parameters
    ----------
    obstacles : sequence of Obstacle
        Foliage and what hangs free is left out. Where two are equally high the earlier one counts.

    Returns
    -------
    Outline
        Its `obstacle` counts positions in the given sequence. Crossings are exact to rounding.
    """
    curves = obstacle_curves(
        obstacles, [i for i, o in enumerate(obstacles) if o.cover == "solid" and not o.hangs_free]
    )
    circle = envelope(curves, curves.obstacle[:-1])
    return Outline(
        start_deg=circle.start_deg,
        end_deg=circle.end_deg,
        obstacle=curves.obstacle[circle.curve],
        start_elevation_deg=edge_elevation(curves, circle.curve, circle.start_deg),
        end_elevation_deg=edge_elevation(curves, circle.curve, circle.end_deg),
        straight_in_space=curves.straight_in_space[circle.curve],
    )


def obstacle_curves(
    obstacles: Sequence[Obstacle], which: Iterable[int], *, underside: bool = False
) -> Curves:
    """Curves of the upper edges (or undersides) of some obstacles, owned by their positions."""
    chosen = [(index, obstacles[index]) for index in which]
    azimuth_deg = np.concatenate([np.empty(0), *(one.azimuth_deg for _, one in chosen)])
    edges = [one.underside_deg if underside else one.elevation_deg for _, one in chosen]
    elevation_deg = np.concatenate([np.empty(0), *(edge for edge in edges if edge is not None)])
    points = np.array([len(one.azimuth_deg) for _, one in chosen], dtype=np.int64)
    owner = np.repeat(np.array([index for index, _ in chosen], dtype=np.int64), points)
    straight = np.repeat(np.array([one.straight_in_space for _, one in chosen], dtype=np.bool_), points)
    joined = np.flatnonzero(owner[1:] == owner[:-1])
    return curves_between(
        start_deg=azimuth_deg[joined],
        end_deg=azimuth_deg[joined + 1],
        start_elevation_deg=elevation_deg[joined],
        end_elevation_deg=elevation_deg[joined + 1],
        straight_in_space=straight[joined],
        obstacle=owner[joined],
    )


def outline_curves(outline: Outline) -> tuple[Curves, Circle]:
    """The curves of an outline, owned by obstacle, and how they follow each other round the circle."""
    curves = curves_between(
        start_deg=outline.start_deg,
        end_deg=outline.end_deg,
        start_elevation_deg=outline.start_elevation_deg,
        end_elevation_deg=outline.end_elevation_deg,
        straight_in_space=outline.straight_in_space,
        obstacle=outline.obstacle,
    )
    return curves, circle_of(curves)


def circle_of(curves: Curves) -> Circle:
    """The circle of curves that do not overlap; they may stand in any order."""
    _, start_deg, curve = _filled(curves, np.zeros(len(curves) - 1, dtype=np.int64))
    return Circle(start_deg=start_deg, curve=curve)


def envelope(curves: Curves, group: IndexArray) -> Circle:
    """The upper envelope of a table of curves.

    Parameters
    ----------
    curves : Curves
        The table.
    group : integer array, shape (curve,)
        Curves of one group do not overlap in azimuth; "nothing" is in none.
    """
    _, group, size = np.unique(group, return_inverse=True, return_counts=True)
    # Small groups first: a long survey then waits until all the rest is one, and is merged once.
    rank = np.argsort(np.argsort(size, kind="stable"), kind="stable")
    size = np.sort(size)
    group, start_deg, curve = _filled(curves, rank[group])
    while (groups := int(group[-1]) + 1) > 1:
        held = groups > 2 and size[-1] > size[:-1].sum()
        rest = len(group) if not held else int(np.searchsorted(group, groups - 1))
        merged = _merged_pairs(curves, group[:rest], start_deg[:rest], curve[:rest])
        pairs = int(merged[0][-1]) + 1
        group = np.append(merged[0], np.full(len(group) - rest, pairs))
        start_deg = np.append(merged[1], start_deg[rest:])
        curve = np.append(merged[2], curve[rest:])
        size = np.bincount(group)
    return Circle(start_deg=start_deg, curve=curve)


def envelopes(
    curves: Curves, group: IndexArray, owner: IndexArray
) -> tuple[IndexArray, FloatArray, IndexArray]:
    """The upper envelopes of the curves of many owners at once, each by itself.

    Parameters
    ----------
    curves, group
        As for `envelope`.
    owner : integer array, shape (curve,)
        Whose envelope a curve takes part in; the same for all the curves of a group.

    Returns
    -------
    owner, start_deg, curve : array, shape (piece,)
        Pieces ascending by owner, then from 0 degrees to 360.
    """
    _, one_of_group, group = np.unique(group, return_index=True, return_inverse=True)
    owners, of_group = np.unique(owner[one_of_group], return_inverse=True)
    # Groups are counted by owner, so that neighbours to be merged have one owner.
    rank = np.argsort(np.argsort(of_group, kind="stable"), kind="stable")
    of_group = np.sort(of_group)
    group, start_deg, curve = _filled(curves, rank[group])
    while len(of_group) > len(owners):
        size = np.bincount(of_group)
        pairs = (size + 1) // 2
        from_group, from_pair = np.cumsum(size) - size, np.cumsum(pairs) - pairs
        number = np.arange(len(of_group)) + (2 * from_pair - from_group)[of_group]
        alone = (2 * from_pair + size)[size % 2 == 1]  # an odd one is merged with nothing
        group, start_deg, curve = _merged_pairs(
            curves,
            np.append(number[group], alone),
            np.append(start_deg, np.zeros(len(alone))),
            np.append(curve, np.full(len(alone), -1)),
        )
        of_group = np.repeat(np.arange(len(owners)), pairs)
    return owners[of_group[group]], start_deg, curve


def _filled(curves: Curves, group: IndexArray) -> tuple[IndexArray, FloatArray, IndexArray]:
    """Group, start and curve of pieces that cover the circle for every group, "nothing" in the gaps."""
    order = np.lexsort((curves.start_deg[:-1], group))
    group, start_deg, end_deg = group[order], curves.start_deg[:-1][order], curves.end_deg[:-1][order]
    if not len(group):
        return np.zeros(1, dtype=np.int64), np.zeros(1), np.array([-1])
    new = np.append(True, group[1:] != group[:-1])
    last = np.append(new[1:], True)
    before_deg = np.where(new, 0.0, np.append(0.0, end_deg[:-1]))
    gap, tail = start_deg > before_deg, last & (end_deg < 360.0)
    all_group = np.concatenate([group, group[gap], group[tail]])
    all_start = np.concatenate([start_deg, before_deg[gap], end_deg[tail]])
    all_curve = np.concatenate([order, np.full(gap.sum() + tail.sum(), -1)])
    order = np.lexsort((all_start, all_group)) if len(all_group) > len(group) else np.arange(len(group))
    return all_group[order], all_start[order], all_curve[order]


def _merged_pairs(
    curves: Curves, group: IndexArray, start_deg: FloatArray, curve: IndexArray
) -> tuple[IndexArray, FloatArray, IndexArray]:
    """Circles 0 and 1, 2 and 3, ... merged into their envelopes; an odd last one stays."""
    second = group % 2 == 1
    pair = group // 2
    order = np.lexsort((start_deg, pair))
    pair, second, start_deg, curve = pair[order], second[order], start_deg[order], curve[order]
    here = np.arange(len(pair))
    one = curve[np.maximum.accumulate(np.where(second, 0, here))]
    other = curve[np.maximum.accumulate(np.where(second, here, 0))]
    if group[-1] % 2 == 0:
        other = np.where(pair == pair[-1], -1, other)
    end_deg = _ends(pair, start_deg)
    wide = end_deg > start_deg
    pair, one, other = pair[wide], one[wide], other[wide]
    start_deg, end_deg = start_deg[wide], end_deg[wide]

    contested = np.flatnonzero((one >= 0) & (other >= 0))
    crossing_deg = crossing_azimuths(
        curves, one[contested], other[contested], start_deg[contested], end_deg[contested]
    )
    row, column = np.nonzero(~np.isnan(crossing_deg))
    split = contested[row]
    pair, one, other = (np.append(x, x[split]) for x in (pair, one, other))
    start_deg = np.append(start_deg, crossing_deg[row, column])
    if len(row):
        order = np.lexsort((start_deg, pair))
        pair, one, other, start_deg = pair[order], one[order], other[order], start_deg[order]

    higher = _higher(curves, one, other, 0.5 * (start_deg + _ends(pair, start_deg)))
    changes = np.append(True, (higher[1:] != higher[:-1]) | (pair[1:] != pair[:-1]))
    return pair[changes], start_deg[changes], higher[changes]


def _ends(group: IndexArray, start_deg: FloatArray) -> FloatArray:
    """End of each piece: the next start of its group, or 360."""
    end_deg = np.append(start_deg[1:], 360.0)
    end_deg[np.flatnonzero(group[1:] != group[:-1])] = 360.0
    return end_deg


def _higher(curves: Curves, one: IndexArray, other: IndexArray, azimuth_deg: FloatArray) -> IndexArray:
    """The higher of two curves; of equal ones that of the earlier obstacle."""
    higher = np.maximum(one, other)  # right where one of them is nothing
    both = np.flatnonzero((one >= 0) & (other >= 0))
    one, other, azimuth_deg = one[both], other[both], azimuth_deg[both]
    lead_deg = edge_elevation(curves, one, azimuth_deg) - edge_elevation(curves, other, azimuth_deg)
    earlier = curves.obstacle[one] <= curves.obstacle[other]
    wins = np.where(np.abs(lead_deg) < SAME_EDGE_DEG, earlier, lead_deg > 0.0)
    higher[both] = np.where(wins, one, other)
    return higher
