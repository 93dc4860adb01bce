"""Named sets of criteria: limits of a public body, which a site file asks for and may then adjust."""

from collections.abc import Mapping
from functools import cache
from typing import Any

from siteassess.tables import packaged_rows

__all__ = ["criteria_sets", "with_criteria_set"]


@cache
def criteria_sets() -> dict[str, dict[str, tuple[float, str]]]:
    """Value and source of every key that a set gives, by the name of the set."""
    sets: dict[str, dict[str, tuple[float, str]]] = {}
    for row in packaged_rows("verdict/criteria_sets.csv"):
        sets.setdefault(row["set"], {})[row["key"]] = float(row["value"]), row["source"]
    return sets


def with_criteria_set(raw: Mapping[str, Any]) -> tuple[dict[str, Any], dict[str, str]]:
    """A site file with the keys of the set that its table `[require]` asks for; its own keys win.

    Parameters
    ----------
    raw : mapping
        The site file as TOML reads it.

    Returns
    -------
    raw : dict
        The same with the keys that the set adds. A name that no set has takes the mask along, so that its
        own mistake is the only one.
    asked_by : dict
        For each key that was added, the set and its source.
    """
    require = raw.get("require")
    if not isinstance(require, dict) or not isinstance(require.get("criteria_set"), str):
        return dict(raw), {}
    name = require["criteria_set"].strip()
    known = criteria_sets().get(name, {"elevation_mask_deg": (0.0, "")})
    added = {key: entry for key, entry in known.items() if key not in require}
    values = {key: value for key, (value, _) in added.items()}
    asked_by = {key: f"criteria set {name}: {source}" for key, (_, source) in added.items()}
    return {**raw, "require": {**require, **values}}, asked_by
