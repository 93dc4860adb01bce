"""A skyline as a survey file: what `read_survey` reads as the same skyline again.

The file counts from the antenna's phase centre and from true north. It holds no growth of trees, and no
obstacle's source.
"""

import csv
import io
from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from siteassess.horizon.curves import BoolArray, FloatArray
from siteassess.horizon.finer import cut_off, with_other_lines
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import GENERAL_SKYLINE, Obstacle, Skyline
from siteassess.horizon.survey.carry import Points

__all__ = ["COLUMNS", "horizon_csv"]

COLUMNS = (
    "azimuth_deg",
    "elevation_deg",
    "slant_distance_m",
    "obstacle",
    "cover",
    "leaf",
    "depth_m",
    "underside_deg",
    "width_m",
)
ABOVE_THE_HEADER = (
    "# The skyline as seen from the antenna's phase centre, azimuths from true north.",
    '# Its block in a site file: source = "survey", complete = true, and no key of the instrument.',
)
DECIMALS = 6
LOWEST_DEG = -5.0  # the format knows no lower edges
NEAREST_M = 0.0011  # nearer to the antenna's axis a point has no azimuth
THINNEST_DEG = THINNEST_M = 10.0**-DECIMALS
SAME_PART = 1e-9
FORMULA_SIGNS = ("=", "+", "-", "@")

Row = dict[str, str]


def horizon_csv(skyline: Skyline) -> str:
    """The text of a survey file that gives this skyline.

    Parameters
    ----------
    skyline : Skyline
        Whatever its sources. General skylines become one, their envelope.

    Returns
    -------
    str
        Numbers have six decimals. Edges below -5 degrees lie at -5. What hangs over the antenna's axis
        carries no distances, since the format cannot say how far away the zenith is.
    """
    rows = list(_general_rows([one for one in skyline.obstacles if _is_general(one)]))
    names = {GENERAL_SKYLINE}
    for obstacle in skyline.obstacles:
        if not _is_general(obstacle):
            rows += _rows(obstacle, _label(obstacle.name, names))
    for start_deg, end_deg in skyline.unsurveyed_deg.reshape(-1, 2).tolist():
        if end_deg - start_deg >= THINNEST_DEG:
            label = _label("not looked at", names)
            for azimuth_deg in (start_deg, end_deg):
                rows.append(_row(azimuth_deg, 0.0) | {"obstacle": label, "cover": "unsurveyed"})
    if not rows:  # everything was looked at, and nothing stands there
        rows = [_row(0.0, LOWEST_DEG)]
    text = io.StringIO()
    table = csv.DictWriter(text, COLUMNS, restval="", lineterminator="\n")
    table.writeheader()
    table.writerows(rows)
    return "\n".join([*ABOVE_THE_HEADER, text.getvalue()])


def _is_general(obstacle: Obstacle) -> bool:
    is_plain = obstacle.cover == "solid" and not obstacle.hangs_free and not obstacle.straight_in_space
    return obstacle.name == GENERAL_SKYLINE and is_plain


def _general_rows(generals: list[Obstacle]) -> Iterator[Row]:
    """The unlabelled rows, from 0 to 360 degrees."""
    if not generals:
        return
    outline = upper_envelope(generals)
    ends_deg = np.stack([outline.start_deg, outline.end_deg], axis=1)
    distance_m = np.full(ends_deg.shape, np.nan)
    for index, obstacle in enumerate(generals):
        own = outline.obstacle == index
        if obstacle.distance_m is not None:
            distance_m[own] = _distances(obstacle, obstacle.distance_m, ends_deg[own])
    unknown = np.full(ends_deg.size, np.nan)
    points = Points(
        azimuth_deg=ends_deg.ravel(),
        elevation_deg=np.stack([outline.start_elevation_deg, outline.end_elevation_deg], axis=1).ravel(),
        underside_deg=unknown,
        distance_m=distance_m.ravel(),
        depth_m=unknown,
    )
    points = cut_off(points, LOWEST_DEG, straight_in_space=False)
    points = points.taken(_needed(points))
    one_level = len(points.azimuth_deg) == 2 and np.ptp(points.elevation_deg) == 0.0
    # 360 is 0 again, unless there is a vertical edge.
    if one_level or points.elevation_deg[-1] == points.elevation_deg[0]:
        points = points.taken(np.arange(len(points.azimuth_deg) - 1))
    for azimuth_deg, elevation_deg, away_m in zip(
        points.azimuth_deg.tolist(), points.elevation_deg.tolist(), points.distance_m.tolist(), strict=True
    ):
        yield _row(azimuth_deg, elevation_deg) | {"slant_distance_m": _number(away_m)}


