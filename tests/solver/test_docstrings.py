"""Public docstrings say what the signature says."""

import importlib
import inspect
import pkgutil
import re
from itertools import zip_longest

import pytest

import solver

SECTION = re.compile(r"^(\w[\w ]*)\n-{3,}$", re.MULTILINE)


def modules():
    for found in pkgutil.iter_modules(solver.__path__):
        if not found.name.startswith("_"):
            yield importlib.import_module(f"solver.{found.name}")


def public_things():
    for module in modules():
        for name, thing in vars(module).items():
            ours = getattr(thing, "__module__", None) == module.__name__
            if ours and not name.startswith("_") and (inspect.isfunction(thing) or inspect.isclass(thing)):
                yield pytest.param(thing, id=f"{module.__name__}.{name}")


def described(docstring):
    """Names in the Parameters section, in order, or None without one."""
    text = inspect.cleandoc(docstring)
    heads = list(SECTION.finditer(text))
    for head, following in zip_longest(heads, heads[1:]):
        if head.group(1) == "Parameters":
            body = text[head.end() : following.start() if following else len(text)]
            lines = [line for line in body.split("\n") if line and not line.startswith(" ")]
            return [name.strip().lstrip("*") for line in lines for name in line.split(":")[0].split(",")]
    return None


@pytest.mark.parametrize("module", [pytest.param(m, id=m.__name__) for m in modules()])
def test_every_module_says_what_it_holds(module):
    assert module.__doc__


@pytest.mark.parametrize("thing", list(public_things()))
def test_public_docstrings_match_signatures(thing):
    assert thing.__doc__, "no docstring"
    if inspect.isfunction(thing):
        names = described(thing.__doc__)
        if names is not None:
            assert sorted(names) == sorted(inspect.signature(thing).parameters)
