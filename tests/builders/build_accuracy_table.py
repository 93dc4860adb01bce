"""Writes the tables of docs/accuracy.md: our value, the authority's, and the difference.

Run it from the project folder after a change of a model:

    python tests/builders/build_accuracy_table.py
"""

import csv
import math
import tempfile
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path

import numpy as np
from numpy.typing import NDArray
from scipy.special import erf, fresnel

from siteassess import assess, read_site
from siteassess.angles import direction
from siteassess.constants import BOLTZMANN_J_PER_K, SPEED_OF_LIGHT_M_PER_S
from siteassess.horizon.read import read_skyline
from siteassess.horizon.shares import SkyShares, sky_shares
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import outline_elevation_deg
from siteassess.link_budget.chain.parts import part_kinds, whole_part
from siteassess.link_budget.chain.receive_chain import QUANTISATION_LOSS_DB, cascade, value_at_carrier
from siteassess.link_budget.chain.supply import supply_voltages_v
from siteassess.link_budget.obstacles.diffraction import (
    exact_knife_edge_loss_db,
    fresnel_parameter,
    knife_edge_loss_db,
    strip_loss_db,
)
from siteassess.link_budget.obstacles.foliage import slant_path_loss_db, weissberger_loss_db
from siteassess.link_budget.power.gases import gas_loss_db
from siteassess.link_budget.power.received import received_power
from siteassess.link_budget.power.signals import read_signals
from siteassess.orbits.constellations import baseline_gps_orbits, nominal_orbits
from siteassess.orbits.secular import secular_rates
from siteassess.site_file.model import Part, Position
from siteassess.sky_tracks.dilution import dilution_of_precision, not_exceeded
from siteassess.sky_tracks.frames import look_angles
from siteassess.sky_tracks.refraction import apparent_elevation_deg
from siteassess.sky_tracks.tracks import sky_tracks

PAGE = Path("docs/accuracy.md")
STATION_SITE = Path("tests/link_budget/measured_station.toml")
STATION_LOG = Path("tests/authorities/measured_cn0_utah_2018.csv")

L1_HZ = 1575.42e6
L1_M = SPEED_OF_LIGHT_M_PER_S / L1_HZ
START = datetime(2026, 1, 1)

FloatArray = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True)
class Row:
    """One comparison: values in one unit, and how many decimals of them are worth printing."""

    quantity: str
    ours: float
    authority: float
    unit: str
    decimals: int
    source: str

    def __str__(self) -> str:
        ours, authority = (f"{value:.{self.decimals}f}" for value in (self.ours, self.authority))
        # Of the printed values; adding 0 makes -0.00 a plain 0.00.
        difference = f"{round(float(ours) - float(authority), self.decimals) + 0.0:.{self.decimals}f}"
        ours, authority = f"{ours} {self.unit}".strip(), f"{authority} {self.unit}".strip()
        return f"| {self.quantity} | {ours} | {authority} | {difference} | {self.source} |"


@dataclass(frozen=True, slots=True, kw_only=True)
class StationResult:
    """How far the predicted C/N0 of the measured station lies from the log, over bins of elevation [dB]."""

    rms_db: float
    bias_db: float
    spread_db: float
    bias_by_signal_db: dict[str, float]
    difference_by_elevation_db: dict[float, float]


def accuracy_table() -> str:
    """Table of comparisons with published values."""
    rows = (
        *_direction_rows(),
        *_orbit_rows(),
        *_dilution_rows(),
        *_power_rows(),
        *_air_rows(),
        *_obstacle_rows(),
        *_noise_rows(),
        *_horizon_rows(),
    )
    head = "| quantity | ours | authority | difference | source of the authority |"
    return "\n".join([head, "| --- | --- | --- | --- | --- |", *map(str, rows)])


