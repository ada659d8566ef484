"""Methods by name, and what each of them states of itself."""

from __future__ import annotations

import pytest

from xlroot import methods
from xlroot.errors import MethodError
from xlroot.methods import Family, Method, Need

ALL = sorted(set(methods.catalogue().values()), key=lambda method: method.name)

BRACKETING = {
    "bisection",
    "regula falsi",
    "Illinois",
    "Pegasus",
    "Anderson-Björck",
    "Ridders",
    "Brent",
    "Chandrupatla",
    "ITP",
    "TOMS 748",
}
OPEN = {"fixed point", "Steffensen", "secant", "Newton", "Halley"}


def test_there_are_fifteen_methods_in_two_families() -> None:
    assert {each.name for each in ALL if each.family is Family.BRACKETING} == BRACKETING
    assert {each.name for each in ALL if each.family is Family.OPEN} == OPEN


@pytest.mark.parametrize("method", ALL, ids=lambda method: method.name)
def test_a_method_states_its_paper_order_and_use(method: Method) -> None:
    assert method.order
    assert method.paper
    assert method.when
    assert (method.need is not Need.VALUE) == (method.name in {"Newton", "Halley"})


@pytest.mark.parametrize(
    ("written", "name"),
    [
        ("BISECTION", "bisection"),
        ("Regula-Falsi", "regula falsi"),
        ("regulafalsi", "regula falsi"),
        ("anderson–björck", "Anderson-Björck"),
        ("toms748", "TOMS 748"),
        ("Toms-748", "TOMS 748"),
        ("Fixed_Point", "fixed point"),
        ("itp", "ITP"),
    ],
)
def test_a_name_is_found_however_it_is_spelt(written: str, name: str) -> None:
    assert methods.find(written).name == name


def test_a_misspelt_name_gets_the_nearest() -> None:
    with pytest.raises(MethodError, match="did you mean Chandrupatla"):
        methods.find("chandrupalta")


def test_auto_says_what_it_chose_and_why() -> None:
    method, why = methods.choose(" Auto ")
    assert method.family is Family.BRACKETING
    assert "bracket" in why
    assert methods.choose("newton")[0].name == "Newton"
