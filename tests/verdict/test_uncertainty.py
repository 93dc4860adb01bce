"""How sure the verdict is: nothing off, closed forms, whole assessments of surveys that are off, and laws."""

from collections.abc import Callable, Sequence
from dataclasses import replace
from math import cos, degrees, radians, sin
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.special import ndtr

from siteassess import Assessment, assess, read_site
from siteassess.verdict.uncertainty.drawn_site import ANGULAR, drawn_site, drawn_values
from siteassess.verdict.uncertainty.draws import Draws, drawn, only
from siteassess.verdict.uncertainty.how_sure import FindingSpread, Uncertainty, uncertainty
from siteassess.verdict.uncertainty.survey_errors import SurveyErrors, instrument_classes, survey_errors

ONE_PERCENT = 0.01
TWO_TENTHS_OF_A_PERCENT = 0.002  # of satellite-time: columns of one degree over tracks that repeat
TENTH_OF_A_THOUSANDTH = 0.0001  # of the hemisphere
THOUSANDTH_DEG = 0.001
NO_LEVELS = (
    ('pattern = "choke-ring"', 'pattern = "choke-ring"\ngain_error_db = 0'),
    ("[require]", "[sky]\npower_error_db = 0\ndays = 1\n[require]"),
)
# A wall straight in azimuth and elevation: without distances its edge is hard and level.
WALL = "azimuth_deg,elevation_deg,obstacle\n0,0,\n120,30,wall\n240,30,wall\n"
MIXED = (
    "azimuth_deg,elevation_deg,distance_m,obstacle,cover,depth_m,underside_deg\n0,2,,,,,\n90,4,,,,,\n200,1,,,,,\n"
    "120,25,30,hall,solid,,\n160,25,30,hall,solid,,\n200,30,40,jib,solid,,27\n240,30,40,jib,solid,,27\n"
    "300,22,15,limes,foliage,5,\n340,25,15,limes,foliage,5,\n"
)

WriteSite = Callable[..., Path]


def errors_of(**given: float) -> tuple[SurveyErrors, ...]:
    exact = {"azimuth_deg": 0.0, "elevation_common_deg": 0.0, "elevation_point_deg": 0.0, "distance_m": 0.0}
    return (SurveyErrors(file="horizon.csv", **{**exact, **given}),)  # type: ignore[arg-type]


def how_sure(
    found: Assessment, errors: Sequence[SurveyErrors] | None = None, draws: int = 1000
) -> Uncertainty:
    return uncertainty(
        found.site, found.skyline, found.tracks, found.budget, found.verdict, errors=errors, draws=draws
    )


def spread_of(sure: Uncertainty, criterion: str) -> FindingSpread:
    return next(one for one in sure.findings if one.criterion == criterion)


@pytest.mark.parametrize("horizon", [WALL, MIXED])
@pytest.mark.parametrize("limit", ["0.5", "0.9", "0.999"])
def test_without_errors_every_probability_is_the_verdict(
    write_site: WriteSite, horizon: str, limit: str
) -> None:
    path = write_site(
        *NO_LEVELS, ("min_cn0_dbhz = 33", f"min_cn0_dbhz = 33\nmin_usable_share = {limit}"), horizon=horizon
    )
    found = assess(read_site(path))
    sure = how_sure(found, errors_of(), draws=20)
    for spread in sure.findings:
        finding = next(
            one
            for one in found.verdict.findings
            if (one.criterion, one.signal) == (spread.criterion, spread.signal)
        )
        assert spread.p05 == spread.p95 == finding.value
        if spread.probability is not None:
            assert spread.probability == float(finding.outcome != "missed")
    assert (sure.probability == 1.0) == (found.verdict.outcome == "pass")
    assert (sure.narrow, sure.closest, sure.sources) == (False, None, ())


