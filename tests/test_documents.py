"""What README, DEVELOPERS and docs say is so: their examples run and print what stands below them, their links lead somewhere, and no key
of the scenario file or of the results goes unmentioned.

Blocks of code are read by their language: `python` runs, all blocks of a page in one namespace; `sh` runs the `guys` commands and the
here-documents in it, a command's exit status being 0 unless `# exit N` stands behind it; every line of an `output` block must have been
printed by the block before, up to `...` and but for the width of its columns; `toml` holds tables that the reader takes, and is a
scenario where it has a title; `json` is JSON.  Lines that set up an environment are run by `.ci/run`, not here.
"""

from __future__ import annotations

import json
import re
import shlex
import shutil
import tomllib
from collections.abc import Iterator
from contextlib import redirect_stderr, redirect_stdout
from functools import cache
from io import StringIO
from pathlib import Path
from typing import Any

import pytest
from sybil import Example, Sybil
from sybil.parsers.markdown import CodeBlockParser
from toml_text import MAST

from guys import cli, parse_scenario, read_scenario, solve
from guys.exchange import comparison, losses, matters, recording, result, stages, tables
from guys.exchange import field as crew
from guys.exchange import raising as exchange_raising
from guys.scenario import Scenario, draft, schema, starters
from guys.scenario.stage import Stage
from guys.studies import hoisting, raising
from guys.studies.cells import WORDS
from guys.studies.compare import compare
from guys.studies.field import field
from guys.studies.lost import lose
from guys.studies.matters import weigh
from guys.studies.recording import record
from guys.studies.stages import Stages, build_up

REPOSITORY = Path(__file__).parent.parent
PAGES = [REPOSITORY / "README.md", REPOSITORY / "DEVELOPERS.md", *sorted((REPOSITORY / "docs").glob("*.md"))]
LARGEST_PICTURE = 400_000
SET_UP = ("python3 -m venv", ".venv/bin/", ".ci/run", "git clone", "# ")
"""Beginnings of lines that set up, measure or explain, and are not run here."""


# ---------------------------------------------------------------- blocks of code


def run_sh(example: Example) -> None:
    lines = iter(example.parsed.splitlines())
    printed = StringIO()
    for line in lines:
        if line.strip() and not line.startswith(SET_UP):
            _command(line, lines, printed)
    example.namespace["printed"] = printed.getvalue()


def _command(line: str, more: Iterator[str], printed: StringIO) -> None:
    here = re.fullmatch(r"cat >> (\S+) <<'(\w+)'", line)
    if here is not None:
        with Path(here[1]).open("a", encoding="utf-8") as file:
            file.writelines(f"{each}\n" for each in iter(lambda: next(more), here[2]))
        return
    words, _, comment = line.partition("#")
    program, *arguments = shlex.split(words)
    assert program == "guys", f"not run by this test: {line}"
    into = arguments[arguments.index(">") + 1] if ">" in arguments else None
    out, err = StringIO(), StringIO()
    with redirect_stdout(out), redirect_stderr(err):
        status = cli.run(arguments[: arguments.index(">")] if into else arguments)
    wanted = re.search(r"exit (\d)", comment)
    assert status == (int(wanted[1]) if wanted else 0), f"{line}\n{out.getvalue()}{err.getvalue()}"
    if into:
        Path(into).write_text(out.getvalue(), encoding="utf-8")
    else:
        printed.write(out.getvalue())


def run_python(example: Example) -> None:
    printed = StringIO()
    with redirect_stdout(printed):
        exec(compile(example.parsed, f"{example.path}:{example.line}", "exec"), example.namespace)
    example.namespace["printed"] = printed.getvalue()


def compare_output(example: Example) -> None:
    printed = [" ".join(line.split()) for line in example.namespace["printed"].splitlines()]
    for line in (" ".join(each.split()) for each in example.parsed.splitlines()):
        known = any(each.startswith(line.removesuffix("...")) for each in printed) if line.endswith("...") else line in printed
        assert known, f"not printed: {line}\n" + "\n".join(printed)


def read_toml(example: Example) -> None:
    document = tomllib.loads(example.parsed)
    if "title" in document:
        parse_scenario(example.parsed)
        return
    _, findings = draft.draft(document)
    assert not [f"{finding.key}: {finding.message}" for finding in findings if len(finding.key) > 1 or finding.key[0] in document]


def read_json(example: Example) -> None:
    json.loads(example.parsed)


def passed_over(example: Example) -> None:
    """Diagrams and formulas in plain text."""


LANGUAGES = {"sh": run_sh, "python": run_python, "output": compare_output, "toml": read_toml, "json": read_json, "text": passed_over}
PARSERS = [CodeBlockParser(language=name, evaluator=run) for name, run in LANGUAGES.items()]
READER = Sybil(parsers=PARSERS, pattern="*.md", path=str(REPOSITORY))


