"""Findings on what is near the antenna: reflectors, and the roof below it."""

from dataclasses import replace
from math import floor

from siteassess.horizon.shares import SkyShares
from siteassess.horizon.skyline import Skyline
from siteassess.site_file.model import Mount, Requirements
from siteassess.verdict.criteria import limit_or_advice
from siteassess.verdict.findings.reflectors import near_reflectors
from siteassess.verdict.findings.site_findings import sky_finding
from siteassess.verdict.verdict import Finding
from siteassess.wording import listed

__all__ = ["METALS", "near_findings", "off_multiples_m"]

# Heights to avoid over metal are multiples of these, the wavelengths of L1 and L2 [IGS CORS].
WAVELENGTHS_M = (0.19, 0.24)
METALS = ("metal", "steel", "iron", "aluminium", "aluminum", "zinc", "copper", "tin", "lead")
MOST_NAMED = 3


def near_findings(
    require: Requirements, mount: Mount, skyline: Skyline, sky: SkyShares
) -> tuple[Finding, ...]:
    """Findings on reflectors and on a roof of metal, in the order of the criteria table.

    Parameters
    ----------
    require : Requirements
        Limits of the site file; those that are None turn into advice.
    mount : Mount
        Height above the roof, and what that is made of.
    skyline : Skyline
        Obstacles and their distances.
    sky : SkyShares
        Whether all of it was looked at.
    """
    return (_reflectors(require, skyline, sky), *_metal_roof(require, mount, sky))


def _reflectors(require: Requirements, skyline: Skyline, sky: SkyShares) -> Finding:
    distance_m = limit_or_advice(require, "reflector_distance_m")
    limit_deg = limit_or_advice(require, "max_reflector_deg")
    found = near_reflectors(skyline, nearer_than_m=distance_m, above_deg=limit_deg)
    reason = f"No solid obstacle with a distance rises above the horizon nearer than {distance_m:g} m."
    if found.name is not None:
        reason = f"{found.name} rises that high nearer than {distance_m:g} m."
    if found.unknown:
        more = len(found.unknown) - MOST_NAMED
        names = [*found.unknown[:MOST_NAMED], *([f"{more} more"] if more > 0 else [])]
        reason += f" How far away is not known of {listed(names)}."
    finding = sky_finding(
        "max_reflector_deg", require, found.highest_deg, sky, reason, asked_with="reflector_distance_m"
    )
    return replace(finding, outcome="unproven") if found.unknown and finding.outcome == "met" else finding


def _metal_roof(require: Requirements, mount: Mount, sky: SkyShares) -> tuple[Finding, ...]:
    height_m, surface = mount.height_above_roof_m, mount.roof_surface
    if height_m is None or surface is None or not _names_a_metal(surface):
        return ()
    off_m = off_multiples_m(height_m)
    reason = f"{height_m:g} m above a roof of {surface}; waves from it add up at multiples of 19 and 24 cm."
    return (sky_finding("min_metal_roof_offset_m", require, off_m, sky, reason),)


def _names_a_metal(surface: str) -> bool:
    words = "".join(sign if sign.isalpha() else " " for sign in surface.casefold()).split()
    return any(word in METALS for word in words)


def off_multiples_m(height_m: float) -> float:
    """Distance of a height from the nearest multiple of 19 or 24 cm, the first one included.

    Examples
    --------
    >>> round(off_multiples_m(0.50), 6), round(off_multiples_m(1.05), 6)
    (0.02, 0.09)
    """
    return min(
        abs(height_m - wavelength_m * max(1, floor(height_m / wavelength_m + 0.5)))
        for wavelength_m in WAVELENGTHS_M
    )
