"""Every example in a docstring runs."""

import doctest
import importlib
import pkgutil

import pytest

import siteassess

MODULES = sorted(
    module.name
    for module in pkgutil.walk_packages(siteassess.__path__, prefix="siteassess.")
    if not module.name.endswith("__main__")
)


@pytest.mark.parametrize("name", ["siteassess", *MODULES])
def test_docstring_examples_run(name: str) -> None:
    result = doctest.testmod(importlib.import_module(name), optionflags=doctest.NORMALIZE_WHITESPACE)
    assert result.failed == 0
