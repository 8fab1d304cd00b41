"""Corotational beam element: energy, gradient and Hessian in closed form.

An element of natural length h runs from node i to node j; e is the unit vector between its end points, (t, y, z) the triad each
node carries with it.  Six generalised deformations, all bilinear in e and the end triads (so gradient and Hessian are short):

    lam = l - h                   stretch of the chord
    b1 = e.y_i, b2 = e.y_j        slopes of the chord against the end triads in the plane (t, y)
    a1 = e.z_i, a2 = e.z_j        the same in the plane (t, z)
    tau = (z_i.y_j - y_i.z_j)/2   twist

    u_e = lam + h/30 (2 b1^2 - b1 b2 + 2 b2^2 + 2 a1^2 - a1 a2 + 2 a2^2)             stretch with the bowing of the axis
    W = EA/(2h) u_e^2 + EI_z/(2h(1+P)) [(4+P) b1^2 + 2(2-P) b1 b2 + (4+P) b2^2] + (the same in a, EI_y) + GJ/(2h) tau^2

P = 12 EI/(GA h^2) is the shear flexibility (0 for tubes).  N = EA u_e/h is the axial force.  With p = (lam, b1, b2, a1, a2, tau)

    gradient  = J^T W_p,      Hessian = J^T W_pp J + sum_k W_pk (second derivative of p_k),      J = dp/d(d, theta_i, theta_j)

d = u_j - u_i; rotations vary as R <- exp(theta) R and the symmetric part is taken, which is the true Hessian for that update.
The stretch comes from displacements alone, l - h = (2 d0.d + d.d)/(l + h) - thermal, and the slopes from e - e0 and R - I, so nothing
cancels: the residual keeps 1e-11 of the acting forces.

The Hessian may be built with an axial force predicted from the last step instead of the present one: a trial step that turns a
member also stretches it in second order, and that spurious tension would spoil the geometric stiffness.

With c_b1 = y_i x e, j_b1 = (y_i - b1 e)/l and so on for the other slopes, s = (s_d, s_i, s_j) the gradient of u_e, w that of tau
by theta_i, v_i = W_b1 y_i + W_a1 z_i, v = v_i + v_j, and k_b, q_b (k_a, q_a) the direct and cross terms of W_pp in b (a), the blocks are

    dd    EA/h s_d s_d^T + j_b1 P1^T + j_b2 P2^T + (the same in a) + N/l (I - e e^T) - (e v^T + v e^T + (e.v)(I - 3 e e^T))/l^2
    id    EA/h s_i s_d^T + c_b1 P1^T + c_a1 Q1^T + ([v_i]x - (v_i x e) e^T)/l,           P1 = k_b j_b1 + q_b j_b2,  P2 = q_b j_b1 + k_b j_b2
    ii    EA/h s_i s_i^T + k_b c_b1 c_b1^T + k_a c_a1 c_a1^T + GJ/h w w^T + (v_i e^T + e v_i^T)/2 - (e.v_i) I + T ((A + A^T)/4 - tau I)
    ji    EA/h s_j s_i^T + q_b c_b2 c_b1^T + q_a c_a2 c_a1^T - GJ/h w w^T + T (tau I - A/2),        A = z_i y_j^T - y_i z_j^T,  T = W_tau

Inside, arrays run components first and case last, (3, element, case), so that every operation is one long loop.

Symbols: l chord length.  Twist resists with GJ/(2h) sin(2 twist): 2 % soft at 10 degrees between neighbouring nodes, falling past 45
and gone at 90.

Sources: Crisfield, Non-linear Finite Element Analysis of Solids and Structures, vol. 2 (1997), ch. 17, for corotational beams; the
bowing term is that of the cubic shape functions (Hermite), MacNeal's local deformation form; the shear factors are the usual Timoshenko
ones.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from guys.columns import Array, add_diagonal, add_skew, block, cross, dot, first, flipped, outer


@dataclass(frozen=True)
class Rods:
    """Constants of the elements, each (element, ...): drawn length h [m], unit axes t, y, z (element, 3), EA [N], EI_y, EI_z, GJ [N m2],
    shear flexibilities phi_y (with EI_y) and phi_z [-]."""

    h: Array
    t: Array
    y: Array
    z: Array
    EA: Array
    EI_y: Array
    EI_z: Array
    GJ: Array
    phi_y: Array
    phi_z: Array


@dataclass(frozen=True)
class Bent:
    """Deformed elements: what gradient and Hessian share, (component, element, case).

    l; e, y_i ... z_j, twist (w), each with 3 components; slope: b1, b2, a1, a2, tau; force: W_p; bow: du_e/d(b1, b2, a1, a2)
    across: j_b1, j_b2, j_a1, j_a2 and turning: c_b1, c_b2, c_a1, c_a2, each (4, 3, ...); stretch: s_d, s_i, s_j (3, 3, ...)
    """

    l: Array
    e: Array
    y_i: Array
    z_i: Array
    y_j: Array
    z_j: Array
    slope: Array
    force: Array
    bow: Array
    across: Array
    turning: Array
    twist: Array
    stretch: Array

    @property
    def axial(self) -> Array:
        """Axial force (case, element) [N]."""
        return np.asarray(self.force[0].T)


def _fixed(v: Array) -> Array:
    """(element, 3) to (3, element, 1)."""
    return v.T[:, :, None]


def bend(rods: Rods, d: Array, dy_i: Array, dz_i: Array, dy_j: Array, dz_j: Array, thermal: Array) -> Bent:
    """Deformations and generalised forces.

    d : (3, element, case) [m] relative displacement u_j - u_i
    dy_i ... dz_j : (3, element, case) change of the end triads' y and z, (R - I) y0 and so on
    thermal : (element, case) free thermal strain
    """
    t0, y0, z0 = _fixed(rods.t), _fixed(rods.y), _fixed(rods.z)
    h = rods.h[:, None]
    growth = 2 * h * dot(t0, d) + dot(d, d)
    l = np.sqrt(h * h + growth)
    stretched = growth / (l + h)
    de = (d - t0 * stretched) / l
    e = t0 + de
    y_i, z_i, y_j, z_j = y0 + dy_i, z0 + dz_i, y0 + dy_j, z0 + dz_j
    along_y, along_z = dot(de, y0), dot(de, z0)
    b1, b2, a1, a2 = along_y + dot(e, dy_i), along_y + dot(e, dy_j), along_z + dot(e, dz_i), along_z + dot(e, dz_j)
    tau = 0.5 * (dot(z0, dy_j) + dot(dz_i, y_j) - dot(y0, dz_j) - dot(dy_i, z_j))
    slope = np.stack([b1, b2, a1, a2, tau])
    bow = np.stack([4 * b1 - b2, 4 * b2 - b1, 4 * a1 - a2, 4 * a2 - a1]) * (h / 30)
    bowing = 0.5 * (bow[0] * b1 + bow[1] * b2 + bow[2] * a1 + bow[3] * a2)
    axial = rods.EA[:, None] / h * (stretched - thermal * h + bowing)
    axes = np.stack([y_i, y_j, z_i, z_j])
    across = (axes - slope[:4, None] * e) / l
    turning = np.stack([cross(v, e) for v in axes])
    twist = 0.5 * (cross(z_i, y_j) - cross(y_i, z_j))
    stretch = np.stack([
        e + bow[0] * across[0] + bow[1] * across[1] + bow[2] * across[2] + bow[3] * across[3],
        bow[0] * turning[0] + bow[2] * turning[2],
        bow[1] * turning[1] + bow[3] * turning[3],
    ])  # fmt: skip
    return Bent(l, e, y_i, z_i, y_j, z_j, slope, _forces(rods, slope, axial, bow), bow, across, turning, twist, stretch)


def _forces(rods: Rods, slope: Array, axial: Array, bow: Array) -> Array:
    """W_p (6, element, case)."""
    k_b, q_b, k_a, q_a = _bending_stiffness(rods)
    b1, b2, a1, a2, tau = slope
    bending = np.stack([k_b * b1 + q_b * b2, q_b * b1 + k_b * b2, k_a * a1 + q_a * a2, q_a * a1 + k_a * a2])
    torque = (rods.GJ / rods.h)[:, None] * tau
    return np.concatenate([axial[None], bending + axial * bow, torque[None]])


def _bending_stiffness(rods: Rods) -> tuple[Array, Array, Array, Array]:
    """Direct and cross terms of both bending energies (element, 1) [N m]."""
    b = rods.EI_z / (rods.h * (1 + rods.phi_z))
    a = rods.EI_y / (rods.h * (1 + rods.phi_y))
    return tuple(x[:, None] for x in (b * (4 + rods.phi_z), b * (2 - rods.phi_z), a * (4 + rods.phi_y), a * (2 - rods.phi_y)))  # type: ignore[return-value]


def gradient(bent: Bent) -> Array:
    """(case, element, 12): derivative of the energy by (u_i, theta_i, u_j, theta_j)."""
    n, b1, b2, a1, a2, torque = bent.force
    by_d = n * bent.e + b1 * bent.across[0] + b2 * bent.across[1] + a1 * bent.across[2] + a2 * bent.across[3]
    by_i = b1 * bent.turning[0] + a1 * bent.turning[2] + torque * bent.twist
    by_j = b2 * bent.turning[1] + a2 * bent.turning[3] - torque * bent.twist
    return np.ascontiguousarray(np.concatenate([-by_d, by_i, by_d, by_j]).transpose(2, 1, 0))


def blocks(rods: Rods, bent: Bent, axial: Array, into: Array | None = None) -> Array:
    """Second derivative of the energy in blocks (3, 6, 6, element, case): at node i, at node j, and rows of j with columns of i.

    axial : (case, element) [N] axial force to build the geometric part with;  into : memory to write to
    """
    e, l, tau = bent.e, bent.l, bent.slope[4]
    n = np.ascontiguousarray(axial.T)
    b1, b2, a1, a2 = bent.force[1:5] + (n - bent.force[0]) * bent.bow
    torque, per = bent.force[5], (rods.EA / rods.h)[:, None]
    jb1, jb2, ja1, ja2 = bent.across
    cb1, cb2, ca1, ca2 = bent.turning
    s_d, s_i, s_j = bent.stretch
    k_b, q_b, k_a, q_a = _bending_stiffness(rods)
    lift = n * (rods.h / 30)[:, None]
    k_b, q_b, k_a, q_a = k_b + 4 * lift, q_b - lift, k_a + 4 * lift, q_a - lift
    p1, p2, q1, q2 = k_b * jb1 + q_b * jb2, q_b * jb1 + k_b * jb2, k_a * ja1 + q_a * ja2, q_a * ja1 + k_a * ja2
    v_i, v_j = b1 * bent.y_i + a1 * bent.z_i, b2 * bent.y_j + a2 * bent.z_j
    ev_i, ev_j = dot(e, v_i), dot(e, v_j)
    along = (ev_i + ev_j) / (l * l)
    with_e = (0.5 * (3 * along - n / l)) * e - (v_i + v_j) / (l * l)
    both = outer(e, with_e)
    dd = outer(per * s_d, s_d) + outer(jb1, p1) + outer(jb2, p2) + outer(ja1, q1) + outer(ja2, q2) + both + flipped(both)
    add_diagonal(dd, n / l - along)
    id_ = outer(per * s_i, s_d) + outer(cb1, p1) + outer(ca1, q1) - outer(b1 * cb1 + a1 * ca1, e / l)
    jd = outer(per * s_j, s_d) + outer(cb2, p2) + outer(ca2, q2) - outer(b2 * cb2 + a2 * ca2, e / l)
    add_skew(id_, v_i / l)
    add_skew(jd, v_j / l)
    a = outer(torque * bent.z_i, bent.y_j) - outer(torque * bent.y_i, bent.z_j)
    stiff = outer((rods.GJ / rods.h)[:, None] * bent.twist, bent.twist)
    same = stiff + 0.25 * (a + flipped(a))
    ii = _turning_block(same, per, s_i, k_b * cb1, cb1, k_a * ca1, ca1, v_i, e, ev_i + torque * tau)
    jj = _turning_block(same, per, s_j, k_b * cb2, cb2, k_a * ca2, ca2, v_j, e, ev_j + torque * tau)
    ji = outer(per * s_j, s_i) + outer(q_b * cb2, cb1) + outer(q_a * ca2, ca1) - stiff - 0.5 * a
    add_diagonal(ji, torque * tau)
    out = np.empty((3, 6, 6, *l.shape)) if into is None else into
    block(dd, -id_, -flipped(id_), ii, out[0])
    block(dd, jd, flipped(jd), jj, out[1])
    block(-dd, -jd, flipped(id_), ji, out[2])
    return out


def _turning_block(
    same: Array, per: Array, s: Array, kcb: Array, cb: Array, kca: Array, ca: Array, v: Array, e: Array, less: Array
) -> Array:
    """d2W/dtheta_i^2 or d2W/dtheta_j^2: what both ends share, the rank-one terms of one end, and what its slopes turn with."""
    half = outer(0.5 * v, e)
    out: Array = same + outer(per * s, s) + outer(kcb, cb) + outer(kca, ca) + half + flipped(half)
    add_diagonal(out, -less)
    return out


def predicted_axial(rods: Rods, bent: Bent, step: Array) -> Array:
    """Axial force (case, element) [N] after a step (case, element, 12), to first order."""
    s = first(step)
    change = dot(bent.stretch[0], s[6:9] - s[0:3]) + dot(bent.stretch[1], s[3:6]) + dot(bent.stretch[2], s[9:12])
    return np.asarray((bent.force[0] + (rods.EA / rods.h)[:, None] * change).T)
