"""JSON Schema of site files, for editors and for the words of messages."""

from typing import Any

from siteassess.site_file.model import Site

__all__ = ["site_schema"]

Node = dict[str, Any]


def site_schema() -> Node:
    """JSON Schema of a site file (draft 2020-12), made from the records.

    The file `site.schema.json` beside this module holds the same.
    """
    schema: Node = _for_toml(Site.model_json_schema(by_alias=True))
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        **schema,
        "title": "Site file",
        "description": "A candidate spot for a fixed GNSS antenna, as siteassess reads it.",
    }


def _for_toml(node: Any) -> Any:
    """The schema without null, which TOML does not have, and without titles that only repeat the key."""
    if isinstance(node, list):
        return [_for_toml(item) for item in node]
    if not isinstance(node, dict):
        return node
    kept = {
        key: {name: _for_toml(item) for name, item in value.items()}
        if key == "properties"
        else _for_toml(value)
        for key, value in node.items()
        if key != "title" and not (key == "default" and value is None)
    }
    if "anyOf" in kept:
        real = [branch for branch in kept.pop("anyOf") if branch != {"type": "null"}]
        kept = {**real[0], **kept} if len(real) == 1 else {**kept, "oneOf": real}
    return kept
