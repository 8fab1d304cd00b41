"""The record page, read as a reader's browser would read it: by a parser that knows nothing of how it was made.

Every number with a key must stand in `record.json` and in the `result.json` of a run of its own, with all digits; what is written must be
that number in the unit written, by an independent library of units.  The page keeps the rules of a strict content policy and of readers
that speak it.  How it looks in a browser is `tests/browser.py`.
"""

from __future__ import annotations

import base64
import hashlib
import json
import math
import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from functools import cache
from html.parser import HTMLParser
from pathlib import Path
from typing import Any

import numpy as np
import pint
import pytest
import scenarios_made as made

from guys import cli, read_scenario, record, solve
from guys.errors import OutputError
from guys.exchange import recording, result
from guys.record.numbers import grouped
from guys.record.pdf import pdf
from guys.studies import recording as study

SCENARIOS = Path(__file__).parent.parent / "scenarios"
SHIPPED = sorted(SCENARIOS.glob("*.toml"))
WRITTEN = 0.01
"""Share by which a number written to three figures, and rounded to one side, may miss: 1.01 written for 1.0001."""
HALF_DEGREE = 0.25001
"""Bearings are written to half a degree."""
VOID = {"meta", "br", "link", "img", "input"}


@dataclass
class Node:
    tag: str
    attributes: dict[str, str]
    children: list[Node | str] = field(default_factory=list)

    def all(self, tag: str = "") -> Iterator[Node]:
        for child in self.children:
            if isinstance(child, Node):
                if not tag or child.tag == tag:
                    yield child
                yield from child.all(tag)

    @property
    def text(self) -> str:
        return "".join(child if isinstance(child, str) else child.text for child in self.children)


