"""Voltage that a cable leaves for the parts with gain."""

import pytest

from siteassess.link_budget.chain.parts import part_kinds, whole_part
from siteassess.link_budget.chain.supply import preamplifier_index, preamplifier_voltage_v, supply_voltages_v
from siteassess.site_file.model import Part

HUNDREDTH_V = 0.01


def amplifier(current_ma: float | None = 60.0, **more: object) -> Part:
    return Part(part="amplifier", gain_db=30.0, noise_figure_db=2.0, supply_current_ma=current_ma, **more)


def line(resistance_ohm: float | None, **more: object) -> Part:
    return Part(part="cable", loss_db=5.0, loop_resistance_ohm=resistance_ohm, **more)


def receiver(voltage_v: float | None = 5.0) -> Part:
    return Part(part="receiver", noise_figure_db=8.0, supply_voltage_v=voltage_v)


@pytest.mark.parametrize(("kind", "drop_v"), [("RG-58", 0.30), ("foam, 6 mm", 0.14), ("foam, 10 mm", 0.06)])
def test_sixty_milliamperes_over_a_hundred_metres(kind: str, drop_v: float) -> None:
    # Authority: Ohm's law with the resistances of data sheets (5, 2.3 and 1.0 ohm, from memory).
    cable = whole_part(Part(part="cable", kind=kind, length_m=100.0), part_kinds()[kind], [1575.42e6])
    voltage_v = preamplifier_voltage_v((amplifier(), cable, receiver()))
    assert voltage_v == pytest.approx(5.0 - drop_v, abs=HUNDREDTH_V)


def test_a_line_carries_the_currents_of_all_that_it_feeds() -> None:
    # Hand calculation: 2 ohm carry 100 mA, 4 ohm carry 60 mA.
    chain = (amplifier(60.0), line(4.0), amplifier(40.0, loop_resistance_ohm=0.0), line(2.0), receiver())
    assert supply_voltages_v(chain) == pytest.approx((5.0 - 0.2 - 0.24, None, 5.0 - 0.2, None, None))


def test_the_nearest_source_feeds() -> None:
    # Hand calculation: a feed of 12 V stands between; the receiver's 5 V reach nothing.
    feed = Part(part="feed", loss_db=0.3, loop_resistance_ohm=0.0, supply_voltage_v=12.0)
    assert preamplifier_voltage_v((amplifier(), line(5.0), feed, line(50.0), receiver())) == pytest.approx(
        11.7
    )


def test_a_source_does_not_carry_what_another_feeds() -> None:
    # Hand calculation: only the 40 mA behind the feed of 12 V run through the 2 ohm.
    feed = Part(part="feed", loss_db=0.3, loop_resistance_ohm=0.0, supply_voltage_v=12.0)
    chain = (amplifier(60.0), feed, amplifier(40.0), line(2.0), receiver())
    assert supply_voltages_v(chain) == pytest.approx((12.0, None, 5.0 - 0.08, None, None))


def test_what_blocks_direct_current_leaves_nothing() -> None:
    chain = (amplifier(), line(1.0), line(0.0, passes_supply=False), receiver())
    assert preamplifier_voltage_v(chain) == 0.0


def test_a_voltage_never_turns_round() -> None:
    assert preamplifier_voltage_v((amplifier(1000.0), line(900.0), receiver())) == 0.0


@pytest.mark.parametrize(
    "chain",
    [
        (amplifier(), line(1.0), receiver(None)),
        (amplifier(), line(None), receiver()),
        (amplifier(None), line(1.0), receiver()),
        (line(1.0), receiver()),
    ],
    ids=["source", "resistance", "current", "amplifier"],
)
def test_voltage_is_not_known_when_something_is_missing(chain: tuple[Part, ...]) -> None:
    assert preamplifier_voltage_v(chain) is None


def test_first_part_with_gain_is_the_preamplifier() -> None:
    assert preamplifier_index((line(1.0), amplifier(), amplifier(), receiver())) == 1
    assert preamplifier_index((line(1.0), receiver())) is None