@pytest.mark.parametrize("deviation_deg", [0.2, 1.0])
@pytest.mark.parametrize("above_deg", [-0.7, 0.3, 1.0])
def test_one_common_error_on_a_wall_follows_the_normal_law(
    write_site: WriteSite, deviation_deg: float, above_deg: float
) -> None:
    """Authority: the normal distribution; a level edge over w of the circle hides w (sin e - sin mask)."""
    limit_deg = 30.0 + above_deg
    limit_share = (sin(radians(limit_deg)) - sin(radians(10.0))) / 3.0
    path = write_site(
        *NO_LEVELS,
        (
            "min_cn0_dbhz = 33",
            f"min_cn0_dbhz = 33\nmax_blocked_sky_share = {limit_share}\nmax_block_share = {limit_share}\n"
            f"max_horizon_deg = {limit_deg}",
        ),
        horizon=WALL,
    )
    sure = how_sure(assess(read_site(path)), errors_of(elevation_common_deg=deviation_deg), draws=10_000)
    expected = float(ndtr(above_deg / deviation_deg))
    for criterion in ("max_blocked_sky_share", "max_block_share", "max_horizon_deg"):
        assert spread_of(sure, criterion).probability == pytest.approx(expected, abs=ONE_PERCENT)
    peak = spread_of(sure, "max_horizon_deg")
    # Authority: 1.6449, the 95 % point of the normal distribution.
    assert peak.p95 - peak.p05 == pytest.approx(2 * 1.6449 * deviation_deg, rel=0.05)


def test_errors_of_the_two_ends_of_a_wall_are_independent(write_site: WriteSite) -> None:
    """Authority: both of two independent normal values are below a limit with the square of one's chance."""
    path = write_site(
        *NO_LEVELS, ("min_cn0_dbhz = 33", "min_cn0_dbhz = 33\nmax_horizon_deg = 31"), horizon=WALL
    )
    sure = how_sure(assess(read_site(path)), errors_of(elevation_point_deg=1.0), draws=10_000)
    assert spread_of(sure, "max_horizon_deg").probability == pytest.approx(
        float(ndtr(1.0)) ** 2, abs=ONE_PERCENT
    )


def test_error_of_the_levels_follows_the_normal_law(write_site: WriteSite) -> None:
    """Authority: the normal distribution.

    Of two independent errors of 3 and 4 dB the sum has a standard deviation of 5 dB.
    """
    path = write_site(
        ('pattern = "choke-ring"', 'pattern = "choke-ring"\ngain_error_db = 3'),
        ("[require]", '[sky]\nsignals = ["GPS L1 C/A"]\npower_error_db = 4\ndays = 1\n[require]'),
        ("min_cn0_dbhz = 33", "min_cn0_dbhz = 38"),
    )
    found = assess(read_site(path))
    budget = found.budget.signals[0]
    samples = found.budget.samples
    counts = samples.counts_for_shares[budget.sample]
    # 95 % of the satellite-time is this strong: it takes minus this margin to miss the limit.
    margin_db = float(np.quantile(budget.cn0_dbhz[counts], 0.05)) - 38.0
    sure = how_sure(found, errors_of(), draws=10_000)
    expected = float(ndtr(margin_db / 5.0))
    assert 1.0 - expected > 0.02
    assert spread_of(sure, "min_usable_share").probability == pytest.approx(expected, abs=ONE_PERCENT)
    kinds = {source.kind: source for source in sure.sources}
    assert kinds["power"].spread > kinds["gain"].spread > 0.0
    assert sum(source.variance_share for source in sure.sources) == pytest.approx(1.0)


def test_turning_a_survey_hides_as_much_sky(write_site: WriteSite) -> None:
    """Authority: solid angles do not change when all is turned about the zenith."""
    found = assess(read_site(write_site(*NO_LEVELS, horizon=MIXED)))
    sure = how_sure(found, errors_of(azimuth_deg=3.0))
    for criterion in ("max_blocked_sky_share", "max_block_share"):
        spread = spread_of(sure, criterion)
        assert spread.p95 - spread.p05 < TWO_TENTHS_OF_A_PERCENT
    assert spread_of(sure, "max_horizon_deg").p05 == spread_of(sure, "max_horizon_deg").p95
    assert spread_of(sure, "min_usable_share").p95 > spread_of(sure, "min_usable_share").p05


