"""The three masts of the benchmark as scenario files.

`slender_18m` is a plain dictionary first, because the outside library solves the same mast; its guys are given by unstressed length.
The other two have guys by initial tension, about a tenth of their strength.
"""

from __future__ import annotations

from typing import Any

from tests.reference_numbers.scenario_lines import scenario_lines

DIRECTIONS = 72
EVERY = "every 5 deg"
UNSTRESSED = {9.0: 14.198, 17.0: 20.227}
"""Unstressed length [m] by guy level [m]: about 1.45 kN as erected."""


def slender_18m() -> dict[str, Any]:
    """Tube 89 x 3.2 mm, 18 m high, two levels of three guys."""
    guys = [
        {"name": f"{level} {anchor}", "from": {"spar": "mast", "at": at}, "to": {"anchor": anchor}, "length": UNSTRESSED[at]}
        for level, at in (("low", 9.0), ("top", 17.0))
        for anchor in ("N", "SE", "SW")
    ]
    panel = {"name": "panel", "at": 17.0, "mass": 12.0, "area": 0.35, "drag": 1.4, "load": [0.0, 0.0, 0.0]}
    mast = {
        "name": "mast", "foot": [0.0, 0.0, 0.0], "lean_deg": 0.0, "toward_deg": 0.0, "base": "pinned", "length": 18.0,
        "tube": {"diameter": 0.089, "wall": 0.0032}, "drag": 1.2, "fittings": [panel], "stations": [9.0, 17.0, 18.0],
    }  # fmt: skip
    return {
        "title": "Slender mast of 18 m",
        "spars": [mast],
        "material": {"density": 7850.0, "modulus": 210e9, "shear_modulus": 81e9},
        "rope": {"diameter": 0.006, "mass": 0.15, "stiffness": 1.4e6, "strength": 23e3, "drag": 1.2},
        "anchors": [
            {"name": n, "bearing_deg": b, "radius": 11.0, "level": 0.0} for n, b in (("N", 0.0), ("SE", 120.0), ("SW", 240.0))
        ],
        "cables": guys,
        "wind": {
            "speed": 28.0, "air_density": 1.225, "pressure": 0.5 * 1.225 * 28.0**2, "profile": "uniform",
            "directions_deg": [360.0 * k / DIRECTIONS for k in range(DIRECTIONS)],
        },
        "cases": [{"name": "wind", "dead": 1.0, "wind": 1.0}],
    }  # fmt: skip


def slender_18m_toml() -> str:
    """The same as a scenario file."""
    return "\n".join(scenario_lines(slender_18m())) + "\n"


def _lattice_mast(
    title: str, height: float, section: str, levels: list[tuple[float, str]], rings: dict[str, float], rope: str, tension: str
) -> str:
    anchors = [
        f'[[anchor]]\nname = "{ring} {name}"\nbearing = "{bearing} deg"\nradius = "{radius} m"\nlevel = "0 m"\n'
        for ring, radius in rings.items()
        for name, bearing in (("N", 0), ("SE", 120), ("SW", 240))
    ]
    guys = [
        f'[[guy_level]]\nspar = "mast"\nat = "{at} m"\nrope = "strand"\ntension = "{tension}"\n'
        f'to = ["{ring} N", "{ring} SE", "{ring} SW"]\n'
        for at, ring in levels
    ]
    return "\n".join([
        f'title = "{title}"\nformat = 1\n[[spar]]\nname = "mast"\nfoot = {{ east = "0 m", north = "0 m", level = "0 m" }}\n'
        f'[[spar.section]]\nlength = "{height} m"\n{section}',
        *anchors,
        *guys,
        f"[rope.strand]\n{rope}",
        '[wind]\nspeed = "30 m/s"\naveraging = "3 s"\nheight = "10 m"\nprofile = { power = 0.11 }\nair_density = "1.225 kg/m3"\n'
        f'directions = "{EVERY}"\n[[case]]\nname = "wind"\ndead = 1.0\nwind = 1.0\n',
    ])  # fmt: skip


def lattice_45m_toml() -> str:
    """Lattice of 300 mm face given outright, 45 m high, three levels of three guys."""
    return _lattice_mast(
        "Lattice mast of 45 m",
        45.0,
        'mass = "25 kg/m"\nEA = "120 MN"\nEI = "1.3 MN m2"\nGJ = "0.2 MN m2"\nGA = "6 MN"\nwidth = "0.12 m"\ndrag = 2.1\n',
        [(15.0, "ring"), (30.0, "ring"), (44.0, "ring")],
        {"ring": 27.0},
        'diameter = "10 mm"\nmass = "0.42 kg/m"\nstiffness = "7.5 MN"\nstrength = "70 kN"\ndrag = 1.2\n',
        "7 kN",
    )


def lattice_150m_toml() -> str:
    """Lattice of 900 mm face given outright, 150 m high, six levels of three guys on two rings of anchors."""
    inner, outer = "inner", "outer"
    return _lattice_mast(
        "Lattice mast of 150 m",
        150.0,
        'mass = "75 kg/m"\nEA = "700 MN"\nEI = "70 MN m2"\nGJ = "10 MN m2"\nGA = "30 MN"\nwidth = "0.32 m"\ndrag = 2.0\n',
        [(25.0, inner), (50.0, inner), (75.0, inner), (100.0, outer), (125.0, outer), (148.0, outer)],
        {inner: 50.0, outer: 100.0},
        'diameter = "20 mm"\nmass = "1.65 kg/m"\nstiffness = "32 MN"\nstrength = "280 kN"\ndrag = 1.2\n',
        "28 kN",
    )
