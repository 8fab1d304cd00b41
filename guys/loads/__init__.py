"""From a structure to the loads of every case and wind direction: `LoadCases`, arrays with a leading case axis.

Loads are dead loads: computed once, on the setting position, and not followed.  Node loads are a force and a load dyad (see
`guys.rotation`), so that loads on rigid arms and the end moments of distributed loads keep their potential when nodes turn.
"""

from guys.loads.cases import CaseLine, LoadCases, Placed, as_drawn, assemble, joined, lines_of, setting_line

__all__ = ["CaseLine", "LoadCases", "Placed", "as_drawn", "assemble", "joined", "lines_of", "setting_line"]
