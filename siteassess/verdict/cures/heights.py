"""What a taller mast brings: criteria against height, and the lowest height at which nothing is missed."""

from collections.abc import Callable
from dataclasses import dataclass
from math import ceil, radians, sin

import numpy as np

from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.raised import keeps_its_angles, raised
from siteassess.horizon.shares import sky_shares
from siteassess.horizon.skyline import Skyline
from siteassess.site_file.model import Mount, Site
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.cures.angular import AngularForm, taken
from siteassess.verdict.cures.angular_shares import noise_gain_db, usable_weights, within_reach
from siteassess.verdict.verdict import Finding, Verdict

__all__ = ["DEFAULT_RISE_M", "HeightStep", "Heights", "at_height", "heights", "highest_mast_m", "is_asked"]

HEIGHTS = 21
DEFAULT_RISE_M = 5.0  # own default, where the site file names no tallest mast
STEP_M = 0.01  # masts are cut to the centimetre
MOST_ASSESSMENTS = 24
TINY = 1e-300
OPEN_SKY = Skyline(obstacles=(), outline=upper_envelope(()), unsurveyed_deg=np.empty((0, 2)))
NOISE_AT = (0, HEIGHTS // 2, HEIGHTS - 1)  # noise bends little with height: three heights tell the others


@dataclass(frozen=True, slots=True, kw_only=True)
class HeightStep:
    """The site with a mast of one height, by the angular form.

    Attributes
    ----------
    mast_height_m : float
        Antenna reference point above the survey mark.
    usable_share : dict of str to float
        By signal.
    values : dict of str to float
        By key of the criteria table: required criteria, other than the usable share, that the height changes.
    misses : bool
        Whether any of these values misses its limit.
    """

    mast_height_m: float
    usable_share: dict[str, float]
    values: dict[str, float]
    misses: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Heights:
    """What a taller mast brings.

    Attributes
    ----------
    present_m, highest_m : float
        Mast heights between which was looked.
    steps : tuple of HeightStep
        From the present height up, evenly spaced.
    lowest_passing_m : float or None
        Lowest height, to the centimetre, at which a whole assessment misses nothing; the present one where
        nothing is missed now; None where something is missed at the highest.
    missed_at_highest : tuple of Finding
        Required findings that a whole assessment misses there.
    keep_angles : tuple of str
        Obstacles with points of unknown distance, which look the same from any height here.
    """

    present_m: float
    highest_m: float
    steps: tuple[HeightStep, ...]
    lowest_passing_m: float | None
    missed_at_highest: tuple[Finding, ...]
    keep_angles: tuple[str, ...]


def highest_mast_m(mount: Mount) -> float:
    """The tallest mast to look at."""
    if mount.max_mast_height_m is not None:
        return mount.max_mast_height_m
    return mount.mast_height_m + DEFAULT_RISE_M


def at_height(site: Site, mast_height_m: float) -> Site:
    """The same site with another mast. Surveys made at the present phase centre stay made there."""
    mount, rise_m = site.mount, mast_height_m - site.mount.mast_height_m
    update: dict[str, float] = {"mast_height_m": mast_height_m}
    if mount.height_above_roof_m is not None:
        update["height_above_roof_m"] = mount.height_above_roof_m + rise_m
    sources = tuple(
        source.model_copy(update={"instrument_up_m": mount.phase_centre_height_m})
        if source.source == "survey" and source.instrument_up_m is None
        else source
        for source in site.horizon
    )
    return site.model_copy(update={"mount": mount.model_copy(update=update), "horizon": sources})


def is_asked(site: Site, verdict: Verdict) -> bool:
    """Whether to look at taller masts: something is missed, or the site file names a tallest one."""
    return bool(_missed(verdict)) or site.mount.max_mast_height_m is not None


def heights(
    site: Site,
    skyline: Skyline,
    form: AngularForm,
    verdict: Verdict,
    assessed_at: Callable[[float], Verdict],
) -> Heights | None:
    """What a taller mast brings.

    None where no obstacle carries a distance, so that nothing would change, and where nothing required is
    missed and the site file names no tallest mast, so that nobody asked.

    Parameters
    ----------
    site, skyline, verdict : Site, Skyline, Verdict
        The assessment as it stands.
    form : AngularForm
        The same in the angular form.
    assessed_at : function
        The verdict of a whole assessment with a mast of a given height [m].
    """
    if not is_asked(site, verdict):
        return None
    present_m, highest_m = site.mount.mast_height_m, highest_mast_m(site.mount)
    known = [obstacle for obstacle in skyline.obstacles if obstacle.distance_m is not None]
    if not known or highest_m == present_m:
        return None
    masts_m = np.linspace(present_m, highest_m, HEIGHTS)
    skylines = [raised(skyline, mast_m - present_m) for mast_m in masts_m.tolist()]
    noise = [noise_gain_db(form, skylines[index]) for index in NOISE_AT]
    limits = {one.criterion: one.limit for one in verdict.findings if one.required}
    # From higher up all edges come down: what they do not touch now they never will.
    near = within_reach(form, skyline)
    forms = taken(form, near), taken(form, ~near)
    steps = tuple(
        _step(site, forms, seen, mast_m, _between(noise, masts_m[list(NOISE_AT)].tolist(), mast_m), limits)
        for seen, mast_m in zip(skylines, masts_m.tolist(), strict=True)
    )
    lowest_m: float | None = present_m
    missed: tuple[Finding, ...] = ()
    if _missed(verdict):
        missed = _missed(assessed_at(highest_m))
        lowest_m = None if missed else _lowest_passing_m(steps, verdict, assessed_at)
    return Heights(
        present_m=present_m,
        highest_m=highest_m,
        steps=steps,
        lowest_passing_m=lowest_m,
        missed_at_highest=missed,
        keep_angles=tuple(
            dict.fromkeys(obstacle.name for obstacle in skyline.obstacles if keeps_its_angles(obstacle))
        ),
    )


def _between(noise: list[dict[float, float]], at_m: list[float], mast_m: float) -> dict[float, float]:
    return {
        carrier_hz: float(np.interp(mast_m, at_m, [gain_db[carrier_hz] for gain_db in noise]))
        for carrier_hz in noise[0]
    }


def _step(
    site: Site,
    forms: tuple[AngularForm, AngularForm],
    skyline: Skyline,
    mast_m: float,
    gain_db: dict[float, float],
    limits: dict[str, float],
) -> HeightStep:
    parts = (
        usable_weights(form, seen, gain_db) for form, seen in zip(forms, (skyline, OPEN_SKY), strict=True)
    )
    near, far = parts
    usable_share = {
        signal: (usable + far[signal][0]) / max(total + far[signal][1], TINY)
        for signal, (usable, total) in near.items()
    }
    values, criteria = _other_values(site, skyline, mast_m, limits), read_criteria()
    return HeightStep(
        mast_height_m=mast_m,
        usable_share=usable_share,
        values=values,
        misses=min(usable_share.values()) < limits.get("min_usable_share", 0.0)
        or any(criteria[key].shortfall(value, limits[key]) > 0.0 for key, value in values.items()),
    )


def _other_values(site: Site, skyline: Skyline, mast_m: float, limits: dict[str, float]) -> dict[str, float]:
    """Values of the required criteria on solid angles and on the height above the roof."""
    values: dict[str, float] = {}
    if limits.keys() & {"max_blocked_sky_share", "max_block_share", "max_horizon_deg"}:
        mask_deg = site.require.elevation_mask_deg
        sky = sky_shares(skyline, mask_deg)
        values["max_blocked_sky_share"] = sky.blocked_share_above_mask * (1.0 - sin(radians(mask_deg)))
        values["max_block_share"] = sky.largest_block_share
        values["max_horizon_deg"] = sky.peak_elevation_deg
    if site.mount.height_above_roof_m is not None:
        rise_m = mast_m - site.mount.mast_height_m
        values["min_height_above_roof_m"] = site.mount.height_above_roof_m + rise_m
    return {key: value for key, value in values.items() if key in limits}


def _missed(verdict: Verdict) -> tuple[Finding, ...]:
    return tuple(one for one in verdict.findings if one.required and one.outcome == "missed")


def _worst_shortfall(verdict: Verdict) -> float:
    """Of the required findings, relative to their limits; positive where one is missed."""
    criteria = read_criteria()
    return max(
        criteria[one.criterion].shortfall(one.value, one.limit) for one in verdict.findings if one.required
    )


def _lowest_passing_m(
    steps: tuple[HeightStep, ...], verdict: Verdict, assessed_at: Callable[[float], Verdict]
) -> float:
    """Lowest height by whole assessments, which miss something at the first step and nothing at the last.

    Whole assessments narrow the bracket where a straight line between its ends meets the limit, the angular
    form giving the first guess; every other time the bracket is halved, so that it closes in any case.
    """
    low_m, low_worst = steps[0].mast_height_m, _worst_shortfall(verdict)
    high_m, high_worst = steps[-1].mast_height_m, 0.0
    guess_m = next((step.mast_height_m for step in steps if not step.misses), high_m)
    for count in range(MOST_ASSESSMENTS):
        if high_m - low_m <= 1.5 * STEP_M:
            break
        guess_m = min(max(guess_m, low_m + STEP_M), high_m - STEP_M)
        found = assessed_at(guess_m)
        worst = _worst_shortfall(found)
        if _missed(found):
            low_m, low_worst = guess_m, worst
        else:
            high_m, high_worst = guess_m, worst
        falls = low_worst - high_worst
        part = low_worst / falls if count % 3 < 2 and falls > 0.0 else 0.5
        guess_m = _whole_centimetres(low_m + part * (high_m - low_m))
    return high_m


def _whole_centimetres(height_m: float) -> float:
    return round(ceil(height_m / STEP_M - 1e-6) * STEP_M, 2)