@pytest.mark.parametrize(
    ("turn_deg", "up_deg", "gain_db"),
    [
        (1.0, 0.0, 0),
        (-2.0, 0.0, 0),
        (0.0, 0.7, 0),
        (0.0, -0.7, 0),
        (1.3, -0.4, 0),
        (0.0, 0.0, -7),
        (0.5, 0.5, -6),
    ],
)
def test_a_draw_is_the_whole_assessment_of_a_survey_that_is_off(
    write_site: WriteSite, turn_deg: float, up_deg: float, gain_db: int
) -> None:
    """Authority: the whole link budget, of a survey file with other azimuths and elevations."""
    head, *rows = MIXED.splitlines()

    def off(row: str) -> str:
        cells = row.split(",")
        azimuth_deg, elevation_deg = float(cells[0]) + turn_deg, float(cells[1]) + up_deg
        under = str(float(cells[6]) + up_deg) if cells[6] else ""
        return ",".join([f"{azimuth_deg % 360.0}", f"{elevation_deg}", *cells[2:6], under])

    general = sorted((off(row) for row in rows[:3]), key=lambda row: float(row.split(",")[0]))
    moved = "\n".join([head, *general, *(off(row) for row in rows[3:])]) + "\n"
    found = assess(read_site(write_site(horizon=MIXED)))
    # What comes weaker misses the minimum as what is asked to be stronger.
    path = write_site(("min_cn0_dbhz = 33", f"min_cn0_dbhz = {33 - gain_db}"), horizon=moved)
    truth = assess(read_site(path))
    errors = errors_of(azimuth_deg=1.0, elevation_common_deg=1.0)
    model = drawn_site(found.site, found.skyline, found.tracks, found.budget, errors)
    nodes = sum(len(mover.rise_deg_per_m) for mover in model.movers)
    draw = Draws(
        azimuth_deg=np.array([[turn_deg]]),
        common_deg=np.array([[up_deg]]),
        reading_deg=(np.zeros((1, nodes)),),
        distance_m=(np.zeros((1, nodes)),),
        gain_db=np.array([float(gain_db)]),
        power_db=np.zeros((1, len(model.signals))),
    )
    angular = [one for one in found.verdict.findings if one.criterion in ANGULAR]
    values = drawn_values(model, angular, draw)
    expected = {(one.criterion, one.signal): one.value for one in truth.verdict.findings}
    for finding, value in zip(angular, values, strict=True):
        if finding.unit == "share":
            allowed = TWO_TENTHS_OF_A_PERCENT if finding.signal else TENTH_OF_A_THOUSANDTH
            assert value[0] == pytest.approx(expected[finding.criterion, finding.signal], abs=allowed)


def test_a_wrong_distance_moves_what_the_antenna_sees(write_site: WriteSite) -> None:
    """Authority: plane geometry. The instrument stands 10 m below the phase centre."""
    horizon = "azimuth_deg,elevation_deg,distance_m,obstacle\n0,0,,\n180,60,20,hall\n181,60,20,hall\n"
    path = write_site(
        *NO_LEVELS, ("complete = true", "complete = true\ninstrument_up_m = -8.5"), horizon=horizon
    )
    found = assess(read_site(path))
    errors = tuple(replace(one, distance_m=0.1) for one in survey_errors(found.site, found.skyline))
    assert errors[0].offset_m == pytest.approx((0.0, 0.0, -10.0))
    slant_m = 20.0 / cos(radians(60.0))
    up_m = slant_m * sin(radians(60.0)) - 10.0
    nearer = degrees(np.arctan2(up_m + 0.1 * sin(radians(60.0)), 20.0 + 0.1 * cos(radians(60.0))))
    rise_deg = nearer - degrees(float(np.arctan2(up_m, 20.0)))
    model = drawn_site(found.site, found.skyline, found.tracks, found.budget, errors)
    nodes = sum(len(mover.rise_deg_per_m) for mover in model.movers)
    draws = drawn(
        errors, [nodes], gain_error_db=0.0, power_error_db=0.0, signals=len(model.signals), draws=1, seed=1
    )
    farther = replace(only(draws, None), distance_m=(np.full((1, nodes), 0.1),))
    finding = next(one for one in found.verdict.findings if one.criterion == "max_horizon_deg")
    value = float(drawn_values(model, [finding], farther)[0][0])
    assert value - finding.value == pytest.approx(rise_deg, abs=THOUSANDTH_DEG)
    assert rise_deg > 0.02