def station_table() -> str:
    """Tables of the comparison with the measured station."""
    results = {power: station_result(power) for power in ("guaranteed", "typical")}
    signals = tuple(results["guaranteed"].bias_by_signal_db)
    columns = ["rms", "common bias", "spread", *(f"bias {signal}" for signal in signals)]
    lines = [
        "| power | " + " | ".join(f"{column}, dB" for column in columns) + " |",
        "| --- " * (len(columns) + 1) + "|",
    ]
    for power, result in results.items():
        numbers = (result.rms_db, result.bias_db, result.spread_db, *result.bias_by_signal_db.values())
        lines.append(f"| {power} | " + " | ".join(f"{number:.2f}" for number in numbers) + " |")
    lines += ["", "| elevation, deg | predicted less measured, guaranteed power, mean of the signals, dB |"]
    lines += ["| --- | --- |"]
    by_elevation = results["guaranteed"].difference_by_elevation_db
    lines += [f"| {elevation:.1f} | {difference:.2f} |" for elevation, difference in by_elevation.items()]
    return "\n".join(lines)


def station_result(power: str) -> StationResult:
    """Predicted less measured C/N0, bins of 7.5 to 87.5 degrees, each bin of each signal counting once."""
    text = STATION_SITE.read_text(encoding="utf-8").replace("[sky]\n", f'[sky]\npower = "{power}"\n')
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "station.toml"
        path.write_text(text, encoding="utf-8")
        budget = assess(read_site(path)).budget
    by_signal: dict[str, FloatArray] = {}
    by_bin: dict[float, list[float]] = {}
    for signal in budget.signals:
        elevation_deg, measured_dbhz = _station_log(signal.signal.name)
        lines = signal.lines[0]
        predicted_dbhz = np.interp(elevation_deg, lines.elevation_deg, lines.cn0_open_sky_dbhz)
        by_signal[signal.signal.name] = predicted_dbhz - measured_dbhz
        for elevation, difference in zip(elevation_deg, by_signal[signal.signal.name], strict=True):
            by_bin.setdefault(float(elevation), []).append(float(difference))
    pooled = np.concatenate(list(by_signal.values()))
    return StationResult(
        rms_db=float(np.sqrt(np.mean(pooled**2))),
        bias_db=float(pooled.mean()),
        spread_db=float(pooled.std()),
        bias_by_signal_db={name: float(difference.mean()) for name, difference in by_signal.items()},
        difference_by_elevation_db={
            elevation: float(np.mean(by_bin[elevation])) for elevation in sorted(by_bin)
        },
    )


def _station_log(signal: str) -> tuple[FloatArray, FloatArray]:
    lines = (
        line for line in STATION_LOG.read_text(encoding="utf-8").splitlines() if not line.startswith("#")
    )
    bins = [
        (float(row["elevation_deg"]), float(row["mean_dbhz"]))
        for row in csv.DictReader(lines)
        if row["signal"] == signal and float(row["elevation_deg"]) >= 7.5
    ]
    elevation_deg, measured_dbhz = np.array(bins).T
    return elevation_deg, measured_dbhz


def _direction_rows() -> Iterator[Row]:
    """Satellites of a precise orbit file, seen from 48 N, 11 E, 600 m."""
    source = "precise orbits of 2021-12-12 00:00 GPS time; angles computed from them"
    satellites = {
        "E01": ((20688636.653, -10335387.303, 18486192.053), (264.989, 54.235, 24_205.149)),
        "G21": ((17125517.715, -19870167.075, 443275.501), (247.662, 6.199, 24_765.177)),
        "G13": ((-13462439.424, 8521400.998, 21070022.207), (25.686, 3.486, 25_271.735)),
        "R11": ((-10288831.927, -8216352.027, 21858151.827), (345.335, 4.908, 24_191.846)),
    }
    position = Position(latitude_deg=48.0, longitude_deg=11.0, height_m=600.0)
    for name, (earth_fixed_m, authority) in satellites.items():
        azimuth_deg, elevation_deg, range_m = look_angles(np.array(earth_fixed_m), position)
        ours = (float(azimuth_deg), float(elevation_deg), float(range_m) / 1e3)
        for what, value, expected, unit in zip(
            ("azimuth", "elevation", "range"), ours, authority, ("deg", "deg", "km"), strict=True
        ):
            yield Row(
                quantity=f"{what} of {name} from 48 N, 11 E",
                ours=value,
                authority=expected,
                unit=unit,
                decimals=3,
                source=source,
            )


