"""Section on what would help at this spot: a taller mast, or other requirements."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import in_unit, number, percent, plain
from siteassess.report.pieces import Section, Table
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.cures.heights import is_asked
from siteassess.wording import listed

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.cures.askable import Askable
    from siteassess.verdict.cures.heights import Heights

__all__ = ["cures_section"]

MOST_SIGNALS = 6
STABILITY = (
    "A taller mast costs stability. Guidelines for reference stations ask for a monument on rock or massive "
    "concrete; a mast bends in wind and sun by more the taller it is, and what moves the antenna moves "
    "every position measured from it. Its strength is for a structural engineer to confirm."
)


def cures_section(assessment: Assessment) -> Section | None:
    """Criteria against height, and what could be asked of the spot; None where that was not asked for."""
    found = assessment.explanation
    if found is None:
        return None
    sentences = [_asked_now(found.lowest_mask_for_all_deg)]
    tables = []
    if found.heights is None:
        sentences.append(_no_heights(assessment))
    else:
        sentences += _height_sentences(assessment, found.heights)
        tables.append(_heights_table(assessment, found.heights))
    tables.append(_askable_table(assessment, found.askable))
    return Section(
        key="cures",
        heading="What would help at this spot",
        sentences=tuple(sentence for sentence in sentences if sentence),
        tables=tuple(tables),
    )


def _asked_now(mask_deg: float | None) -> str:
    if mask_deg is None:
        return "No elevation mask up to 60° would let every signal pass."
    return f"With the C/N0 asked for now every signal passes above a mask of {mask_deg:g}°."


def _no_heights(assessment: Assessment) -> str:
    mount = assessment.site.mount
    if not is_asked(assessment.site, assessment.verdict):
        return (
            "Nothing required is missed, so no taller mast was looked at. With max_mast_height_m in the site "
            "file the report shows what one would bring."
        )
    if mount.max_mast_height_m == mount.mast_height_m:
        return "The mast is as tall as the site file allows."
    return (
        "What a taller mast brings is not known: no obstacle carries a distance. Survey distances to learn "
        "it."
    )


def _height_sentences(assessment: Assessment, heights: Heights) -> list[str]:
    present, highest = (f"{number(mast_m, 2)} m" for mast_m in (heights.present_m, heights.highest_m))
    unproven = assessment.verdict.sky.unsurveyed_share > 0.0
    sky = ", as far as the sky was surveyed" if unproven else ""
    sentences = []
    if heights.lowest_passing_m is None:
        missed = listed(
            dict.fromkeys(
                plain(
                    f"{one.signal}: {read_criteria()[one.criterion].title}"
                    if one.signal
                    else read_criteria()[one.criterion].title
                )
                for one in heights.missed_at_highest
            )
        )
        sentences.append(f"No mast up to {highest} is tall enough. Still missed there: {missed}.")
    elif heights.lowest_passing_m > heights.present_m:
        sentences.append(
            "The lowest mast at which nothing required is missed is "
            f"{number(heights.lowest_passing_m, 2)} m tall{sky}; it is {present} now."
        )
    else:
        sentences.append(f"Nothing required is missed with the present mast of {present}{sky}.")
    if heights.keep_angles:
        names = listed([plain(name) for name in heights.keep_angles[:6]])
        sentences.append(
            f"Without a full set of distances, these keep their angles at every height: {names}."
        )
    if any(
        source.source == "survey" and source.instrument_up_m is None for source in assessment.site.horizon
    ):
        eye_m = number(assessment.site.mount.phase_centre_height_m, 3)
        sentences.append(
            "The survey counts as taken at the present phase centre. When mast_height_m is changed in the "
            f"site file, instrument_up_m = {eye_m} keeps it there; height_above_roof_m, where given, "
            "grows with the mast."
        )
    if heights.lowest_passing_m != heights.present_m:
        sentences.append(STABILITY)
    return sentences


def _heights_table(assessment: Assessment, heights: Heights) -> Table:
    shares = heights.steps[0].usable_share
    signals = [
        signal for signal in shares if signal in sorted(shares, key=lambda name: shares[name])[:MOST_SIGNALS]
    ]
    keys = list(heights.steps[0].values)
    criteria = read_criteria()
    return Table(
        caption=(
            "Usable share of each signal, and other required criteria that the height changes, against the "
            "height of the mast. By the angular form: shares within 0.2 % of satellite-time."
        ),
        header=("Mast", *map(plain, signals), *(criteria[key].title for key in keys), "Required"),
        rows=tuple(
            (
                f"{number(step.mast_height_m, 2)} m",
                *(percent(step.usable_share[signal]) for signal in signals),
                *(in_unit(step.values[key], criteria[key].unit) for key in keys),
                "missed" if step.misses else "met",
            )
            for step in heights.steps
        ),
        align="r" + "r" * (len(signals) + len(keys)) + "l",
        tones=tuple("missed" if step.misses else "met" for step in heights.steps),
    )


def _askable_table(assessment: Assessment, askable: tuple[Askable, ...]) -> Table:
    def level(value_dbhz: float | None) -> str:
        # Down to the tenth: rounded up it would not pass.
        return "none" if value_dbhz is None else number(int(value_dbhz * 10.0) / 10.0)

    mask_deg = assessment.site.require.elevation_mask_deg
    return Table(
        caption=(
            "What could be asked of this spot as it is, with a usable share of "
            f"{percent(assessment.site.require.min_usable_share)}: the highest minimum of C/N0 that passes "
            f"above the {mask_deg:g}° mask, in dB-Hz, and the lowest mask, in whole degrees, that "
            "passes with the C/N0 asked for now and 0.2 % to spare."
        ),
        header=("Signal", "C/N0 asked now", "Highest that passes", "Lowest mask"),
        rows=tuple(
            (
                plain(one.signal),
                number(one.min_cn0_dbhz),
                level(one.highest_min_cn0_dbhz),
                "none up to 60°" if one.lowest_mask_deg is None else f"{one.lowest_mask_deg:g}°",
            )
            for one in askable
        ),
        align="lrrr",
    )
