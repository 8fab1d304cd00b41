"""What a cable that parts suddenly does to the spars that held it.

Taken away slowly, a cable leaves its end forces F out.  Gone at once, the structure swings about the state it would come to rest in; the
farthest point of the swing is found by taking F away `sudden` times,

    no cable, and -(sudden - 1) F on the spar at each of its ends,

F being what it exerted in the same case before.  A linear system without damping whose load changes by one step swings to twice the static
change (x = F/k (1 - cos wt), the response to a step load of textbooks on dynamics of structures), so 2 bounds it from above; damping and a
load that takes its time bring it down to 1.  Cables and masts are not linear: it is then an equivalent static load, of common practice,
and no bound.  On anchors nothing is put: the swing of ground is left out.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from guys.loads.cases import LoadCases, add_points
from guys.rotation import Array
from guys.structure import Structure


def parted(structure: Structure, loads: LoadCases, at_to: Array, at_from: Array, sudden: float) -> LoadCases:
    """The loads with what is left over of end forces (case, cable, 3) [N] on what holds the ends, of the cables that are not present."""
    gone = (loads.present == 0)[..., None]
    on_spar = structure.spar[structure.cables.a.node] >= 0
    at_ends = np.stack([at_to * on_spar[:, None], at_from], axis=2) * gone[..., None] * (1 - sudden)
    force, dyad = loads.force.copy(), loads.dyad.copy()
    for end, points in enumerate((structure.cables.a, structure.cables.b)):
        add_points(points, at_ends[:, :, end], loads.warming, force, dyad)
    return replace(loads, force=force, dyad=dyad, at_ends=at_ends)
