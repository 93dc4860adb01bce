"""Kinds of parts: what the packaged table gives, and how a block takes it."""

import math

import pytest

from siteassess.link_budget.chain.parts import cable_loss_db, part_kinds, whole_part
from siteassess.link_budget.chain.receive_chain import (
    QUANTISATION_LOSS_DB,
    cascade,
    receiver_loss_db,
    value_at_carrier,
)
from siteassess.site_file.model import Part
from siteassess.tables import packaged_rows

L1_HZ, L5_HZ = 1575.42e6, 1176.45e6
TWENTIETH_DB = 0.05
FIVE_MILLI_DB = 0.005
METRES_PER_100_FT = 30.48


def cable(kind: str, length_m: float, *carriers_hz: float, **block: object) -> Part:
    part = Part(part="cable", kind=kind, length_m=length_m, **block)
    return whole_part(part, part_kinds()[kind], carriers_hz or (L1_HZ, L5_HZ))


@pytest.mark.parametrize(
    ("kind", "at_l1_db", "at_l5_db"),
    [
        # Authority: data sheets of cables by construction; all but 10 mm from memory.
        ("foam, 5 mm", 48.9, 42.0),
        ("foam, 5 mm, low loss", 43.5, 37.4),
        ("foam, 6 mm", 33.2, 28.5),
        ("foam, 10 mm", 17.27, 14.76),
        ("foam, 15 mm", 11.2, 9.5),
    ],
)
def test_loss_of_foam_cables(kind: str, at_l1_db: float, at_l5_db: float) -> None:
    loss_db = cable(kind, 100.0).loss_db
    assert value_at_carrier(loss_db, L1_HZ) == pytest.approx(at_l1_db, abs=TWENTIETH_DB)
    assert value_at_carrier(loss_db, L5_HZ) == pytest.approx(at_l5_db, abs=TWENTIETH_DB)


def test_ten_millimetre_foam_follows_the_law_of_its_data_sheet() -> None:
    # Authority: a published data sheet law, 0.122290 sqrt(f) + 0.000260 f in dB per 100 ft, f in MHz.
    for carrier_hz in (150e6, 900e6, L5_HZ, L1_HZ, 2500e6):
        mhz = carrier_hz / 1e6
        expected_db = (0.122290 * math.sqrt(mhz) + 0.000260 * mhz) * 100.0 / METRES_PER_100_FT
        loss_db = value_at_carrier(cable("foam, 10 mm", 100.0, carrier_hz).loss_db, carrier_hz)
        assert loss_db == pytest.approx(expected_db, abs=FIVE_MILLI_DB)


@pytest.mark.parametrize(
    ("kind", "loss_db"), [("RG-58", 58.2), ("RG-213", 24.7), ("corrugated, 1/2 inch", 6.8)]
)
def test_loss_at_850_mhz(kind: str, loss_db: float) -> None:
    # Authority: a published coax table.
    part = cable(kind, 100.0, 850e6)
    assert value_at_carrier(part.loss_db, 850e6) == pytest.approx(loss_db, abs=FIVE_MILLI_DB)


def test_ten_millimetre_foam_keeps_the_published_limit_and_six_millimetres_does_not() -> None:
    # Authority: IGS CORS Guidelines 1.1.0, less than 0.2 dB/m at L1.
    def per_metre_db(kind: str) -> float:
        return value_at_carrier(cable(kind, 1.0).loss_db, L1_HZ)

    assert per_metre_db("foam, 10 mm") < 0.2 < per_metre_db("foam, 6 mm")


def test_loss_grows_with_length_and_carrier() -> None:
    assert cable_loss_db(0.4, 0.001, 20.0, L1_HZ) == pytest.approx(
        2.0 * cable_loss_db(0.4, 0.001, 10.0, L1_HZ)
    )
    assert cable_loss_db(0.4, 0.0, 100.0, 4e6) == pytest.approx(0.8)
    assert cable_loss_db(0.0, 0.001, 100.0, 1000e6) == pytest.approx(1.0)


