"""The assembled horizon on a terminal, and for programs."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from siteassess.report.disagreement_results import disagreement_records
from siteassess.report.phrases import azimuth_range, compass_point, number, percent, plain
from siteassess.report.plain_json import as_json, rounded
from siteassess.report.sections.sources import disagreement_sentence
from siteassess.report.summary import PLAIN_SIGNS

if TYPE_CHECKING:
    from siteassess.horizon.shares import SkyShares
    from siteassess.horizon.skyline import Obstacle, Skyline
    from siteassess.site_file.model import Site

__all__ = ["FORMAT", "horizon_json", "horizon_lines"]

FORMAT = "siteassess-horizon/1"
WIDTH = 100
NAME_WIDTH, LONGEST_NAME = 28, 27
MOST_OBSTACLES = 20
SECTORS = ("N", "NE", "E", "SE", "S", "SW", "W", "NW")


def horizon_lines(site: Site, skyline: Skyline, shares: SkyShares) -> list[str]:
    """Hidden shares by sector, the obstacles with their sources, and where sources disagree.

    Parameters
    ----------
    site : Site
        Its mask bounds what is counted.
    skyline : Skyline
        What hides the sky.
    shares : SkyShares
        Its shares above the mask.
    """
    from textwrap import wrap

    lines = [plain(site.place.name)]
    lines += [f"  {line}" for line in _sky_lines(site, skyline, shares)]
    lines += ["", *_sector_lines(shares), "", *_obstacle_lines(skyline, shares)]
    if skyline.disagreements:
        lines += ["", "  A survey and a model disagree here; the higher one counts:"]
        for found in skyline.disagreements:
            lines += wrap(
                disagreement_sentence(found), WIDTH, initial_indent="    ", subsequent_indent="      "
            )
    remarks = [f"{survey.file}: {remark}" for survey in skyline.surveys for remark in survey.remarks]
    if remarks or skyline.remarks:
        lines.append("")
    for remark in (*remarks, *skyline.remarks):
        lines += wrap(plain(remark), WIDTH, initial_indent="  ", subsequent_indent="    ")
    return [line.translate(PLAIN_SIGNS).rstrip() for line in lines]


def _sky_lines(site: Site, skyline: Skyline, shares: SkyShares) -> list[str]:
    mask = f"{site.require.elevation_mask_deg:g}°"
    lines = [
        f"Hidden: {percent(shares.blocked_share_above_mask)} of the sky above the {mask} mask, "
        f"{percent(shares.blocked_share_of_hemisphere)} of the hemisphere; highest edge "
        f"{number(shares.peak_elevation_deg)}° at azimuth {number(shares.peak_azimuth_deg)}° "
        f"({compass_point(shares.peak_azimuth_deg)})."
    ]
    if shares.foliage_share_above_mask > 0.0:
        lines.append(f"Leaves stand before another {percent(shares.foliage_share_above_mask)}.")
    gaps = skyline.unsurveyed_deg.reshape(-1, 2).tolist()
    if gaps:
        ranges = ", ".join(azimuth_range(start, end) for start, end in gaps)
        lines.append(f"Nobody looked at {ranges}: {percent(shares.unsurveyed_share)} above the mask.")
    return lines


def _sector_lines(shares: SkyShares) -> list[str]:
    return [
        "  Hidden above the mask, by sector",
        "   " + "".join(f"{name:>9}" for name in SECTORS),
        "   " + "".join(f"{percent(share):>9}" for share in shares.sector_blocked_share),
    ]


def _obstacle_lines(skyline: Skyline, shares: SkyShares) -> list[str]:
    taken = shares.obstacle_blocked_share_above_mask
    order = sorted(range(len(taken)), key=lambda index: -taken[index])
    lines = [f"  {'obstacle':<{NAME_WIDTH}}{'azimuths':<21}{'highest':>8}{'hides':>8}  source"]
    for index in order[:MOST_OBSTACLES]:
        obstacle = skyline.obstacles[index]
        name = plain(obstacle.name) + (" (leaves)" if obstacle.cover == "foliage" else "")
        name = name if len(name) <= LONGEST_NAME else f"{name[: LONGEST_NAME - 3]}..."
        lines.append(
            f"  {name:<{NAME_WIDTH}}{azimuth_range(*_ends_deg(obstacle)).translate(PLAIN_SIGNS):<21}"
            f"{number(float(obstacle.elevation_deg.max())):>8}{percent(taken[index], 2):>8}"
            f"  {plain(obstacle.source)}"
        )
    if len(order) > MOST_OBSTACLES:
        lines.append(f"  ... and {len(order) - MOST_OBSTACLES} more that hide less")
    return lines if skyline.obstacles else ["  No obstacle is known."]


def _ends_deg(obstacle: Obstacle) -> tuple[float, float]:
    return float(obstacle.azimuth_deg[0]), float(obstacle.azimuth_deg[-1])


def horizon_json(site: Site, skyline: Skyline, shares: SkyShares) -> str:
    """The same as JSON, with the outline piece by piece; the same text for the same site."""
    return as_json(
        {
            "format": FORMAT,
            "site": {"name": site.place.name},
            "elevation_mask_deg": site.require.elevation_mask_deg,
            "sky": {
                "blocked_share_of_hemisphere": rounded(shares.blocked_share_of_hemisphere, "share"),
                "blocked_share_above_mask": rounded(shares.blocked_share_above_mask, "share"),
                "foliage_share_above_mask": rounded(shares.foliage_share_above_mask, "share"),
                "unsurveyed_share": rounded(shares.unsurveyed_share, "share"),
                "peak_elevation_deg": rounded(shares.peak_elevation_deg, "deg"),
                "peak_azimuth_deg": rounded(shares.peak_azimuth_deg, "deg"),
            },
            "sectors": [
                {"sector": name, "blocked_share": rounded(share, "share")}
                for name, share in zip(SECTORS, shares.sector_blocked_share, strict=True)
            ],
            "obstacles": _obstacle_records(skyline, shares),
            "outline": _outline_records(skyline),
            "unsurveyed": [
                {"from_deg": rounded(start, "deg"), "to_deg": rounded(end, "deg")}
                for start, end in skyline.unsurveyed_deg.reshape(-1, 2).tolist()
            ],
            "disagreements": disagreement_records(skyline),
            "remarks": [
                *(remark for survey in skyline.surveys for remark in survey.remarks),
                *skyline.remarks,
            ],
        }
    )


def _obstacle_records(skyline: Skyline, shares: SkyShares) -> list[dict[str, Any]]:
    return [
        {
            "name": obstacle.name,
            "source": obstacle.source,
            "cover": obstacle.cover,
            "hangs_free": obstacle.hangs_free,
            "from_deg": rounded(_ends_deg(obstacle)[0], "deg"),
            "to_deg": rounded(_ends_deg(obstacle)[1], "deg"),
            "peak_elevation_deg": rounded(float(obstacle.elevation_deg.max()), "deg"),
            "blocked_share_above_mask": rounded(share, "share"),
        }
        for obstacle, share in zip(skyline.obstacles, shares.obstacle_blocked_share_above_mask, strict=True)
    ]


def _outline_records(skyline: Skyline) -> list[dict[str, Any]]:
    """Pieces of the solid outline; `obstacle` counts in the list of obstacles, from 0."""
    outline = skyline.outline
    pieces = zip(
        outline.start_deg.tolist(),
        outline.end_deg.tolist(),
        outline.start_elevation_deg.tolist(),
        outline.end_elevation_deg.tolist(),
        outline.straight_in_space.tolist(),
        outline.obstacle.tolist(),
        strict=True,
    )
    return [
        {
            "from_deg": rounded(start_deg, "deg"),
            "to_deg": rounded(end_deg, "deg"),
            "from_elevation_deg": rounded(first_deg, "deg") if index >= 0 else None,
            "to_elevation_deg": rounded(last_deg, "deg") if index >= 0 else None,
            "straight_in_space": straight,
            "obstacle": index if index >= 0 else None,
            "source": skyline.obstacles[index].source if index >= 0 else None,
        }
        for start_deg, end_deg, first_deg, last_deg, straight, index in pieces
    ]