def _distances(obstacle: Obstacle, distance_m: FloatArray, ends_deg: FloatArray) -> FloatArray:
    """Distances at both ends of pieces of a general skyline, each between two of its points."""
    middle_deg = ends_deg.mean(axis=1)
    first_deg = obstacle.azimuth_deg[0]
    turn_deg = 360.0 * np.ceil((first_deg - middle_deg) / 360.0)
    left = np.searchsorted(obstacle.azimuth_deg, middle_deg + turn_deg, side="right") - 1
    left = np.clip(left, 0, len(distance_m) - 2)
    start_deg = obstacle.azimuth_deg[left]
    part = (ends_deg.T + turn_deg - start_deg) / (obstacle.azimuth_deg[left + 1] - start_deg)
    first, last = distance_m[left], distance_m[left + 1]
    # A neighbour without a distance says nothing about a point itself.
    known = np.where(part < SAME_PART, first, np.where(part > 1.0 - SAME_PART, last, np.nan))
    between = first + part * (last - first)
    return np.asarray(np.where(np.isnan(between), known, between).T)


def _rows(obstacle: Obstacle, label: str) -> Iterator[Row]:
    """The rows of one named obstacle."""
    foliage = obstacle.cover == "foliage"
    texts = {"obstacle": label, "cover": obstacle.cover, "leaf": obstacle.leaf if foliage else ""}
    points = _points(obstacle)
    if obstacle.width_m is not None and len(points.azimuth_deg) == 2:
        texts["width_m"] = _number(obstacle.width_m)
        points = _pole(points)
    else:
        points = _as_read(points, obstacle.straight_in_space)
        points = points.taken(_needed(points))
        if points.azimuth_deg[-1] - points.azimuth_deg[0] < THINNEST_DEG:
            points = replace(points, azimuth_deg=points.azimuth_deg[0] + np.array([0.0, THINNEST_DEG]))
    for index in range(len(points.azimuth_deg)):
        yield (
            _row(float(points.azimuth_deg[index]), float(points.elevation_deg[index]))
            | {
                "slant_distance_m": _number(float(points.distance_m[index])),
                "depth_m": _number(float(points.depth_m[index])),
                "underside_deg": _number(float(points.underside_deg[index])),
            }
            | texts
        )


def _points(obstacle: Obstacle) -> Points:
    unknown = np.full(len(obstacle.azimuth_deg), np.nan)
    return Points(
        azimuth_deg=obstacle.azimuth_deg,
        elevation_deg=obstacle.elevation_deg,
        underside_deg=unknown if obstacle.underside_deg is None else obstacle.underside_deg,
        distance_m=unknown if obstacle.distance_m is None else obstacle.distance_m,
        depth_m=unknown if obstacle.depth_m is None else np.maximum(obstacle.depth_m, THINNEST_M),
    )


def _pole(points: Points) -> Points:
    """The one row of a pole: its middle, as far away as it was."""
    elevation_deg = np.maximum(points.elevation_deg, LOWEST_DEG)
    middle = replace(
        points,
        azimuth_deg=np.full(2, points.azimuth_deg.mean()),
        elevation_deg=elevation_deg,
        distance_m=points.horizontal_m / np.cos(np.deg2rad(elevation_deg)),
    )
    return middle.taken(np.array([0]))


def _as_read(points: Points, straight_in_space: bool) -> Points:
    """The edge above the lowest level, with points for the kind of line that its distances call for."""
    known = ~np.isnan(points.distance_m)
    if known.any() and not known.all():
        nearest = np.abs(np.arange(len(known))[:, None] - np.flatnonzero(known)).argmin(axis=1)
        points = replace(points, distance_m=points.distance_m[np.flatnonzero(known)[nearest]])
    points = cut_off(points, LOWEST_DEG, straight_in_space=straight_in_space)
    will_be_straight = bool(known.any()) and bool((points.horizontal_m > NEAREST_M).all())
    if will_be_straight != straight_in_space:
        points = with_other_lines(points, straight_in_space=straight_in_space)
    if not will_be_straight:
        points = replace(points, distance_m=np.full(len(points.azimuth_deg), np.nan))
    return points


def _needed(points: Points) -> BoolArray:
    """Points without repetition, at most two at one azimuth as it is written."""
    azimuth_deg = np.round(points.azimuth_deg, DECIMALS)
    same = azimuth_deg[1:] == azimuth_deg[:-1]
    inner = np.append(False, same) & np.append(same, False)
    repeated = np.append(False, same & (np.diff(points.elevation_deg) == 0.0)) & ~inner
    kept: BoolArray = ~inner & ~repeated
    kept[-1] |= kept.sum() < 2
    return kept


def _row(azimuth_deg: float, elevation_deg: float) -> Row:
    turned_deg = azimuth_deg if azimuth_deg <= 360.0 else azimuth_deg % 360.0
    return {"azimuth_deg": _number(turned_deg), "elevation_deg": _number(min(elevation_deg, 90.0))}


def _label(name: str, names: set[str]) -> str:
    """A name on one line that no other obstacle of the file has, and no spreadsheet takes for a formula."""
    clean = " ".join("".join(sign if sign.isprintable() else " " for sign in name).split()) or "obstacle"
    clean = f"'{clean}" if clean.startswith(FORMULA_SIGNS) else clean
    label, count = clean, 1
    while label in names:
        count += 1
        label = f"{clean} ({count})"
    names.add(label)
    return label


def _number(value: float) -> str:
    if np.isnan(value):
        return ""
    text = f"{value:.{DECIMALS}f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text
