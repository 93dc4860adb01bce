"""Findings on what is left when the trees have grown."""

from siteassess.horizon.shares import SkyShares
from siteassess.site_file.model import Requirements
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.findings.site_findings import BY_SITE_FILE, outcome_of, told_apart
from siteassess.verdict.verdict import Finding, SignalShares

__all__ = ["growth_findings"]


def growth_findings(
    require: Requirements, now: tuple[SignalShares, ...], later: tuple[SignalShares, ...], sky: SkyShares
) -> tuple[Finding, ...]:
    """The usable share of each signal after `[require] good_for_years`, held against the same limit as today.

    Parameters
    ----------
    require : Requirements
        Years and limit.
    now, later : tuple of SignalShares
        Signal by signal, as surveyed and with grown trees.
    sky : SkyShares
        Whether all of it was looked at.
    """
    criterion, limit = read_criteria()["good_for_years"], require.min_usable_share
    findings = []
    for today, then in zip(now, later, strict=True):
        outcome = outcome_of(then.usable_share < limit, True, sky)
        usable, asked = told_apart(then.usable_share, limit)
        reason = (
            f"With trees grown for {require.good_for_years:g} years usable for {usable} of the "
            f"satellite-time above the mask; {asked} is asked. As surveyed it is {today.usable_share:.1%}."
        )
        findings.append(
            Finding(
                criterion=criterion.key,
                signal=then.signal,
                value=then.usable_share,
                limit=limit,
                unit=criterion.unit,
                required=True,
                outcome=outcome,
                source=BY_SITE_FILE,
                reason=reason,
            )
        )
    return tuple(findings)
