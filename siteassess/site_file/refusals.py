"""What the records refuse, in the tool's own words."""

import re
from datetime import date, time

from pydantic import ValidationError
from pydantic_core import ErrorDetails

from siteassess.errors import Mistake
from siteassess.site_file.schema import Node, site_schema
from siteassess.wording import did_you_mean, listed, shown

__all__ = ["key_path", "refusals"]

PLAIN_KEY = re.compile(r"[A-Za-z0-9_-]{1,60}")
# Tags of the branches of a union, and their order in it.
SHAPES = {"number": 0, "table": 1, "purpose": 2, "text": 0, "list": 1}
PATH_HINT = "write a Windows path with / or in single quotes"


def refusals(error: ValidationError, file: str) -> list[Mistake]:
    """One mistake for each thing that the records refused, in the order of the schema."""
    schema = site_schema()
    mistakes = [_mistake(detail, schema, file) for detail in error.errors(include_url=False)]
    # A mandatory key that is only misspelt has its message already.
    return [mistake for mistake in mistakes if not _is_misspelt(mistake, mistakes)]


def key_path(*steps: str | int) -> str:
    """Place in a site file, blocks of a list counted from 1.

    Examples
    --------
    >>> key_path("chain", 1, "loss_db", "1575.42")
    'chain[2].loss_db."1575.42"'
    """
    path = ""
    for step in steps:
        if isinstance(step, int):
            path += f"[{step + 1}]"
        else:
            key = step if PLAIN_KEY.fullmatch(step) else shown(step)
            path += f".{key}" if path else key
    return path


def _mistake(detail: ErrorDetails, schema: Node, file: str) -> Mistake:
    steps, parent, node = _follow(schema, detail["loc"])
    where, value = key_path(*steps), detail["input"]
    match detail["type"]:
        case "missing":
            return Mistake(file=file, where=where, problem="is missing", allowed=_must_be(node, steps))
        case "extra_forbidden":
            allowed = _suggestion(str(steps[-1]), parent, schema)
            return Mistake(file=file, where=where, problem="is an unknown key", allowed=allowed, value=value)
        case "greater_than" | "greater_than_equal" | "less_than" | "less_than_equal":
            bounds = _range(node)
            allowed = f"it must {'lie' if bounds.startswith('from') else 'be'} {bounds}"
        case "value_error":
            allowed = str(detail["ctx"]["error"])
        case "string_too_short":
            allowed = "it must not be blank"
        case "string_too_long":
            allowed = f"it must have at most {node['maxLength']} characters"
        case "string_pattern_mismatch":
            allowed = _form(steps)
        case _ if isinstance(value, dict) and isinstance(parent.get("additionalProperties"), dict):
            # TOML splits the bare key 1575.42 at its dot.
            key = ".".join((str(steps[-1]), *list(value)[:1]))
            allowed = f"write the key in quotation marks, such as {shown(key)} = ..."
        case _:
            allowed = _must_be(parent if "oneOf" in parent else node, steps)
    return Mistake(file=file, where=where, problem=f"is {_given(value)}", allowed=allowed, value=value)


def _is_misspelt(missing: Mistake, mistakes: list[Mistake]) -> bool:
    table, _, key = missing.where.rpartition(".")
    return missing.problem == "is missing" and any(
        mistake.allowed == f"did you mean {key}?" and mistake.where.rpartition(".")[0] == table
        for mistake in mistakes
    )


def _follow(schema: Node, loc: tuple[str | int, ...]) -> tuple[list[str | int], Node, Node]:
    """The steps without the tags of unions, the node above the last one, and its own."""
    steps: list[str | int] = []
    parent, node = schema, schema
    for step in loc:
        parent = node
        if "oneOf" in node and step in SHAPES:
            node = node["oneOf"][SHAPES[str(step)]]
            continue
        steps.append(step)
        if isinstance(step, int):
            node = node["items"]
        else:
            node = node.get("properties", {}).get(step) or node.get("additionalProperties") or {}
        node = _resolved(node, schema)
    return steps, parent, node


def _resolved(node: Node, schema: Node) -> Node:
    reference = node.get("$ref")
    return schema["$defs"][reference.rpartition("/")[2]] if reference else node


def _must_be(node: Node, steps: list[str | int]) -> str:
    if "oneOf" in node and node["oneOf"][0]["type"] == "string":
        return "it must be a text in quotation marks, or a list of such texts"
    if "oneOf" in node:
        return f"it must be {_number(node['oneOf'][0])}, or a table of such numbers"
    if "const" in node:
        return f"it must be {node['const']}"
    if "enum" in node:
        return f"it must be {listed((shown(name) for name in node['enum']), 'or')}"
    if node.get("format") == "date":
        return "it must be a date without quotation marks, such as 2026-10-04"
    if node.get("format") == "date-time":
        return "it must be a date and time without quotation marks, such as 2026-01-01T00:00:00"
    if isinstance(node.get("additionalProperties"), dict):
        return "it must be a table, such as { GPS = 5 }"
    block = next((step for step in steps if isinstance(step, str)), "")
    kinds = {
        "number": _number(node),
        "integer": _number(node).replace("a number", "a whole number"),
        "boolean": "true or false",
        "string": "a text in quotation marks",
        "object": f"a block [[{block}]]" if len(steps) > 1 else f"a table [{block}]",
        "array": "a list of texts" if len(steps) > 1 else f"one or more blocks [[{block}]]",
    }
    return f"it must be {kinds[node['type']]}"


def _range(node: Node) -> str:
    low, above = node.get("minimum"), node.get("exclusiveMinimum")
    high, below = node.get("maximum"), node.get("exclusiveMaximum")
    if low is not None and high is not None:
        return f"from {low:g} to {high:g}"
    lower = f"at least {low:g}" if low is not None else f"above {above:g}"
    if high is not None:
        return f"{lower} and at most {high:g}"
    return f"{lower} and below {below:g}" if below is not None else lower


def _number(node: Node) -> str:
    if "minimum" not in node and "exclusiveMinimum" not in node:
        return "a number"
    bounds = _range(node)
    return f"a number {bounds}" if bounds.startswith("from") else f"a number, {bounds}"


def _suggestion(key: str, parent: Node, schema: Node) -> str:
    known = list(parent.get("properties", {}))
    nearest = did_you_mean(key, known)
    homes = [
        name
        for name, node in schema["properties"].items()
        if key in _resolved(node, schema).get("properties", {})
    ]
    if homes:
        return f"it belongs in [{homes[0]}]"
    return nearest or f"the keys here are {listed(known)}"


def _form(steps: list[str | int]) -> str:
    if steps[-1] == "crs":
        return "it must be an authority and a code, such as EPSG:27700"
    hint = f" ({PATH_HINT})" if steps[-1] in ("file", "pattern") else ""
    return f"it must be one line without control characters{hint}"


def _given(value: object) -> str:
    if isinstance(value, dict):
        return "a table"
    if isinstance(value, (list, tuple)):
        return "a list" if value else "an empty list"
    if isinstance(value, (date, time)):  # datetime is a date
        return value.isoformat()
    return shown(value)
