"""Writes the tables of docs/criteria.md from the tables of the package.

Run it from the project folder after a change of those tables:

    python tests/builders/build_criteria_page.py
"""

from itertools import groupby
from pathlib import Path

from siteassess.report.phrases import in_unit
from siteassess.site_file.model import Requirements
from siteassess.tables import packaged_rows
from siteassess.verdict.criteria import Criterion, read_criteria

PAGE = Path("docs/criteria.md")


def criteria_table() -> str:
    """Every criterion: what it is about, the published limit, and where that comes from."""
    rows = [
        f"| `{one.key}` | {_title(one)} | {one.sense} | {_advice(one)} | {one.source} | {one.status} |"
        for one in read_criteria().values()
    ]
    head = "| key | what it is about | limit | advice | source | status |"
    return "\n".join([head, "| --- | --- | --- | --- | --- | --- |", *rows])


def _title(criterion: Criterion) -> str:
    return criterion.title + (f"; part of `{criterion.part_of}`" if criterion.part_of else "")


def _advice(criterion: Criterion) -> str:
    default = Requirements.model_fields[criterion.key].default
    if isinstance(default, float):
        return f"required, {_in_words(default, criterion.unit)} by default"
    return "none" if criterion.advice_limit is None else _in_words(criterion.advice_limit, criterion.unit)


def _in_words(limit: float, unit: str) -> str:
    decimals = 1 if unit == "share" or limit >= 1 else 2
    return in_unit(limit, unit, decimals).replace("\N{NO-BREAK SPACE}", " ")


def sets_table() -> str:
    """Every key of every set."""
    rows = [
        f"| `{name}` | `{row['key']}` | {row['value']} | {row['source']} | {row['status']} |"
        for name, group in groupby(packaged_rows("verdict/criteria_sets.csv"), key=lambda row: row["set"])
        for row in group
    ]
    return "\n".join(["| set | key | value | source | status |", "| --- | --- | --- | --- | --- |", *rows])


def with_tables(page: str) -> str:
    """The page with its tables brought up to date."""
    for name, table in (("criteria", criteria_table()), ("sets", sets_table())):
        start, end = f"<!-- table: {name} -->\n", "<!-- end of table -->"
        before, _, rest = page.partition(start)
        assert rest, f"the page has no marker {start}"
        page = f"{before}{start}\n{table}\n\n{end}{rest.partition(end)[2]}"
    return page


if __name__ == "__main__":
    PAGE.write_text(with_tables(PAGE.read_text(encoding="utf-8")), encoding="utf-8")