def _orbit_rows() -> Iterator[Row]:
    measured = "precise orbits of 2021-12-12, mean over the satellites"
    radii_m = {
        "GPS": (26_559_700.0, 55.0, 43_077.3),
        "GLONASS": (25_508_000.0, 64.8, 40_544.1),
        "Galileo": (29_599_801.0, 56.0, 50_680.9),
        "BeiDou MEO": (27_906_100.0, 55.0, 46_392.4),
    }
    for system, (radius_m, inclination_deg, period_s) in radii_m.items():
        along_deg_per_s, _ = secular_rates(radius_m, inclination_deg)
        yield Row(
            quantity=f"nodal period of {system}, from the nominal radius",
            ours=float(360.0 / along_deg_per_s),
            authority=period_s,
            unit="s",
            decimals=1,
            source=measured,
        )
    for system, radius_m in (("GPS", 26_559_700.0), ("GLONASS", 25_508_000.0), ("Galileo", 29_599_801.0)):
        yield Row(
            quantity=f"share of {system} satellites above 5 deg, mean over the Earth",
            ours=_mean_visible_share(system),
            authority=_visible_share(radius_m, 5.0),
            unit="",
            decimals=3,
            source="closed form on a sphere: (1 - cos g) / 2",
        )


def _mean_visible_share(system: str) -> float:
    """Share of satellites above 5 degrees, averaged over a cycle, over latitude and over longitude."""
    node, weight = np.polynomial.legendre.leggauss(16)
    orbits = nominal_orbits([system], START)
    shares = []
    for latitude_deg in np.rad2deg(np.arcsin(node)):
        above = []
        for longitude_deg in (0.0, 120.0, 240.0):
            position = Position(latitude_deg=float(latitude_deg), longitude_deg=longitude_deg, height_m=0.0)
            tracks = sky_tracks(orbits, position, days=1.0, step_s=600.0)
            above.append(np.mean(tracks.elevation_deg >= 5.0))
        shares.append(np.mean(above))
    return float(np.sum(weight * np.array(shares)) / 2.0)


def _visible_share(radius_m: float, mask_deg: float) -> float:
    mask_rad = math.radians(mask_deg)
    central_rad = math.acos(6_371e3 * math.cos(mask_rad) / radius_m) - mask_rad
    return (1.0 - math.cos(central_rad)) / 2.0


def _dilution_rows() -> Iterator[Row]:
    source = "GPS SPS Performance Standard 2020, appendix B and its hand derivation"
    toward = direction([0.0, 0.0, 120.0, 240.0], [90.0, 30.0, 30.0, 30.0])
    together = np.zeros(4, dtype=np.int64)
    dops = dilution_of_precision(toward, together, together, epochs=1)
    case = "zenith and three at 30 deg"
    for name, ours, authority in (("PDOP", dops.position, 8 / 3), ("GDOP", dops.geometric, 3.0732)):
        yield Row(
            quantity=f"{name}, {case}",
            ours=float(ours[0]),
            authority=authority,
            unit="",
            decimals=4,
            source=source,
        )
    published = {"half": 0.94, "90 %": 1.16, "95 %": 1.25, "98 %": 1.37}
    reached = not_exceeded(_baseline_hdop(), (0.5, 0.9, 0.95, 0.98))
    for (share, authority), hdop in zip(published.items(), reached, strict=True):
        yield Row(
            quantity=f"HDOP of 24 GPS slots above 5 deg, not exceeded for {share} of globe and day",
            ours=hdop,
            authority=authority,
            unit="",
            decimals=2,
            source=source,
        )


def _baseline_hdop(places: int = 240) -> FloatArray:
    """HDOP of the baseline slots over a day at places that stand for equal areas."""
    orbits, hdop = baseline_gps_orbits(START), []
    for index in range(places):
        position = Position(
            latitude_deg=math.degrees(math.asin((2 * index + 1) / places - 1)),
            longitude_deg=index * 180.0 * (3.0 - math.sqrt(5.0)) % 360.0,
            height_m=0.0,
        )
        tracks = sky_tracks(orbits, position, days=1.0, step_s=300.0)
        satellite, epoch = np.nonzero(tracks.elevation_deg >= 5.0)
        toward = direction(tracks.azimuth_deg[satellite, epoch], tracks.elevation_deg[satellite, epoch])
        epochs = len(tracks.time_s)
        hdop.append(dilution_of_precision(toward, epoch, np.zeros_like(epoch), epochs=epochs).horizontal)
    return np.concatenate(hdop)