def test_blocks_are_in_languages_this_test_knows() -> None:
    found = {(page.name, name) for page in PAGES for name in re.findall(r"^```(\w*)$", page.read_text(encoding="utf-8"), re.MULTILINE)}
    assert {name for _, name in found} <= {*LANGUAGES, ""}


@pytest.mark.usefixtures("one_format")
@pytest.mark.parametrize("page", PAGES, ids=lambda page: page.name)
def test_every_block_of_a_page_runs(page: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    shutil.copytree(REPOSITORY / "scenarios", tmp_path / "scenarios")
    monkeypatch.chdir(tmp_path)
    for example in READER.parse(page).examples():
        example.evaluate()


# ---------------------------------------------------------------- links, pictures, commands


def anchors_of(page: Path) -> set[str]:
    """The places of a page that a link may lead to: its headings, as the usual renderers name them."""
    headings = re.findall(r"^#+ (.+)$", page.read_text(encoding="utf-8"), re.MULTILINE)
    return {re.sub(r"[^\w\- ]", "", heading.lower()).replace(" ", "-") for heading in headings}


@pytest.mark.parametrize("page", PAGES, ids=lambda page: page.name)
def test_links_lead_somewhere(page: Path) -> None:
    text = re.sub(r"```.*?```|`[^`]*`", "", page.read_text(encoding="utf-8"), flags=re.DOTALL)
    broken = []
    for link in re.findall(r"\]\(([^)\s]+)\)", text):
        target, _, place = link.partition("#")
        if re.match(r"\w+:", target):
            continue
        goal = (page.parent / target).resolve() if target else page
        if not goal.exists() or (place and place not in anchors_of(goal)):
            broken.append(link)
    assert not broken


def test_pictures_are_small() -> None:
    for picture in (REPOSITORY / "docs").glob("*.png"):
        assert picture.stat().st_size < LARGEST_PICTURE


def readme_commands() -> list[str]:
    return re.findall(r"^python3 -m venv .+$", (REPOSITORY / "README.md").read_text(encoding="utf-8"), re.MULTILINE)


def test_two_commands_of_the_readme_do_all_the_setting_up() -> None:
    solving, testing = readme_commands()
    assert re.search(r"&& \.venv/bin/guys solve scenarios/\S+\.toml --out \S+$", solving)
    assert (REPOSITORY / re.findall(r"scenarios/\S+\.toml", solving)[0]).exists()
    assert re.search(r"&& \.venv/bin/pytest( -n auto)?$", testing)


def test_ci_runs_the_test_command_of_the_readme() -> None:
    """It takes the line from the README by this very pattern, and ends with it."""
    script = (REPOSITORY / ".ci/run").read_text(encoding="utf-8")
    pattern = re.findall(r"grep -m 1 '([^']+)' README\.md", script)
    assert [re.search(pattern[0], command) is not None for command in readme_commands()] == [False, True]
    assert script.rstrip().splitlines()[-1].startswith("eval ")


# ---------------------------------------------------------------- nothing goes unmentioned


def code_words(page: str) -> set[str]:
    """Everything a page sets in code, whole and in words."""
    spans = re.findall(r"`([^`\n]+)`", (REPOSITORY / page).read_text(encoding="utf-8"))
    return {word for span in spans for word in (span, *re.findall(r"[\w.\-]+", span))}


def section_of(page: str, heading: str) -> str:
    text = (REPOSITORY / page).read_text(encoding="utf-8")
    return text.split(f"### `{heading}", 1)[1].split("\n### ", 1)[0].split("\n## ", 1)[0]


TABLES = {
    "SiteEntry": "[site]`",
    "Spar": "[[spar]]`",
    "Section": "[[spar.section]]`",
    "Fitting": "[[spar.fitting]]`",
    "AnchorEntry": "[[anchor]]`",
    "LayoutEntry": "[[layout]]`",
    "Search": "[search]`",
    "SearchMove": "[[search.move]]`",
    "GuyLevel": "[[guy_level]]`",
    "CableEntry": "[[cable]]`",
    "RopeEntry": "[rope.NAME]`",
    "Material": "[material.NAME]`",
    "Part": "[part.NAME]`",
    "Setting": "[setting]`",
    "WindEntry": "[wind]`",
    "Gust": "[gust]`",
    "Ice": "[ice]`",
    "CaseEntry": "[[case]]`",
    "CombinationsEntry": "[combinations]`",
    "FactoredEntry": "[allowables]`",
    "AllowablesEntry": "[allowables]`",
    "Analysis": "[analysis]`",
    "Lost": "[lost]`",
    "Ranges": "[ranges]`",
    "Limit": "[limit]`",
    "FieldWork": "[field]`",
    "Rigged": "[field]`",
    "Stage": "[[stage]]`",
    "Raising": "[raise]`",
    "GinPole": "[raise]`",
    "Holding": "[raise]`",
    "Winch": "[raise]`",
}


@cache
def scenario_schema() -> dict[str, Any]:
    return schema.scenario_schema()


@pytest.mark.parametrize("model", TABLES)
def test_the_guide_names_every_key_of_a_table(model: str) -> None:
    text = section_of("docs/user-guide.md", TABLES[model])
    keys = scenario_schema()["$defs"][model]["properties"]
    assert not [key for key in keys if f"`{key}`" not in text]


def test_the_guide_names_every_other_key() -> None:
    found = scenario_schema()
    known = code_words("docs/user-guide.md")
    assert not [key for table in (found, *found["$defs"].values()) for key in table["properties"] if key not in known]


def test_the_guide_tells_the_defaults() -> None:
    """Those of factors and choices, read from the schema and from a scenario that gives none."""
    allowables, setting = parse_scenario(_bare()).allowables, parse_scenario(_bare()).setting
    text = section_of("docs/user-guide.md", "[allowables]`")
    for key, value in (("cable", allowables.cable), ("anchor", allowables.anchor), ("sliding", allowables.sliding)):
        assert f"| `{key}` | {value:.1f} |" in text
    assert f"| `temperature` | {setting.temperature - 273.15:.0f} °C |" in section_of("docs/user-guide.md", "[setting]`")


def _bare() -> str:
    from toml_text import dumps

    return dumps(MAST)


def keys_of(node: Any) -> set[str]:
    if isinstance(node, dict):
        return set(node) | {key for value in node.values() for key in keys_of(value)}
    return {key for item in node for key in keys_of(item)} if isinstance(node, list) else set()


def test_the_guide_names_every_key_and_column_of_the_results() -> None:
    solution = solve(boom_in_one_wind())
    names = {*solution.cables.name, *solution.anchors.name}
    known = code_words("docs/user-guide.md")
    heads = [text.splitlines()[0].split(",") for text in (tables.anchors(solution), tables.cables(solution))]
    told = keys_of(result.as_dict(solution)) - names
    assert not sorted(told - known - {"lift_N", "sideways_N"})
    assert not [column for head in heads for column in head if column not in known]


def boom_in_one_wind() -> Scenario:
    scenario = parse_scenario(starters.text("boom"))
    assert scenario.wind is not None
    return scenario.model_copy(update={"wind": scenario.wind.model_copy(update={"directions": (0.0,)})})


def built_up(scenario: Scenario) -> Stages:
    return build_up(scenario.model_copy(update={"stage": (Stage(name="whole"),)}))


STUDIES = {"field": (field, crew), "lost": (lose, losses), "matters": (weigh, matters), "stages": (built_up, stages)}


@pytest.mark.parametrize(("study", "told"), STUDIES.values(), ids=STUDIES)
def test_the_guide_names_every_key_and_column_of_the_studies(study: Any, told: Any) -> None:
    found = study(boom_in_one_wind())
    known = code_words("docs/user-guide.md")
    assert not sorted(keys_of(told.as_dict(found)) - known - set(WORDS))
    assert not [column for column in told.as_table(found).splitlines()[0].split(",") if column not in known]


def test_the_guide_names_every_key_and_column_of_a_comparison() -> None:
    found = compare([boom_in_one_wind()])
    known, parts = code_words("docs/user-guide.md"), ("_of", "_case", "_wind_from_deg")
    columns = [column for column in comparison.as_table(found).splitlines()[0].split(",") if not column.endswith(parts)]
    assert not sorted({*keys_of(comparison.as_dict(found)), *columns} - known)


def test_the_guide_names_every_key_and_column_of_a_raising() -> None:
    raised = raising.solve(read_scenario(REPOSITORY / "scenarios/tilt-up-mast.toml"))
    known = code_words("docs/user-guide.md")
    told = keys_of(exchange_raising.as_dict(raised, hoisting.findings(raised)))
    columns = {name for name in exchange_raising.table(raised).splitlines()[0].split(",") if not name.startswith("side_guy_")}
    assert not sorted((told | columns) - known)


def test_the_guide_names_every_key_of_the_record() -> None:
    found = record(boom_in_one_wind())
    known = code_words("docs/user-guide.md")
    told = {name: part for name, part in recording.as_dict(found).items() if name != "result"}
    assert not sorted(keys_of(told) - known)


def test_the_guide_names_every_command_and_option() -> None:
    text = (REPOSITORY / "docs/user-guide.md").read_text(encoding="utf-8")
    for name, command in cli.commands.commands.items():
        assert f"`guys {name}" in text
        assert not [opt for param in command.params for opt in param.opts if opt.startswith("--") and f"`{opt}" not in text]
