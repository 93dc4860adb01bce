"""The patterns that site files may name instead of a file."""

from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.shapes import by_elevation, hemisphere, isotropic
from siteassess.tables import packaged_columns, packaged_rows

__all__ = ["builtin_pattern", "builtin_patterns"]

CLOSED_FORMS = {"isotropic": isotropic, "hemisphere": hemisphere}


def builtin_patterns() -> dict[str, str]:
    """Names of the built-in patterns, each with its description."""
    return {row["pattern"]: row["description"] for row in packaged_rows("antenna/builtin.csv")}


def builtin_pattern(name: str) -> GainPattern:
    """A built-in pattern by its name.

    Parameters
    ----------
    name : str
        One of :func:`builtin_patterns`; whoever reads the site file has checked it.

    Returns
    -------
    GainPattern
        Tables are generic: they show how antennas of that build behave, not any antenna measured.

    Examples
    --------
    >>> builtin_pattern("choke-ring").gain_dbic.max().item()
    6.8
    """
    if name in CLOSED_FORMS:
        return CLOSED_FORMS[name]()
    rests_on = {row["pattern"]: row["rests_on"] for row in packaged_rows("antenna/builtin.csv")}[name]
    table = packaged_columns(f"antenna/{name}.csv")
    return by_elevation(
        name, table["elevation_deg"], table["gain_dbic"], table["cross_gain_dbic"], rests_on=rests_on
    )