def _power_rows() -> Iterator[Row]:
    figure = {5: -158.46, 10: -158.19, 20: -157.43, 30: -156.75, 40: -156.48}
    figure |= {50: -156.72, 60: -157.29, 70: -157.80, 80: -158.20, 90: -158.49}
    signal = read_signals()["GPS L1 C/A"]
    for elevation_deg, expected_dbw in figure.items():
        terms = received_power(signal, "MEO", float(elevation_deg), 26_559.7e3)
        yield Row(
            quantity=f"received power of GPS L1 C/A at {elevation_deg} deg",
            ours=float(terms.received_power_dbw),
            authority=expected_dbw,
            unit="dBW",
            decimals=2,
            source="[IS-GPS-200] Figure 6-1",
        )


def _air_rows() -> Iterator[Row]:
    for elevation_deg, expected_db in {90: 0.0344, 45: 0.0487, 10: 0.195, 5: 0.370}.items():
        yield Row(
            quantity=f"gas loss at 1575.42 MHz, {elevation_deg} deg",
            ours=float(gas_loss_db(L1_HZ, float(elevation_deg))),
            authority=expected_db,
            unit="dB",
            decimals=3,
            source="[P.676] line by line, sea level",
        )
    for elevation_deg, expected_arcmin in {0: 34.72, 1: 26.02, 2: 20.28, 5: 11.19, 10: 5.52}.items():
        bend_deg = float(apparent_elevation_deg(float(elevation_deg), 0.0)) - elevation_deg
        yield Row(
            quantity=f"refraction at {elevation_deg} deg, sea level",
            ours=60.0 * bend_deg,
            authority=expected_arcmin,
            unit="arcmin",
            decimals=2,
            source="[P.834], as [P.619] Attachment B",
        )
    for elevation_deg in (20, 45):
        bend_deg = float(apparent_elevation_deg(float(elevation_deg), 0.0)) - elevation_deg
        yield Row(
            quantity=f"refraction at {elevation_deg} deg, against light",
            ours=60.0 * bend_deg,
            authority=_bend_of_light_arcmin(float(elevation_deg)),
            unit="arcmin",
            decimals=2,
            source="[Meeus 1998] 16.4, 1010 hPa, 10 C",
        )


def _bend_of_light_arcmin(elevation_deg: float) -> float:
    return 1.02 / math.tan(math.radians(elevation_deg + 10.3 / (elevation_deg + 5.11)))


def _obstacle_rows() -> Iterator[Row]:
    approximation = {0: 6.0329, 1: 13.9257, 2: 19.0429}
    for nu, expected_db in approximation.items():
        yield Row(
            quantity=f"knife edge, parameter {nu}",
            ours=float(knife_edge_loss_db(float(nu))),
            authority=expected_db,
            unit="dB",
            decimals=3,
            source="[P.526] 4.1, approximation",
        )
        yield Row(
            quantity=f"knife edge, parameter {nu}, exact form",
            ours=float(exact_knife_edge_loss_db(float(nu))),
            authority=_exact_edge_db(float(nu)),
            unit="dB",
            decimals=3,
            source="[P.526] 4.1, Fresnel integrals of scipy",
        )
    yield Row(
        quantity="edge 20 m away, satellite 1 deg below it, 1575.42 MHz",
        ours=float(knife_edge_loss_db(fresnel_parameter(1.0, 20.0, L1_M))),
        authority=8.22,
        unit="dB",
        decimals=2,
        source="[P.526] 4.1, parameter 0.2530",
    )
    for what, width_m, distance_m in (
        ("mast 1 m wide, 15 m away", 1.0, 15.0),
        ("pole 5 cm wide, 2 m away", 0.05, 2.0),
    ):
        half_nu = float(
            fresnel_parameter(math.degrees(math.atan(width_m / 2.0 / distance_m)), distance_m, L1_M)
        )
        yield Row(
            quantity=f"{what}, satellite behind it",
            ours=float(strip_loss_db(-half_nu, half_nu, np.inf)),
            authority=_strip_db(width_m / 2.0 * math.sqrt(2.0 / (L1_M * distance_m))),
            unit="dB",
            decimals=2,
            source="Fresnel integrals of scipy, flat strip",
        )
    for depth_m, expected_db in {10.0: 5.120, 20.0: 8.809}.items():
        yield Row(
            quantity=f"leaves, {depth_m:.0f} m, 1575.42 MHz",
            ours=float(weissberger_loss_db(depth_m, L1_HZ)),
            authority=expected_db,
            unit="dB",
            decimals=3,
            source="[Weissberger]",
        )
    yield Row(
        quantity="leaves, slant path of 10 m at 30 deg, 1575.42 MHz",
        ours=float(slant_path_loss_db(10.0, L1_HZ, 30.0)),
        authority=9.306,
        unit="dB",
        decimals=3,
        source="[P.833] 2.2",
    )