def test_a_wrong_distance_may_bring_a_reflector_near(write_site: WriteSite) -> None:
    """Authority: the normal distribution; half of all readings of 20 m are farther, half nearer."""
    horizon = "azimuth_deg,elevation_deg,distance_m,width_m,obstacle\n0,0,,,\n180,30,21,1,mast\n"
    path = write_site(
        *NO_LEVELS, ("min_cn0_dbhz = 33", "min_cn0_dbhz = 33\nmax_reflector_deg = 5"), horizon=horizon
    )
    sure = how_sure(assess(read_site(path)), errors_of(distance_m=1.0), draws=10_000)
    spread = spread_of(sure, "max_reflector_deg")
    # Two sides of the mast, each 1 m or one standard deviation short: none of them is near in this share.
    assert spread.probability == pytest.approx(float(ndtr(1.0)) ** 2, abs=2 * ONE_PERCENT)
    assert spread.narrow


def test_same_seed_same_figures_other_seed_other_figures(write_site: WriteSite) -> None:
    found = assess(read_site(write_site(horizon=MIXED)))
    errors = errors_of(azimuth_deg=1.0, elevation_common_deg=0.5, elevation_point_deg=0.5)
    once, again = how_sure(found, errors), how_sure(found, errors)
    assert once == again
    other = replace_seed(found, 2)
    assert how_sure(other, errors).findings != once.findings
    assert how_sure(other, errors).seed == 2


def replace_seed(found: Assessment, seed: int) -> Assessment:
    sky = found.site.sky.model_copy(update={"seed": seed})
    site = found.site.model_copy(update={"sky": sky})
    site._path, site._position = found.site.path, found.site.position
    return replace(found, site=site)


def test_draws_scatter_about_what_was_found(write_site: WriteSite) -> None:
    found = assess(read_site(write_site(horizon=MIXED)))
    sure = how_sure(
        found, errors_of(azimuth_deg=1.0, elevation_common_deg=0.35, elevation_point_deg=0.35), draws=4000
    )
    for spread in sure.findings:
        if spread.criterion == "min_usable_share":
            value = next(
                one.value
                for one in found.verdict.findings
                if (one.criterion, one.signal) == (spread.criterion, spread.signal)
            )
            assert spread.p05 < value < spread.p95
            assert spread.p50 == pytest.approx(value, abs=TWO_TENTHS_OF_A_PERCENT)


def test_larger_errors_never_sharpen_a_linear_criterion(write_site: WriteSite) -> None:
    """Law: what is linear in an error spreads with it. The highest point of a level wall is."""
    found = assess(read_site(write_site(*NO_LEVELS, horizon=WALL)))

    @settings(max_examples=25, deadline=None)
    @given(st.floats(0.0, 3.0), st.floats(1.0, 4.0))
    def check(deviation_deg: float, factor: float) -> None:
        small, large = (
            spread_of(how_sure(found, errors_of(elevation_common_deg=one), draws=100), "max_horizon_deg")
            for one in (deviation_deg, factor * deviation_deg)
        )
        assert large.p95 - large.p05 >= small.p95 - small.p05 - 1e-9

    check()


