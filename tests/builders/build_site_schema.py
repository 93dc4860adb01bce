"""Writes siteassess/site_file/site.schema.json from the records of the site file.

Run from the top of the source tree: python tests/builders/build_site_schema.py
"""

import json
from pathlib import Path

from siteassess.site_file.schema import site_schema

SCHEMA = Path(__file__).parents[2] / "siteassess" / "site_file" / "site.schema.json"

if __name__ == "__main__":
    SCHEMA.write_text(json.dumps(site_schema(), indent=2, ensure_ascii=False) + "\n", encoding="utf-8")
