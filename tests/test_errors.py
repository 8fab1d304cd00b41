"""The exception tree: what each says and the exit status it stands for."""

from __future__ import annotations

import pytest

from guys import errors


@pytest.mark.parametrize(
    ("error", "status", "text"),
    [
        (errors.ScenarioError([errors.Fault("a.toml", 3, 1, "wind.speed", "missing")]), 2, "a.toml:3:1: wind.speed: missing"),
        (errors.OutputError("out/result.json", "no space left"), 1, "out/result.json: cannot be written: no space left"),
    ],
)
def test_each_error_says_what_it_is(error: errors.GuysError, status: int, text: str) -> None:
    assert isinstance(error, errors.GuysError)
    assert (error.exit_status, str(error)) == (status, text)


@pytest.mark.parametrize(
    ("fault", "text"),
    [
        (errors.Fault(None, None, None, "", "wrong"), "scenario: wrong"),
        (errors.Fault("a.toml", None, None, "", "no such file"), "a.toml: no such file"),
        (errors.Fault("a.toml", 7, None, "", "not UTF-8"), "a.toml:7: not UTF-8"),
        (errors.Fault(None, 7, 2, "spar[0].name", "missing"), "scenario:7:2: spar[0].name: missing"),
    ],
)
def test_a_fault_names_its_place_as_far_as_known(fault: errors.Fault, text: str) -> None:
    assert str(fault) == text


def test_every_fault_has_its_line() -> None:
    faults = [errors.Fault("a.toml", line, 1, "k", "m") for line in (1, 2, 3)]
    error = errors.ScenarioError(faults)
    assert error.faults == tuple(faults)
    assert len(str(error).splitlines()) == len(faults)


def test_the_tree_is_drawn_as_it_is() -> None:
    drawn = errors.__doc__ or ""
    kinds = {name for name, each in vars(errors).items() if isinstance(each, type) and issubclass(each, Exception)}
    assert kinds == {name for name in kinds if name in drawn}
    assert all(f"{each.__name__} " in drawn for each in errors.GuysError.__subclasses__() if each.__module__ == "guys.errors")
