"""What every result stands on: assumptions, limits of the method, cautions."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import plain
from siteassess.wording import listed

if TYPE_CHECKING:
    from siteassess.assessment import Assessment

__all__ = ["CAUTIONS", "LIMITS", "assumptions"]

CAUTIONS = (
    "Work on roofs and masts, lifting, work near overhead lines, lightning protection and earthing follow "
    "the local codes and are for licensed people.",
    "Near transmitters, keep the local limits of exposure to radio-frequency fields, and have them "
    "checked by those who are licensed to do so.",
    (
        "This is a radio assessment. It approves no structure, no electrical installation and no protection "
        "against falls."
    ),
    "The predictions rest on the survey and on the models named here; they are no measurement.",
    "Only a trial log, recorded at the spot with the antenna in place, confirms them.",
)

LIMITS = (
    "Interference, jamming and reflections from walls, roofs and water are not part of C/N0 here.",
    "Rain, wet snow and ice on the antenna or in trees, and ionospheric scintillation, are not counted.",
    (
        "The skyline is as good as its survey. How sure the verdict is rests on the errors that were stated; "
        "building outlines and terrain count as exact."
    ),
    "Diffraction treats each edge as a straight, perfectly absorbing knife edge, one obstacle at a time.",
    "Losses in leaves differ from tree to tree and with wind and season by several decibels.",
    "Nominal orbits say how often and how long satellites stand where, never at what time of day. "
    "Satellites out of service are not known.",
    "New buildings, cranes, parked vehicles and growing trees change the sky after the survey.",
)


def assumptions(assessment: Assessment) -> tuple[str, ...]:
    """What was taken for granted in this assessment, one sentence each."""
    return (
        *_satellites(assessment),
        *_power(assessment),
        *_obstacles(assessment),
        *_antenna_and_noise(assessment),
        _usable(assessment),
    )


def _satellites(assessment: Assessment) -> list[str]:
    sky = assessment.site.sky
    return [
        f"Satellites fly on the nominal, circular orbits of {listed(sky.systems)}; "
        "every slot is filled and sends each signal that its orbit class sends in full service.",
        "Each system's shares run over its own ground-track cycle; satellites at once are counted over "
        f"{sky.days:g} days in steps of {sky.step_s:g} s.",
        "The elevation mask is held against geometric elevation, the skyline against apparent elevation, "
        "which refraction in a standard atmosphere raises.",
    ]


def _power(assessment: Assessment) -> list[str]:
    signals = [budget.signal for budget in assessment.budget.signals]
    flat = [signal.name for signal in signals if signal.beam == "flat"]
    curved = [signal.name for signal in signals if signal.beam != "flat"]
    recalled = [signal.name for signal in signals if not signal.status.startswith("seen")]
    texts = []
    if assessment.site.sky.power == "typical":
        texts.append(
            "Satellites send as much above the guaranteed power as is typical of their signal: more than "
            "is promised."
        )
    else:
        texts.append("Satellites deliver the power that their interface documents guarantee, and no more.")
    if curved:
        texts.append(f"The power of {listed(curved)} follows the published curve against elevation.")
    if flat:
        texts.append(
            f"No curve is published for {listed(flat)}: the guaranteed power is held at every elevation, "
            "the cautious reading."
        )
    if recalled:
        texts.append(f"The power of {listed(recalled)} was noted without its document at hand.")
    texts.append(
        "C/N0 is that of the component that a receiver tracks, after the loss inside the receiver; "
        "every minimum is held against it."
    )
    return texts


def _obstacles(assessment: Assessment) -> list[str]:
    obstacles = assessment.skyline.obstacles
    texts = []
    if not assessment.site.horizon:
        texts.append("No horizon was given: the whole sky counts as unsurveyed, and nothing is hidden.")
    texts.extend(assessment.site.position.remarks)
    if any(survey.bearings != "true-north" for survey in assessment.skyline.surveys):
        texts.append("Azimuths that were not read from true north were turned to it before use.")
    if any(obstacle.cover == "solid" for obstacle in obstacles):
        texts.append("A satellite behind a solid outline is hidden, however near it stands to the edge.")
    if any(obstacle.cover == "solid" and obstacle.distance_m is None for obstacle in obstacles):
        texts.append("Solid edges without a distance cost nothing beside them; those with one diffract.")
    if any(obstacle.cover == "foliage" for obstacle in obstacles):
        texts.append("Leaves weaken a signal by the length of its path through them, and hide nothing.")
        texts.append(f"The loss of leaves follows the model {assessment.site.foliage.model}.")
    return texts + _growth(assessment)


def _growth(assessment: Assessment) -> list[str]:
    """How trees were grown, where the site file asks for it."""
    years = assessment.site.require.good_for_years
    if years is None:
        return []
    trees = [one for one in assessment.skyline.obstacles if one.cover == "foliage"]
    left = [plain(one.name) for one in trees if one.distance_m is None]
    texts = [
        f"For the time after {years:g} years the tops of trees were raised by their growth; how far a signal "
        "goes through their leaves, and everything else, stayed as it is."
    ]
    if not trees:
        texts = [f"Nothing in the surveys grows: {years:g} years change nothing."]
    if left:
        texts.append(f"Not grown, because no distance is known: {listed(left)}.")
    return texts


def _antenna_and_noise(assessment: Assessment) -> list[str]:
    pattern = assessment.pattern
    texts = [f"The gain pattern “{plain(pattern.name)}” is used at every carrier without change."]
    if len(pattern.carrier_hz) > 1:
        texts = [f"The gain pattern “{plain(pattern.name)}” is read between its carriers."]
    if pattern.rests_on:
        texts.append(f"It rests on: {plain(pattern.rests_on)}.")
    texts.extend(plain(remark) for remark in pattern.remarks)
    if pattern.cross_gain_dbic is None:
        texts.append(
            "No cross-polar gain is known: power missing from the pattern counts as loss or cross-polar, "
            "unknown, at 290 K."
        )
    texts.append(
        "Ground, obstacles and leaves radiate as bodies of 290 K, leaves by what they hold back; the open "
        "sky has its own brightness."
    )
    return texts


def _usable(assessment: Assessment) -> str:
    also = "or" if assessment.site.require.count_weakened else "and not"
    weakened = (
        "signals that an obstacle or leaves weaken by 1 dB or more count as long as they are strong enough"
        if also == "or"
        else "signals that an obstacle or leaves weaken by 1 dB or more do not count"
    )
    return (
        "A signal is usable when its satellite stands above the mask, is not hidden and reaches the "
        f"minimum C/N0; {weakened}."
    )