def test_satellites_at_once_have_bounds(write_site: WriteSite) -> None:
    """Law: a better draw for the signals has no fewer satellites, and what was found lies between."""
    path = write_site(
        ("[require]", '[sky]\nsystems = ["GPS"]\ndays = 1\n[require]\nmin_satellites = 7'), horizon=MIXED
    )
    found = assess(read_site(path))
    sure = how_sure(found, errors_of(elevation_common_deg=3.0))
    spread = spread_of(sure, "min_satellites")
    finding = next(one for one in found.verdict.findings if one.criterion == "min_satellites")
    assert (spread.probability, spread.p50) == (None, None)
    assert spread.p05 <= finding.value <= spread.p95
    assert spread.p05 < spread.p95
    assert spread_of(sure, "min_pdop_share").p05 <= spread_of(sure, "min_pdop_share").p95


def test_a_close_call_is_narrow_and_a_clear_one_is_not(write_site: WriteSite) -> None:
    def found(limit_deg: float) -> Uncertainty:
        path = write_site(
            *NO_LEVELS,
            ("min_cn0_dbhz = 33", f"min_cn0_dbhz = 33\nmax_horizon_deg = {limit_deg}"),
            horizon=WALL,
        )
        return how_sure(assess(read_site(path)), errors_of(elevation_common_deg=0.5))

    # Authority: 1.6449 standard deviations are the 95 % point of the normal distribution.
    for limit_deg, narrow in ((30.5, True), (29.5, True), (31.2, False), (28.8, False)):
        assert spread_of(found(limit_deg), "max_horizon_deg").narrow is narrow


def test_stated_errors_go_before_those_of_the_instrument(write_site: WriteSite) -> None:
    """Own table verdict/uncertainty/instrument_classes.csv; half the variance of an elevation is common."""
    path = write_site(
        ("complete = true", 'complete = true\ninstrument = "smartphone"\nelevation_error_deg = 0.2')
    )
    found = assess(read_site(path))
    (errors,) = survey_errors(found.site, found.skyline)
    assert errors.azimuth_deg == instrument_classes()["smartphone"]["azimuth_error_deg"]
    assert errors.elevation_common_deg == errors.elevation_point_deg == pytest.approx(0.2 / 2**0.5)
    assert errors.stated
    assert not how_sure(found, draws=10).unstated


def test_a_survey_that_states_no_errors_is_named(write_site: WriteSite) -> None:
    found = assess(read_site(write_site()))
    sure = how_sure(found, draws=10)
    assert sure.unstated == ("horizon.csv",)
    assert {source.kind for source in sure.sources} <= {"gain", "power"}


def test_the_declination_is_one_more_error_of_the_azimuths(write_site: WriteSite) -> None:
    """Authority: independent errors add as squares; [WMM2025] has 0.26 deg and more for the declination."""
    path = write_site(
        (
            "complete = true",
            'complete = true\nbearings = "magnetic-north"\nsurveyed_on = 2026-05-01\nazimuth_error_deg = 1',
        )
    )
    found = assess(read_site(path))
    north_deg = found.skyline.surveys[0].uncertainty_deg
    assert north_deg is not None
    assert survey_errors(found.site, found.skyline)[0].azimuth_deg == pytest.approx(
        (1.0 + north_deg**2) ** 0.5
    )


def test_two_surveys_are_off_by_themselves(write_site: WriteSite) -> None:
    """Authority: the normal distribution, for two walls of independent surveys."""
    path = write_site(
        *NO_LEVELS,
        ("min_cn0_dbhz = 33", "min_cn0_dbhz = 33\nmax_horizon_deg = 31"),
        horizon=WALL,
        extra='\n[[horizon]]\nsource = "survey"\nfile = "other.csv"\n',
    )
    (path.parent / "other.csv").write_text(
        WALL.replace("wall", "barn").replace("120", "280").replace("240", "300")
    )
    first = errors_of(elevation_common_deg=1.0)[0]
    sure = how_sure(assess(read_site(path)), (first, replace(first, file="other.csv")), draws=10_000)
    assert spread_of(sure, "max_horizon_deg").probability == pytest.approx(
        float(ndtr(1.0)) ** 2, abs=ONE_PERCENT
    )
    assert {(source.kind, source.file) for source in sure.sources} == {
        ("elevation", "horizon.csv"),
        ("elevation", "other.csv"),
    }