class Page(HTMLParser):
    """A tree of the page; complains of tags that do not close in order."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.root = Node("", {})
        self.open = [self.root]
        self.feed(text)
        self.close()
        assert len(self.open) == 1

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        node = Node(tag, {name: value or "" for name, value in attrs})
        assert len(node.attributes) == len(attrs), f"an attribute twice in {tag}"
        self.open[-1].children.append(node)
        if tag not in VOID:
            self.open.append(node)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.open[-1].children.append(Node(tag, {name: value or "" for name, value in attrs}))

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop().tag == tag

    def handle_data(self, data: str) -> None:
        self.open[-1].children.append(data)


@cache
def recorded(path: Path) -> study.Recorded:
    return study.record(read_scenario(str(path)))


@cache
def text_of(path: Path, units: str = "SI") -> str:
    return record.html(recorded(path), units)  # type: ignore[arg-type]


@cache
def page_of(path: Path, units: str = "SI") -> Node:
    return Page(text_of(path, units)).root


@cache
def told(path: Path) -> dict[str, Any]:
    """What `record.json` holds, through its text."""
    out: dict[str, Any] = json.loads(recording.as_text(recorded(path)))
    return out


def at(node: Any, key: str) -> Any:
    for step in key.split("."):
        node = node[int(step)] if isinstance(node, list) else node[step]
    return node


shipped = pytest.mark.parametrize("path", SHIPPED, ids=lambda path: path.stem)


# ---------------------------------------------------------------- numbers


@shipped
def test_every_number_is_that_of_the_files_to_the_last_digit(path: Path) -> None:
    numbers = [n for n in page_of(path).all("data") if "data-key" in n.attributes]
    assert len(numbers) > 1000
    for n in numbers:
        value, found = n.attributes["value"], at(told(path), n.attributes["data-key"])
        assert (found is None and value == "") or float(value) == found, n.attributes


def test_the_result_is_that_of_a_run_of_its_own() -> None:
    again = json.loads(result.as_text(solve(read_scenario(str(SHIPPED[0])))))
    assert told(SHIPPED[0])["result"] == again


READ = re.compile(r"(?P<number>−?[\d.]+) ?(?P<unit>.*)")
REGISTRY = pint.UnitRegistry()
UNITS = {"°": "degree", "lbf ft": "lbf * ft", "kN m": "kN * m", "N m": "N * m", "psf": "lbf / ft**2", "ksi": "kip / inch**2", "kip": "kip",
         "lbf/ft": "lbf / ft", "N/m": "N / m", "kg/m": "kg / m", "lb/ft": "lb / ft", "in": "inch", "mph": "mile / hour",
         "kN m²": "kN * m**2", "kip ft²": "kip * ft**2", "m²": "m**2", "ft²": "ft**2", "kg/m³": "kg / m**3", "lb/ft³": "lb / ft**3",
         "kN/mm": "kN / mm", "kip/in": "kip / inch"}  # fmt: skip
BASE = ("degree", "newton * meter", "pascal", "newton / meter", "kilogram / meter", "meter", "newton", "kilogram", "meter / second",
        "newton * meter**2", "meter**2", "kilogram / meter**3")  # fmt: skip


@cache
def factor_of(unit: str) -> float:
    """What one of the unit is in SI, and in degrees for angles."""
    one = REGISTRY.Quantity(1.0, UNITS.get(unit, unit))
    return float(next(one.to(base).magnitude for base in BASE if one.is_compatible_with(base)))


def check_written(value: float, words: str) -> None:
    """The words are the value, to what its figures tell."""
    words = words.strip().strip("()").replace("\u202f", "")
    if words in ("–", "") or "°C" in words or "°F" in words or words.startswith("over") or "/K" in words:
        return
    feet = re.fullmatch(r"(−?)(?:(\d+) ft )?(\d+) in", words)
    if feet:
        metres = 0.0254 * (12 * int(feet[2] or 0) + int(feet[3]))
        assert abs(abs(value) - metres) <= 0.0128, (value, words)
        return
    power = re.fullmatch(r"(−?[\d.]+) × 10([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+)", words)
    if power:
        written = float(power[1].replace("−", "-")) * 10.0 ** int(power[2].translate(str.maketrans("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789")))
        assert written == pytest.approx(value, rel=0.051)
        return
    parts = READ.fullmatch(words)
    assert parts, words
    number = float(parts["number"].replace("−", "-"))
    decimals = len(parts["number"].partition(".")[2])
    unit = parts["unit"]
    size = factor_of(unit) if unit else 1.0
    shown, least = size * number, size * 10.0**-decimals
    least = max(least, HALF_DEGREE) if unit == "°" else least
    alike = (value, math.degrees(value)) if unit == "°" else (value,)  # angles of the scenario are in radians, keys ending in _deg are not
    assert any(abs(shown - v) <= max(least, WRITTEN * abs(v)) * (1 + 1e-6) + 1e-9 for v in alike), (value, words)


@pytest.mark.parametrize("units", ["SI", "US"])
@shipped
def test_what_is_written_is_the_number_in_the_unit_written(path: Path, units: str) -> None:
    """Both systems are checked, with Pint."""
    seen = set()
    for parent in page_of(path, units).all():
        for n, child in enumerate(parent.children):
            if isinstance(child, Node) and child.tag == "data" and child.attributes["value"]:
                value = float(child.attributes["value"])
                others = [c for c in parent.children[n + 1 : n + 3] if isinstance(c, Node) and c.attributes.get("class") == "other"]
                for words in (child.text, *(o.text for o in others[:1])):
                    if (value, words) not in seen:
                        seen.add((value, words))
                        check_written(value, words)
    assert len(seen) > 1000


def test_thousands_are_parted_and_zero_has_no_sign() -> None:
    assert [grouped(v, 1) for v in (1234567.89, -0.04, -1234.0)] == ["1\u202f234\u202f567.9", "0.0", "−1\u202f234.0"]


# ---------------------------------------------------------------- what the record tells


@shipped
def test_words_of_the_run_are_all_there(path: Path) -> None:
    solution, page = recorded(path).solution, " ".join(page_of(path).text.split())
    every = [*solution.warnings, *solution.notes, *solution.not_checked, *solution.cautions, solution.scenario.sha256, solution.version]
    every += [text for f in solution.findings for text in (f.thing, f.why, f.source, f.governs, f.verdict)]
    every += [case.name for case in solution.scenario.case]
    assert not [words for words in every if " ".join(words.split()) not in page]


@shipped
def test_the_scenario_is_attached_as_it_was_read(path: Path) -> None:
    [shown] = page_of(path).all("pre")
    assert shown.text == path.read_text(encoding="utf-8")


@shipped
def test_free_body_on_the_page_closes(path: Path) -> None:
    """Summed again from the numbers of the page alone: r x F + M about the foot."""
    values = {n.attributes["data-key"]: float(n.attributes["value"]) for n in page_of(path).all("data")
              if n.attributes.get("data-key", "").startswith("free_body") and n.attributes["value"]}  # fmt: skip

    def row(key: str) -> np.ndarray:
        return np.array([values[f"{key}.{axis}"] for axis in range(3)])

    count = 1 + max(int(key.split(".")[2]) for key in values if key.startswith("free_body.forces"))
    force, where, couple = (np.array([row(f"free_body.forces.{n}.{k}") for n in range(count)]) for k in ("force_N", "at_m", "couple_Nm"))
    moment = np.cross(where - row("free_body.about_m"), force) + couple
    size = values["free_body.reference_force_N"]
    assert np.abs(force.sum(axis=0)).max() < 1e-9 * size
    assert np.abs(moment.sum(axis=0)).max() < 1e-9 * size * np.abs(where).max()


UNIT = re.compile(r" (kg/m³|kg/m|m/s²|m/s|Pa|m)(?=[ )]|$)")
SIGNS = {"×": "*", "½": "0.5", "²": "**2", "^": "**", "−": "-", "ln": "log"}
ROUNDED = 6e-5
"""Numbers of formulas have six figures: of at most six factors, each off by 5e-6 or, squared, by twice that."""


def evaluated(symbols: str) -> float:
    """What a formula comes to, by its numbers alone."""
    written = UNIT.sub("", symbols.rpartition(" = ")[2].partition(", ")[0])
    for sign, python in SIGNS.items():
        written = written.replace(sign, python)
    assert re.fullmatch(r"[\d. *+/()logexp-]+", written), written
    return float(eval(written, {"__builtins__": {}, "log": math.log, "exp": math.exp}))


def formulas(page: Node) -> list[tuple[str, float]]:
    """Those with a right-hand side, and the number beside each."""
    rows = [row for line in page.all("dl") for row in line.all("div")]
    pairs = [(next(row.all("dt")).text, float(next(row.all("data")).attributes["value"])) for row in rows]
    return [(symbols, value) for symbols, value in pairs if " = " in symbols]


@shipped
def test_formulas_come_to_what_stands_beside_them(path: Path) -> None:
    found = formulas(page_of(path))
    assert len(found) == 4
    for symbols, value in found:
        assert evaluated(symbols) == pytest.approx(value, rel=ROUNDED), symbols


PROFILES = {
    "uniform": "uniform",
    "power": {"power": 0.14},
    "exposure": {"asce7": "B"},
    "ridge": {"asce7": "C", "kd": 0.85, "topography": {"shape": "ridge", "height": "30 m", "half_length": "90 m"}},
    "terrain": {"en1991": "III", "orography": 1.2, "structural": 0.9},
}


@pytest.mark.parametrize("profile", PROFILES)
def test_formulas_of_every_profile(profile: str) -> None:
    """On a pole alone; low enough for the profiles that stay as they are below some height."""
    pole = made.spar(base="fixed", section=[made.tube(8.0, 0.14, 0.005)])
    document = made.document([pole], wind=made.wind(0.0, averaging=60.0, profile=PROFILES[profile]))
    for symbols, value in formulas(Page(record.html(study.record(made.scenario(document)))).root):
        assert evaluated(symbols) == pytest.approx(value, rel=ROUNDED), symbols


# ---------------------------------------------------------------- what cannot be solved


TOO_TALL = made.document([made.spar(base="fixed", section=[made.tube(30.0, 0.03, 0.002)])], case=[{"name": "still", "wind": 0.0}])
"""A pole twice as tall as it can stand (Greenhill)."""


def test_what_has_no_stable_case_is_told_and_why() -> None:
    """The record has no loads, and says what falls and where to."""
    found = study.record(made.scenario(TOO_TALL))
    page = " ".join(Page(record.html(found)).root.text.split())
    assert found.free_body is None
    assert "No case stands" in page
    assert "says why it stops" in page
    reasons = [r for r in found.solution.reason if r]
    assert reasons
    assert all(r in page for r in reasons)
    assert "Attached" not in page


def test_no_holdfast_no_wind_no_cable() -> None:
    alone = made.document([made.spar(base="fixed", section=[made.tube(6.0)])], case=[{"name": "still", "wind": 0.0}])
    page = " ".join(Page(record.html(study.record(made.scenario(alone)))).root.text.split())
    assert "There is no cable." in page
    assert "No case has wind" in page
    assert "not solved, no cable is given by tension" in page


def test_the_command_writes_it_all_the_same(tmp_path: Path) -> None:
    path = tmp_path / "tall.toml"
    path.write_text(made.text(TOO_TALL), encoding="utf-8")
    assert cli.run(["record", str(path), "--out", str(tmp_path / "out")]) == 4
    assert sorted(p.name for p in (tmp_path / "out").iterdir()) == ["record.html", "record.json", "result.json"]
    page = (tmp_path / "out" / "record.html").read_text(encoding="utf-8")
    falls = [c["reason"] for c in json.loads((tmp_path / "out" / "result.json").read_text())["cases"] if "reason" in c]
    assert falls
    assert "no equilibrium" in Page(page).root.text


def test_names_with_marks_of_the_page_stay_words() -> None:
    document = made.mast(0.0)
    document["title"] = "<script>alert(1)</script> & {{ 1 }}"
    root = Page(record.html(study.record(made.scenario(document)))).root
    assert not list(root.all("script"))
    assert next(root.all("h1")).text == document["title"]


# ---------------------------------------------------------------- rules of the page


@shipped
def test_nothing_comes_from_outside(path: Path) -> None:
    page = page_of(path)
    for node in page.all():
        assert node.tag not in ("script", "iframe", "object", "embed", "form", "img", "link", "base", "image"), node.tag
        for name, value in node.attributes.items():
            assert name not in ("src", "style", "srcset", "action"), (node.tag, name)
            assert not name.startswith("on"), (node.tag, name)
            assert name != "href" or value.startswith("#"), value
            assert all(place.startswith("#") for place in re.findall(r"url\(([^)]*)\)", value))
    [style] = page.all("style")
    assert "url(" not in style.text
    assert "@import" not in style.text
    policy = next(m.attributes["content"] for m in page.all("meta") if m.attributes.get("http-equiv") == "Content-Security-Policy")
    digest = base64.b64encode(hashlib.sha256(style.text.encode()).digest()).decode()
    assert policy == f"default-src 'none'; style-src 'sha256-{digest}'; base-uri 'none'; form-action 'none'"


@shipped
def test_links_and_labels_lead_somewhere_and_names_are_single(path: Path) -> None:
    nodes = list(page_of(path).all())
    names = [n.attributes["id"] for n in nodes if "id" in n.attributes]
    assert len(names) == len(set(names))
    wanted = [n.attributes["href"][1:] for n in nodes if "href" in n.attributes]
    wanted += [w for n in nodes for key in ("aria-labelledby", "aria-describedby") for w in n.attributes.get(key, "").split()]
    wanted += [w for n in nodes for value in n.attributes.values() for w in re.findall(r"url\(#([^)]*)\)", value)]
    assert not sorted(set(wanted) - set(names))


@shipped
def test_a_reader_that_speaks_the_page_finds_its_way(path: Path) -> None:
    page = page_of(path)
    nodes = list(page.all())
    assert [n.attributes["lang"] for n in nodes if n.tag == "html"] == ["en"]
    assert [n.tag for n in nodes if re.fullmatch(r"h\d", n.tag)] == ["h1", *["h2"] * 19]
    assert all("scope" in n.attributes for n in nodes if n.tag == "th")
    for table in page.all("table"):
        head, *rows = table.all("tr")
        assert len({len([c for c in row.children if isinstance(c, Node)]) for row in (head, *rows)}) == 1
    for kind, tag in (("Table", "caption"), ("Figure", "figcaption")):
        numbers = [next(n.all("b")).text for n in page.all(tag)]
        assert numbers == [f"{kind} {k + 1}" for k in range(len(numbers))]
        assert numbers
    drawings = [n for n in nodes if n.attributes.get("role") == "img"]
    assert len(drawings) == 3
    assert all({"aria-labelledby", "aria-describedby"} <= set(n.attributes) for n in drawings)


def test_the_same_input_gives_the_same_bytes(tmp_path: Path) -> None:
    document = made.mast(0.0, 90.0)
    pages = {record.html(study.record(made.scenario(document))) for _ in range(2)}
    assert len(pages) == 1


def test_us_units_come_first_where_they_are_asked_for() -> None:
    path = SHIPPED[0]
    first = next(n for n in page_of(path, "US").all("data") if n.attributes.get("data-key", "").endswith("tension_N"))
    assert first.text.endswith("lbf")
    assert "kN" in page_of(path, "US").text


# ---------------------------------------------------------------- PDF


def test_pdf_without_its_extra_says_what_to_do(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(__import__("sys").modules, "weasyprint", None)
    with pytest.raises(OutputError, match=r"guys\[pdf\].*record\.html prints"):
        pdf("<p>x</p>")