def _exact_edge_db(nu: float) -> float:
    sine, cosine = fresnel(nu)
    return float(-10.0 * np.log10(((0.5 - cosine) ** 2 + (0.5 - sine) ** 2) / 2.0))


def _strip_db(half_nu: float) -> float:
    """A strip takes away what an opening of its width would let through."""
    sine, cosine = fresnel(half_nu)
    return float(-20.0 * np.log10(abs(1.0 - (1.0 + 1.0j) / 2.0 * 2.0 * (cosine - 1.0j * sine))))


def _noise_rows() -> Iterator[Row]:
    manual = "worked example of a receiver manual, which leaves out the noise of the cable itself"
    chain = (
        Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.5),
        Part(part="cable", loss_db=15.0, physical_temperature_k=0.0),
        Part(part="receiver", noise_figure_db=10.0),
    )
    parts = cascade(chain, L1_HZ)
    yield Row(
        quantity="noise figure of preamplifier, noiseless cable and receiver",
        ours=parts.noise_figure_db,
        authority=3.1447,
        unit="dB",
        decimals=3,
        source=manual,
    )
    yield Row(
        quantity="C/N0 at -155 dBW and 130 K with that chain",
        ours=-155.0 - _noise_density_dbw_per_hz(130.0 + parts.temperature_k),
        authority=47.18,
        unit="dB-Hz",
        decimals=2,
        source=manual,
    )
    chain = (
        Part(part="preamplifier", gain_db=10.0, noise_figure_db=12.62),
        Part(part="line", loss_db=25.0),
        Part(part="receiver", noise_figure_db=0.0),
    )
    yield Row(
        quantity="C/N0 at -160 dBW, 5 dBic, 300 K, 25 dB of line behind 10 dB of gain",
        ours=-160.0 + 5.0 - _noise_density_dbw_per_hz(300.0 + cascade(chain, L1_HZ).temperature_k),
        authority=32.0,
        unit="dB-Hz",
        decimals=2,
        source="[Pozar], problem on a GPS receiver, solved for the noise figure",
    )
    for kind, carrier_hz, expected_db in (
        ("foam, 10 mm", L1_HZ, 17.27),
        ("foam, 10 mm", 1176.45e6, 14.8),
        ("foam, 6 mm", L1_HZ, 33.2),
        ("RG-58", 850e6, 58.2),
    ):
        cable = _cable(kind, carrier_hz)
        yield Row(
            quantity=f"loss of 100 m of {kind}, {carrier_hz / 1e6:.10g} MHz",
            ours=value_at_carrier(cable.loss_db or 0.0, carrier_hz),
            authority=expected_db,
            unit="dB",
            decimals=2 if expected_db == 17.27 else 1,
            source="published coax table" if kind.startswith("RG") else "cable data sheets by construction",
        )
    for kind, expected_v in {"RG-58": 0.30, "foam, 6 mm": 0.14, "foam, 10 mm": 0.06}.items():
        preamplifier = Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.0, supply_current_ma=60.0)
        chain = (
            preamplifier,
            _cable(kind, L1_HZ),
            Part(part="receiver", noise_figure_db=8.0, supply_voltage_v=5.0),
        )
        yield Row(
            quantity=f"voltage lost by 60 mA in 100 m of {kind}",
            ours=5.0 - (supply_voltages_v(chain)[0] or 0.0),
            authority=expected_v,
            unit="V",
            decimals=2,
            source="Ohm's law with the resistance of data sheets",
        )
    for bits, authority_db, source in (
        ("1-bit", 10.0 * math.log10(math.pi / 2.0), "closed form, pi / 2"),
        ("2-bit", _four_level_loss_db(), "Gaussian integral, weights 1 and 3, best threshold"),
    ):
        yield Row(
            quantity=f"loss by rounding to {bits}",
            ours=QUANTISATION_LOSS_DB[bits],
            authority=authority_db,
            unit="dB",
            decimals=2,
            source=source,
        )
    yield Row(
        quantity="noise density at 290 K",
        ours=_noise_density_dbw_per_hz(290.0),
        authority=-203.975,
        unit="dBW/Hz",
        decimals=3,
        source="k of the SI, exact",
    )


