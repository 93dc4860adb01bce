"""Chains that might be built instead."""

import pytest

from siteassess.link_budget.chain.changes import chain_changes
from siteassess.link_budget.chain.parts import part_kinds, whole_part
from siteassess.link_budget.chain.receive_chain import cascade
from siteassess.site_file.model import Part

L1_HZ = 1575.42e6
PREAMPLIFIER = Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.5)
CABLE = Part(part="cable", loss_db=15.0)
RECEIVER = Part(part="receiver", noise_figure_db=10.0)


def test_changes_of_a_plain_chain() -> None:
    changes = dict(chain_changes((PREAMPLIFIER, CABLE, RECEIVER)))
    assert list(changes) == ["half the cable", "preamplifier with 1.5 dB noise figure"]
    assert [part.loss_db for part in changes["half the cable"]] == [None, 7.5, None]
    better = changes["preamplifier with 1.5 dB noise figure"]
    assert [part.noise_figure_db for part in better] == [1.5, None, 10.0]
    # Authority: a geodetic receiver's manual has 3.21 dB for the chain as it is, with a cable at 290 K; half
    # of the cable by hand: 1.7783 + (5.6234 - 1) / 1000 + 5.6234 x 9 / 1000 = 1.8335 or 2.633 dB.
    assert cascade(changes["half the cable"], L1_HZ).noise_figure_db == pytest.approx(2.633, abs=0.001)


def test_values_by_carrier_are_halved_one_by_one() -> None:
    cable = Part(part="Cable to the rack", loss_db={"1176.45": 4.0, "1575.42": 5.0})
    _, halved, _ = dict(chain_changes((PREAMPLIFIER, cable, RECEIVER)))["half the cable"]
    assert halved.loss_db == {"1176.45": 2.0, "1575.42": 2.5}


def test_cable_of_a_known_kind_has_a_next_class() -> None:
    # The table's losses at 1575.42 MHz: RG-58 79 dB per 100 m, the next lower one foam, 5 mm, 48.9.
    block = Part(part="down lead", kind="RG-58", length_m=20.0)
    cable = whole_part(block, part_kinds()["RG-58"], [L1_HZ])
    changes = dict(chain_changes((PREAMPLIFIER, cable, RECEIVER)))
    assert list(changes)[:2] == ["half the cable", "better cable: foam, 5 mm"]
    better = changes["better cable: foam, 5 mm"][1]
    assert better.kind == "foam, 5 mm"
    assert better.loss_db["1575.42"] == pytest.approx(0.2 * 48.9, abs=0.02)


def test_best_cable_of_the_table_has_no_better_one() -> None:
    best = min(
        (kind for kind in part_kinds().values() if kind.k1_db_per_100m is not None),
        key=lambda kind: whole_part(Part(part="cable", length_m=100.0), kind, [L1_HZ]).loss_db["1575.42"],
    )
    cable = whole_part(Part(part="cable", kind=best.kind, length_m=20.0), best, [L1_HZ])
    assert [words for words, _ in chain_changes((PREAMPLIFIER, cable, RECEIVER))] == [
        "half the cable",
        "preamplifier with 1.5 dB noise figure",
    ]


@pytest.mark.parametrize(
    ("noise_figure_db", "words"),
    [
        (1.5, ["preamplifier with 1.0 dB noise figure"]),
        (1.0, []),
        (0.5, []),
        ({"1176.45": 3.0, "1575.42": 2.0}, ["preamplifier with 2.0 dB noise figure"]),
    ],
)
def test_preamplifier_gets_better_down_to_a_decibel(noise_figure_db: object, words: list[str]) -> None:
    preamplifier = PREAMPLIFIER.model_copy(update={"noise_figure_db": noise_figure_db})
    assert [change for change, _ in chain_changes((preamplifier, RECEIVER))] == words


def test_chain_without_amplifier_gets_one() -> None:
    ((words, chain),) = [change for change in chain_changes((CABLE, RECEIVER)) if "added" in change[0]]
    assert words == "preamplifier added: 30 dB, noise figure 2.0 dB"
    assert [part.part for part in chain] == ["preamplifier", "cable", "receiver"]
