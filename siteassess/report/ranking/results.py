"""The ranking for programs: one JSON text with fixed keys, and a table of one row a site."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from siteassess.candidates.candidate import room
from siteassess.report.plain_json import as_json, rounded
from siteassess.report.ranking.criteria import criterion_columns
from siteassess.report.ranking.words import mistake_text
from siteassess.report.satellite_table import spreadsheet_safe
from siteassess.report.sections.setting import CAUTIONS

if TYPE_CHECKING:
    import pandas as pd

    from siteassess.candidates.candidate import RefusedCandidate
    from siteassess.candidates.ranking import Difference, RankedSite, Ranking
    from siteassess.verdict.verdict import Finding

__all__ = ["FORMAT", "ranking_csv", "ranking_frame", "ranking_json", "ranking_record"]

FORMAT = "siteassess-ranking/1"
COLUMNS = (
    "rank",
    "name",
    "site",
    "latitude_deg",
    "longitude_deg",
    "height_m",
    "verdict",
    "required",
    "required_missed",
    "margin",
    "usable_satellites",
)
TEXT_COLUMNS = ("name", "site", "verdict", "beaten_by", "dominated_by")


def ranking_json(ranking: Ranking) -> str:
    """The record of a ranking as JSON, ending in a newline; the same text for the same sites in any order."""
    return as_json(ranking_record(ranking))


def ranking_record(ranking: Ranking) -> dict[str, Any]:
    """A ranking as plain dictionaries, lists, texts and rounded numbers; what does not exist is None.

    Returns
    -------
    dict
        Keys as in docs/methods/candidates.md.
    """
    from siteassess import __version__

    return {
        "format": FORMAT,
        "tool_version": __version__,
        "ranking": [_site(site) for site in ranking.sites],
        "refused": [_refused(site) for site in ranking.refused],
        "asked_differently": list(ranking.asked_differently),
        "same_criteria": ranking.same_criteria,
        "cautions": list(CAUTIONS),
    }


def _site(site: RankedSite) -> dict[str, Any]:
    candidate = site.candidate
    return {
        "rank": site.rank,
        "name": candidate.name,
        "site": candidate.place,
        "latitude_deg": rounded(candidate.latitude_deg, "deg"),
        "longitude_deg": rounded(candidate.longitude_deg, "deg"),
        "height_m": rounded(candidate.height_m, "m"),
        "verdict": candidate.outcome,
        "required": len(candidate.required),
        "required_missed": candidate.missed,
        "margin": rounded(candidate.margin, "share"),
        "usable_satellites": rounded(candidate.usable_satellites, "count"),
        "beaten_by": list(site.beaten_by),
        "dominated_by": list(site.dominated_by),
        "sky": _sky(site),
        "findings": [_finding(finding) for finding in candidate.findings],
        "signals": [
            {
                "signal": shares.signal,
                "usable_share": rounded(shares.usable_share, "share"),
                "lost_share": rounded(shares.lost_share, "share"),
                "hidden_share": rounded(shares.hidden_share, "share"),
                "cn0_median_dbhz": rounded(shares.cn0_median_dbhz, "db"),
            }
            for shares in candidate.signals
        ],
        "against_first": [_difference(difference) for difference in site.differences],
    }


def _sky(site: RankedSite) -> dict[str, float | None]:
    candidate = site.candidate
    shares = {
        "blocked_share_above_mask": candidate.sky.blocked_share_above_mask,
        "foliage_share_above_mask": candidate.sky.foliage_share_above_mask,
        "unsurveyed_share": candidate.sky.unsurveyed_share,
        "blocked_satellite_time_share": candidate.blocked_satellite_time_share,
    }
    return {key: rounded(share, "share") for key, share in shares.items()}


def _finding(finding: Finding) -> dict[str, Any]:
    return {
        "criterion": finding.criterion,
        "signal": finding.signal,
        "value": rounded(finding.value, finding.unit),
        "limit": rounded(finding.limit, finding.unit),
        "unit": finding.unit,
        "required": finding.required,
        "outcome": finding.outcome,
        "room": rounded(room(finding), "share"),
    }


def _difference(difference: Difference) -> dict[str, Any]:
    return {
        "criterion": difference.criterion,
        "signal": difference.signal,
        "unit": difference.unit,
        "required": difference.required,
        "value": rounded(difference.value, difference.unit),
        "first_value": rounded(difference.first_value, difference.unit),
        "gain": rounded(difference.gain, "share"),
    }


def _refused(site: RefusedCandidate) -> dict[str, Any]:
    return {"site": site.place, "mistakes": [mistake_text(mistake) for mistake in site.mistakes]}


def ranking_frame(ranking: Ranking) -> pd.DataFrame:
    """One row a site in the order of choice: rank, names, verdict, margin, and the value of every criterion.

    The column of a criterion is its key, followed by the signal where it is about one; NaN where a site is
    not held against it.
    """
    import pandas as pd

    columns = criterion_columns(ranking)
    rows = []
    for site in ranking.sites:
        record = _site(site)
        values = {
            (finding["criterion"], finding["signal"]): finding["value"] for finding in record["findings"]
        }
        rows.append(
            {key: record[key] for key in COLUMNS}
            | {key: " ".join(map(str, record[key])) for key in ("beaten_by", "dominated_by")}
            | record["sky"]
            | {" ".join(filter(None, column)): values.get(column) for column in columns}
        )
    return pd.DataFrame(rows)


def ranking_csv(ranking: Ranking) -> str:
    """The table as CSV; text cells that a spreadsheet would take for a formula get a leading apostrophe."""
    frame = ranking_frame(ranking)
    for name in TEXT_COLUMNS:
        frame[name] = [spreadsheet_safe(text) for text in frame[name]]
    return frame.to_csv(index=False, lineterminator="\n")