def _cable(kind: str, carrier_hz: float) -> Part:
    return whole_part(Part(part="cable", kind=kind, length_m=100.0), part_kinds()[kind], [carrier_hz])


def _four_level_loss_db() -> float:
    """Loss of a weak signal in Gaussian noise, rounded to the weights 1 and 3, at the best threshold."""
    threshold = np.linspace(0.5, 1.5, 1001)
    density = np.exp(-(threshold**2) / 2.0) / math.sqrt(2.0 * math.pi)
    slope = 2.0 / math.sqrt(2.0 * math.pi) + 4.0 * density
    power = 1.0 + 8.0 * (1.0 - erf(threshold / math.sqrt(2.0)))
    return float(-10.0 * np.log10(np.max(slope**2 / power)))


def _noise_density_dbw_per_hz(temperature_k: float) -> float:
    return 10.0 * math.log10(BOLTZMANN_J_PER_K * temperature_k)


def _horizon_rows() -> Iterator[Row]:
    zone = "zone of a sphere"
    level, mask_5 = "azimuth_deg,elevation_deg\n0,10\n", 5.0
    sector = "azimuth_deg,elevation_deg,obstacle\n45,30,wall\n135,30,wall\n"
    yield Row(
        quantity="hemisphere below a level horizon of 10 deg",
        ours=_shares(level, mask_5).blocked_share_of_hemisphere,
        authority=math.sin(math.radians(10.0)),
        unit="",
        decimals=5,
        source=zone,
    )
    yield Row(
        quantity="hemisphere behind a 90 deg sector up to 30 deg",
        ours=_shares(sector, mask_5).blocked_share_of_hemisphere,
        authority=0.125,
        unit="",
        decimals=5,
        source=zone,
    )
    low, high = math.sin(math.radians(10.0)), math.sin(math.radians(30.0))
    yield Row(
        quantity="the same sector, of the sky above 10 deg",
        ours=_shares(sector, 10.0).blocked_share_above_mask,
        authority=(high - low) / (1.0 - low) / 4.0,
        unit="",
        decimals=5,
        source=zone,
    )
    end_m = 10.0 / math.cos(math.radians(45.0))
    end = f"{math.degrees(math.atan2(3.0, end_m))},{end_m},wall"
    wall = f"azimuth_deg,elevation_deg,distance_m,obstacle\n45,{end}\n135,{end}\n"
    yield Row(
        quantity="middle of a straight wall 3 m high, 10 m away, from its ends 45 deg to either side",
        ours=float(outline_elevation_deg(_skyline(wall), 90.0)),
        authority=math.degrees(math.atan2(3.0, 10.0)),
        unit="deg",
        decimals=2,
        source="plane geometry: atan(3 / 10)",
    )


def _skyline(horizon: str) -> Skyline:
    with tempfile.TemporaryDirectory() as folder:
        text = STATION_SITE.read_text(encoding="utf-8")
        source = '\n[[horizon]]\nsource = "survey"\nfile = "horizon.csv"\ncomplete = true\n'
        (Path(folder) / "site.toml").write_text(text + source, encoding="utf-8")
        (Path(folder) / "horizon.csv").write_text(horizon, encoding="utf-8")
        return read_skyline(read_site(Path(folder) / "site.toml"))


def _shares(horizon: str, mask_deg: float) -> SkyShares:
    return sky_shares(_skyline(horizon), mask_deg)


def with_tables(page: str) -> str:
    """The page with its tables brought up to date."""
    for name, table in (("published values", accuracy_table()), ("measured station", station_table())):
        start, end = f"<!-- table: {name} -->\n", "<!-- end of table -->"
        before, _, rest = page.partition(start)
        assert rest, f"the page has no marker {start}"
        page = f"{before}{start}\n{table}\n\n{end}{rest.partition(end)[2]}"
    return page


if __name__ == "__main__":
    PAGE.write_text(with_tables(PAGE.read_text(encoding="utf-8")), encoding="utf-8")