def test_cable_at_290_k_has_its_loss_as_noise_figure_at_each_carrier() -> None:
    # Authority: definition of the noise figure of a matched passive part at the reference temperature.
    chain = (cable("foam, 10 mm", 60.0), Part(part="receiver", noise_figure_db=0.0))
    for carrier_hz in (L5_HZ, L1_HZ):
        loss_db = value_at_carrier(chain[0].loss_db, carrier_hz)
        assert cascade(chain, carrier_hz).noise_figure_db == pytest.approx(loss_db, abs=1e-9)


def test_block_goes_before_its_kind() -> None:
    part = cable("foam, 10 mm", 30.0, loss_db=7.5, physical_temperature_k=310.0)
    assert part.loss_db == 7.5
    assert part.physical_temperature_k == 310.0
    assert part.loop_resistance_ohm == pytest.approx(0.3)
    block = Part(part="preamplifier", kind="preamplifier, geodetic", noise_figure_db=0.9)
    amplifier = whole_part(block, part_kinds()["preamplifier, geodetic"], [L1_HZ])
    assert (amplifier.gain_db, amplifier.noise_figure_db) == (35.0, 0.9)
    assert amplifier.rests_on.startswith("data sheet of a base-station antenna")


def test_parts_in_a_row_add_up() -> None:
    block = Part(part="connectors", kind="connector", count=4)
    assert whole_part(block, part_kinds()["connector"], [L1_HZ]).loss_db == pytest.approx(0.6)


def test_blocked_port_of_a_splitter_passes_no_supply() -> None:
    kind = part_kinds()["splitter, 2-way, blocked port"]
    assert whole_part(Part(part="splitter", kind=kind.kind), kind, [L1_HZ]).passes_supply is False


def test_no_kind_rests_on_a_value_of_low_confidence() -> None:
    for row in packaged_rows("link_budget/chain/parts.csv"):
        assert any(word in row["status"] for word in ("seen", "memory", "own default"))
        assert "low confidence" not in row["status"]


@pytest.mark.parametrize(
    ("samples", "weights"), [("1-bit", (1.0,)), ("2-bit", (1.0, 3.0))], ids=["1-bit", "2-bit"]
)
def test_loss_by_rounding_is_the_textbook_value(samples: str, weights: tuple[float, ...]) -> None:
    # Authority: integrals over a Gaussian with scipy: a weak signal's slope squared over the output's power,
    # at the best threshold; 1 bit gives 2 / pi.
    from scipy.integrate import quad
    from scipy.stats import norm

    def efficiency(threshold: float) -> float:
        edges = [0.0, threshold, math.inf] if len(weights) == 2 else [0.0, math.inf]
        pieces = list(zip(weights, edges, edges[1:], strict=False))
        slope = 2.0 * sum(
            weight * quad(lambda x: x * norm.pdf(x), low, high)[0] for weight, low, high in pieces
        )
        power = 2.0 * sum(weight**2 * quad(norm.pdf, low, high)[0] for weight, low, high in pieces)
        return slope**2 / power

    best = max(efficiency(threshold) for threshold in (0.9, 0.95, 1.0, 1.05, 1.1))
    assert QUANTISATION_LOSS_DB[samples] == pytest.approx(-10.0 * math.log10(best), abs=FIVE_MILLI_DB)


def test_loss_inside_the_receiver_counts_once() -> None:
    assert receiver_loss_db(Part(part="receiver", implementation_loss_db=1.0), L1_HZ) == 1.0
    assert receiver_loss_db(Part(part="receiver", quantisation="2-bit"), L1_HZ) == 0.55
    both = Part(part="receiver", quantisation="1-bit", implementation_loss_db={"1575.42": 1.0})
    assert receiver_loss_db(both, L1_HZ) == pytest.approx(2.96)
