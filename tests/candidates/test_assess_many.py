"""Many sites, side by side: the same answers as one by one, and no bad site stops the others."""

import os
import pickle
from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess import assess, read_site
from siteassess.candidates import assess_many
from siteassess.candidates.assess_many import assess_sites
from siteassess.errors import SiteAssessError

WriteSite = Callable[..., Path]

QUICK = "\n[sky]\ndays = 0.1\nstep_s = 900\n"
TALL = "azimuth_deg,elevation_deg\n0,0\n90,40\n180,40\n270,0\n"
TWENTY_KILOBYTES = 20_000


def test_candidate_keeps_what_the_assessment_found(write_site: WriteSite) -> None:
    path = write_site(extra=QUICK, horizon=TALL, folder="roof")
    verdict = assess(read_site(path)).verdict
    (candidate,), refused = assess_sites([path])
    assert refused == ()
    assert (candidate.name, candidate.place, candidate.outcome) == ("Test roof", "roof", verdict.outcome)
    assert candidate.findings == verdict.findings
    assert candidate.signals == verdict.signals
    assert candidate.counts == verdict.counts
    assert candidate.sky == verdict.sky
    assert candidate.usable_satellites == round(verdict.counts[-1].usable_mean, 3)


def test_candidate_is_small_however_much_sky_was_computed(write_site: WriteSite) -> None:
    (candidate,), _ = assess_sites([write_site()])
    assert len(pickle.dumps(candidate)) < TWENTY_KILOBYTES


def test_bad_sites_are_named_and_the_others_assessed(write_site: WriteSite, tmp_path: Path) -> None:
    good = write_site(extra=QUICK, folder="good")
    bad = write_site(
        ("mast_height_m = 1.5", "mast_height_m = -3.0"), folder="bad", horizon="azimuth_deg\n0\n"
    )
    empty = tmp_path / "empty"
    empty.mkdir()
    candidates, refused = assess_sites([empty, good, bad.parent, tmp_path / "gone.toml", bad.parent])
    assert [candidate.place for candidate in candidates] == ["good"]
    assert [message for site in refused for message in site.messages] == [
        f"{bad.parent}: site.toml: mount.mast_height_m is -3.0; it must be at least 0",
        f"{bad.parent}: horizon.csv: line 1 names no column elevation_deg; the table needs it",
        f"{empty}: site.toml: there is no such file; it was looked for as {empty / 'site.toml'}",
        f"{tmp_path / 'gone.toml'}: there is no such file; it was looked for as {tmp_path / 'gone.toml'}",
    ]


def test_processes_give_what_one_gives(write_site: WriteSite, tmp_path: Path) -> None:
    sites = [
        write_site(("Test roof", f"Roof {number}"), extra=QUICK, folder=f"roof{number}", horizon=horizon)
        for number, horizon in enumerate(["azimuth_deg,elevation_deg\n0,0\n", TALL, "azimuth_deg\n0\n"])
    ]
    told: list[str] = []
    assert assess_sites(sites, jobs=2, progress=told.append) == assess_sites(reversed(sites), jobs=1)
    assert told == [f"{done} of 3 sites assessed" for done in (1, 2, 3)]


def test_process_that_dies_is_told(write_site: WriteSite, monkeypatch: pytest.MonkeyPatch) -> None:
    sites = [write_site(folder=name) for name in ("a", "b")]
    monkeypatch.setattr(assess_many, "_leave_interrupts_to_the_parent", os.abort)
    with pytest.raises(SiteAssessError) as caught:
        assess_sites(sites, jobs=2)
    assert str(caught.value) == (
        "rank: a process that assessed a site ended without an answer; "
        "memory may have run out; fewer jobs need less"
    )
