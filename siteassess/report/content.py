"""What the report says, once: the page and the document only lay it out."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import azimuth_range, number, plain
from siteassess.report.pieces import Content, Section, Table
from siteassess.report.sections.answers import VERDICTS, answers
from siteassess.report.sections.causes import causes_section
from siteassess.report.sections.chain import chain_section
from siteassess.report.sections.changes import changes_section
from siteassess.report.sections.cures import cures_section
from siteassess.report.sections.how_sure import how_sure_section
from siteassess.report.sections.levels import antenna_section, budget_section
from siteassess.report.sections.noise import noise_section
from siteassess.report.sections.outcomes import (
    findings_section,
    obstacles_section,
    satellites_section,
    sectors_section,
    signals_section,
)
from siteassess.report.sections.over_time import over_time_section
from siteassess.report.sections.setting import CAUTIONS, LIMITS, assumptions
from siteassess.report.sections.sources import disagreement_tables
from siteassess.verdict.uncertainty.survey_errors import stated_errors
from siteassess.wording import listed

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.site_file.model import HorizonSource, Mount

__all__ = ["report_content"]

PHOTOGRAPHS = ("Toward north", "Toward east", "Toward south", "Toward west")
SIGNATURES = ("Surveyed by", "Checked by", "Accepted by the owner")
SOURCES = {"survey": "survey of the horizon", "outlines": "building outlines", "terrain": "terrain"}
BEARINGS = {"true-north": "true north", "magnetic-north": "magnetic north", "grid-north": "grid north"}


def report_content(assessment: Assessment) -> Content:
    """Everything that page and document say about an assessment, in the order of reading.

    Parameters
    ----------
    assessment : Assessment
        What `assess` returned.
    """
    from siteassess import __version__

    verdict = assessment.verdict
    return Content(
        title="Site assessment for a GNSS reference-station antenna",
        site=plain(assessment.site.place.name),
        outcome=verdict.outcome,
        verdict=VERDICTS[verdict.outcome],
        answers=answers(assessment),
        facts=_facts(assessment),
        cautions_heading="Cautions",
        cautions=CAUTIONS,
        sections=_sections(assessment),
        sign_heading="Photographs and signatures",
        photographs=PHOTOGRAPHS,
        signatures=SIGNATURES,
        appendix=satellites_section(verdict),
        maker=f"siteassess {__version__}",
    )


def _sections(assessment: Assessment) -> tuple[Section, ...]:
    """All sections, less those about what was not asked for."""
    verdict = assessment.verdict
    sections = (
        _sky_section(assessment),
        _horizon_section(assessment),
        findings_section(assessment),
        how_sure_section(assessment),
        signals_section(assessment),
        obstacles_section(assessment),
        causes_section(assessment),
        cures_section(assessment),
        sectors_section(verdict),
        over_time_section(assessment),
        budget_section(assessment),
        noise_section(assessment),
        chain_section(assessment),
        antenna_section(assessment),
        changes_section(assessment),
        _survey_section(assessment),
        Section(key="assumptions", heading="What was assumed", points=assumptions(assessment)),
        Section(key="limits", heading="Limits of the method", points=LIMITS),
    )
    return tuple(section for section in sections if section is not None)


def _facts(assessment: Assessment) -> tuple[tuple[str, str], ...]:
    site = assessment.site
    position = site.position
    facts = [
        (
            "Survey mark",
            f"{number(position.latitude_deg, 6)}°, {number(position.longitude_deg, 6)}° (WGS 84), "
            f"{number(position.height_m, 2)} m above {position.above.replace('ellipsoid', 'the ellipsoid')}",
        ),
        (
            "Antenna",
            f"{plain(site.antenna.pattern)}, {number(site.mount.phase_centre_height_m, 2)} m above the mark",
        ),
        ("Signals", listed(site.sky.signals)),
        ("Elevation mask", f"{site.require.elevation_mask_deg:g}°"),
        ("Minimum C/N0", _minimum_cn0(assessment)),
    ]
    if roof := _roof(site.mount):
        facts.append(("Roof", roof))
    if site.place.surveyed_by:
        facts.append(("Surveyed by", plain(site.place.surveyed_by)))
    dates = sorted({source.surveyed_on for source in site.horizon if source.surveyed_on})
    if dates:
        facts.append(("Surveyed on", listed([date.isoformat() for date in dates])))
    return tuple(facts)


def _roof(mount: Mount) -> str:
    """How far below the antenna the roof is and what it is made of, as far as the site file says."""
    height_m = mount.height_above_roof_m
    height = "" if height_m is None else f"{number(height_m, 2)} m below the antenna"
    return ", ".join(filter(None, (height, plain(mount.roof_surface or ""))))


def _minimum_cn0(assessment: Assessment) -> str:
    asked = assessment.site.require.min_cn0_dbhz
    if isinstance(asked, str):
        return f"{assessment.budget.signals[0].min_cn0_dbhz:g} dB-Hz ({asked})"
    if isinstance(asked, float | int):
        return f"{asked:g} dB-Hz"
    return "; ".join(
        f"{budget.signal.name} {budget.min_cn0_dbhz:g} dB-Hz" for budget in assessment.budget.signals
    )


def _sky_section(assessment: Assessment) -> Section:
    mask = f"{assessment.site.require.elevation_mask_deg:g}°"
    return Section(
        key="sky",
        heading="The sky above the antenna",
        figure="skyplot",
        figure_caption=(
            "Skyplot: north is up, azimuth runs clockwise, the zenith is in the centre and the horizon at "
            f"the rim. Tracks show one day of nominal orbits above the {mask} mask. Their shade and width "
            "give the margin of C/N0 above the minimum, for the first of the site's signals that the "
            "satellite sends; dashed means below the minimum, dotted means hidden. Numbers at the rim are "
            "those of the obstacle table."
        ),
    )


def _horizon_section(assessment: Assessment) -> Section:
    sky = assessment.verdict.sky
    sentences = []
    if sky.largest_block_deg is not None:
        sentences.append(
            f"The largest stretch of hidden sky runs from azimuth {azimuth_range(*sky.largest_block_deg)}."
            if sky.largest_block_deg[1] - sky.largest_block_deg[0] < 360
            else "Hidden sky runs all round."
        )
    return Section(
        key="horizon",
        heading="The horizon, all round",
        sentences=tuple(sentences),
        figure="panorama",
        figure_caption=(
            "The horizon as seen from the antenna, unrolled from north over east, south and west to north. "
            "Filled: solid; dotted: leaves; hatched: not surveyed; dashed line: elevation mask."
        ),
    )


def _survey_section(assessment: Assessment) -> Section:
    site = assessment.site
    gaps_deg = assessment.skyline.unsurveyed_deg
    sentences = [
        f"Surveyed by: {plain(site.place.surveyed_by)}."
        if site.place.surveyed_by
        else "Surveyed by: not given."
    ]
    if not site.horizon:
        sentences.append("The site file names no horizon. Nothing is known about what hides the sky.")
    if len(gaps_deg):
        gaps = listed([azimuth_range(start, end) for start, end in gaps_deg.tolist()])
        sentences.append(f"Nobody looked at these azimuths: {gaps}.")
    elif site.horizon:
        sentences.append("Every azimuth was looked at.")
    sentences += [
        f"{plain(survey.file)}: {plain(remark)}"
        for survey in assessment.skyline.surveys
        for remark in survey.remarks
    ]
    sentences += [plain(remark) for remark in assessment.skyline.remarks]
    table = Table(
        caption="Sources of the horizon. Errors are one standard deviation.",
        header=(
            "Source",
            "File",
            "Date",
            "Bearings from",
            "Azimuth error",
            "Elevation error",
            "Complete",
            "Instrument",
        ),
        rows=tuple(_source_row(source) for source in site.horizon),
        align="llllrrll",
    )
    return Section(
        key="survey",
        heading="The survey",
        sentences=tuple(sentences),
        tables=((table,) if site.horizon else ()) + disagreement_tables(assessment.skyline),
    )


def _source_row(source: HorizonSource) -> tuple[str, ...]:
    errors = stated_errors(source)

    def error(key: str) -> str:
        if errors[key] is None:
            return "not given"
        return f"{errors[key]:g}°" + ("" if key in source.model_fields_set else f" ({source.instrument})")

    return (
        SOURCES[source.source],
        plain(listed(file.replace("\\", "/").rsplit("/", 1)[-1] for file in source.files)),
        source.surveyed_on.isoformat() if source.surveyed_on else "not given",
        "a landmark" if source.landmark_reading_deg is not None else BEARINGS[source.bearings],
        error("azimuth_error_deg"),
        error("elevation_error_deg"),
        "yes" if source.complete else "not stated",
        _seen_from(source),
    )


def _seen_from(source: HorizonSource) -> str:
    if source.source == "terrain":
        return "the antenna"
    if source.source == "outlines":
        return f"the antenna, with the ground {number(source.ground_up_m, 2)} m above the mark"
    up = "at the antenna" if source.instrument_up_m is None else f"{number(source.instrument_up_m, 2)} m up"
    return (
        f"{number(source.instrument_east_m, 2)} m east, {number(source.instrument_north_m, 2)} m north, {up}"
    )
