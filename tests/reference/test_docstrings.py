"""Every public relation says what it takes, in which unit, and where it is from."""

import inspect
import re

import pytest

from headwater import air, engine, hull, jet, launch, slip, suction, water

RELATIONS = [
    pytest.param(function, id=f"{module.__name__}.{name}")
    for module in (water, air, engine, jet, suction, hull, launch, slip)
    for name, function in inspect.getmembers(module, inspect.isfunction)
    if function.__module__ == module.__name__ and not name.startswith("_")
]


_PLAIN = ("xp", "unit", "state", "hull", "craft")  # what a module's own relations all take


def test_relations_are_found():
    assert len(RELATIONS) >= 45


@pytest.mark.parametrize("function", RELATIONS)
def test_docstring_names_each_parameter_and_its_source_with_a_mark(function):
    text = inspect.getdoc(function) or ""
    parameters = [name for name in inspect.signature(function).parameters if name not in _PLAIN]
    documented = re.findall(r":param (\w+):", text)
    if function is not jet.unit:
        documented = [name for name in documented if name not in _PLAIN]
    assert parameters == documented
    assert re.search(r"^Source: .*\[[VSPMD]\]", text.replace("\n    ", " "), re.MULTILINE)
