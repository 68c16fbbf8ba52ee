"""Reference solutions of a few members by general-purpose solvers that know nothing of this program.

What this folder is. `reference.json` holds what this script prints; `mod.rs` holds the program to it. The members are
written here a second time, by hand, as Python numbers; the decks beside this file (`*.toml`) say the same in the
input's words. A slip in either shows as a difference. The members are invented.

Two methods:
- `bvp`: scipy.integrate.solve_bvp, collocation of the beam's four first-order differential equations on every stretch
  between places where something changes, the reactions as unknown parameters. Shear deformation and hinges included.
- `fem`: scikit-fem with cubic Hermite elements, Euler-Bernoulli bending, sixteen to a stretch. Where a member has a
  hinge or shear deformation there is no `fem` entry.

Signs and units as in results.md's format, but kN, m, mm and mrad: deflection down, turn clockwise, forces up, reaction
moments counter-clockwise, bending moments sagging, V = dM/dx. Moments, shears and turns at a station are those just
left of it, or just right of it at x = 0.

To make it again (the versions are written into the output):

    python3 -m pip install numpy==2.4.6 scipy==1.17.1 scikit-fem==12.0.2
    python3 solve.py > reference.json
"""

import json
import platform

import numpy as np
import scipy
import skfem
from scipy.integrate import solve_bvp
from skfem.helpers import dd

# Each member: stretches (length m, EI(x from the stretch's left end) kN m2, GA kN or None); supports (name, place,
# vertical, rotation, settlement mm, turn mrad) with vertical "rigid", None or kN/m and rotation "rigid", None or
# kN m/rad; hinges; loads. A curvature (1/m) is imposed by temperature, clockwise: alpha (T_top - T_bottom) / depth.
MEMBERS = {
    # A fixed end, a step, a prop that sinks, a point load away from the step.
    "stepped_propped": {
        "stretches": [(3.2, lambda x: 210e6 * 8356e-8, None), (4.0, lambda x: 210e6 * 3892e-8, None)],
        "supports": [("A", 0.0, "rigid", "rigid", 0.0, 0.0), ("B", 7.2, "rigid", None, 4.0, 0.0)],
        "hinges": [],
        "loads": [("spread", 0.0, 7.2, 7.5, 7.5), ("point", 5.5, 9.0), ("spread", 1.0, 3.2, 2.0, 11.0)],
        "stations": [0.0, 2.0, 3.2, 5.5, 6.4],
    },
    # A bracket whose depth runs linearly (I cubic), then one whose I runs linearly, a spring below the tip.
    "tapered_bracket": {
        "stretches": [
            (2.4, lambda x: 11e6 * 9e-4 * (1 + (np.cbrt(1.2 / 9.0) - 1) * x / 2.4) ** 3, None),
            (1.6, lambda x: 11e6 * (1.2e-4 + (0.5e-4 - 1.2e-4) * x / 1.6), None),
        ],
        "supports": [("A", 0.0, "rigid", "rigid", 0.0, 0.0), ("B", 4.0, 90.0, None, 0.0, 0.0)],
        "hinges": [],
        "loads": [("spread", 0.0, 4.0, 1.5, 6.0), ("couple", 2.4, 3.0), ("point", 3.1, 2.5)],
        "stations": [0.0, 1.2, 2.4, 3.1, 4.0],
    },
    # Three spans and an overhang; a rotational spring at the left end, a vertical one inside, its foot sunk.
    "springs": {
        "stretches": [
            (5.0, lambda x: 16000.0, None),
            (4.0, lambda x: 9000.0, None),
            (6.5, lambda x: 16000.0, None),
            (1.5, lambda x: 9000.0, None),
        ],
        "supports": [
            ("A", 0.0, "rigid", 2500.0, 0.0, 0.0),
            ("B", 5.0, 12000.0, None, 3.0, 0.0),
            ("C", 9.0, "rigid", None, 0.0, 0.0),
            ("D", 15.5, "rigid", None, 0.0, 0.0),
        ],
        "hinges": [],
        "loads": [
            ("spread", 0.0, 17.0, 4.0, 4.0),
            ("spread", 5.0, 11.0, 9.0, 9.0),
            ("point", 2.2, 30.0),
            ("couple", 17.0, 12.0),
        ],
        "stations": [2.2, 5.0, 7.0, 12.0, 17.0],
    },
    # Movements alone: a support sinks, a wall turns, the top of one span is warmer than its bottom.
    "movements": {
        "stretches": [(6.0, lambda x: 20000.0, None), (4.5, lambda x: 8000.0, None)],
        "supports": [
            ("A", 0.0, "rigid", "rigid", 0.0, 1.5),
            ("B", 6.0, "rigid", None, 12.0, 0.0),
            ("C", 10.5, "rigid", "rigid", 0.0, 0.0),
        ],
        "hinges": [],
        "loads": [("curvature", 0.0, 6.0, 12e-6 * 25.0 / 0.4)],
        "stations": [0.0, 3.0, 6.0, 8.0],
    },
    # A hinge, a guided end and shear deformation.
    "hinged_guided": {
        "stretches": [(4.0, lambda x: 5200.0, 60000.0), (5.0, lambda x: 2600.0, 30000.0)],
        "supports": [
            ("A", 0.0, "rigid", "rigid", 0.0, 0.0),
            ("B", 7.0, "rigid", None, 0.0, 0.0),
            ("C", 9.0, None, "rigid", 0.0, 0.0),
        ],
        "hinges": [2.5],
        "loads": [("spread", 0.0, 9.0, 6.0, 6.0), ("point", 5.2, 14.0), ("point", 9.0, 3.0)],
        "stations": [1.0, 4.0, 5.2, 7.0, 9.0],
    },
}


def places(member):
    """Every place where something changes."""
    ends = np.cumsum([0.0] + [stretch[0] for stretch in member["stretches"]])
    found = list(ends) + [support[1] for support in member["supports"]] + member["hinges"] + member["stations"]
    for load in member["loads"]:
        found += [load[1]] if load[0] in ("point", "couple") else [load[1], load[2]]
    found = sorted(found)
    return [x for i, x in enumerate(found) if i == 0 or x - found[i - 1] > 1e-9]


def stretch_at(member, x):
    """The stretch that holds x, and where it begins."""
    start = 0.0
    for length, rigidity, shear in member["stretches"]:
        if x < start + length:
            return rigidity, shear, start
        start += length
    raise ValueError(x)


def intensity(member, a, b, x):
    """Load per length at x within the stretch from a to b, kN/m."""
    total = 0.0 * x
    for load in member["loads"]:
        if load[0] == "spread" and load[1] <= a + 1e-9 and load[2] >= b - 1e-9:
            total = total + load[3] + (load[4] - load[3]) * (x - load[1]) / (load[2] - load[1])
    return total


def curvature(member, a, b):
    """Imposed curvature within the stretch from a to b, 1/m."""
    bent = [load for load in member["loads"] if load[0] == "curvature"]
    return sum(load[3] for load in bent if load[1] <= a + 1e-9 and load[2] >= b - 1e-9)


def at_place(member, kind, x):
    """Sum of forces or couples that act at x."""
    return sum(load[2] for load in member["loads"] if load[0] == kind and abs(load[1] - x) < 1e-9)


def bvp(member):
    """By collocation. v in mm, turn in mrad, M in kN m, V in kN; four unknowns a stretch, one parameter a restraint."""
    x = places(member)
    pairs = list(zip(x, x[1:]))
    held = []
    for name, place, vertical, rotation, settlement, turn in member["supports"]:
        node = min(range(len(x)), key=lambda i: abs(x[i] - place))
        if vertical is not None:
            held.append((name, "force", node, 0, vertical, settlement))
        if rotation is not None:
            held.append((name, "moment", node, 1, rotation, turn))

    def slope(s, y, _):
        rows = []
        for index, (a, b) in enumerate(pairs):
            v, psi, moment, shear = y[4 * index : 4 * index + 4]
            rigidity, stiffness, start = stretch_at(member, (a + b) / 2)
            here = a + (b - a) * s
            bend = 1e3 * (-moment / rigidity(here - start) + curvature(member, a, b))
            slide = 0.0 if stiffness is None else 1e3 * shear / stiffness
            rows += [(psi + slide) * (b - a), bend * (b - a), shear * (b - a), -intensity(member, a, b, here) * (b - a)]
        return np.vstack([row + 0 * s for row in rows])

    def conditions(first, last, parameters):
        count = len(pairs)
        rows = []
        for node, place in enumerate(x):
            left = last[4 * node - 4 : 4 * node] if node > 0 else np.zeros(4)
            right = first[4 * node : 4 * node + 4] if node < count else np.zeros(4)
            force = sum(p for p, h in zip(parameters, held) if h[2] == node and h[3] == 0)
            moment = sum(p for p, h in zip(parameters, held) if h[2] == node and h[3] == 1)
            rows.append(right[3] - left[3] - force + at_place(member, "point", place))
            rows.append(right[2] - left[2] + moment - at_place(member, "couple", place))
            if 0 < node < count:
                rows.append(right[0] - left[0])
                hinged = any(abs(place - hinge) < 1e-9 for hinge in member["hinges"])
                rows.append(left[2] if hinged else right[1] - left[1])
            here = right if node < count else left
            for value, h in zip(parameters, held):
                if h[2] == node:
                    moved = here[h[3]] - h[5]
                    rows.append(moved if h[4] == "rigid" else value - h[4] * moved * 1e-3)
        return np.array(rows)

    # The residual is that of the cubic between the mesh's nodes; at the nodes, where results are read, collocation is
    # of fourth order, and exact where EI is constant and loads are at most linear.
    # Solved again from its own answer, since one pass leaves the rounding of its numerical derivatives.
    mesh = np.linspace(0, 1, 161)
    values, parameters = np.zeros((4 * len(pairs), mesh.size)), np.zeros(len(held))
    for _ in range(3):
        found = solve_bvp(slope, conditions, mesh, values, p=parameters, tol=1e-5, bc_tol=1e-12, max_nodes=4000)
        mesh, values, parameters = found.x, found.y, found.p
    # The conditions may miss 1e-12 by rounding; the residual may not miss its tolerance.
    if found.rms_residuals.max() > 1e-5:
        raise RuntimeError(found.message)
    reactions = {}
    for value, h in zip(found.p, held):
        reactions.setdefault(h[0], {})[h[1]] = value
    stations = []
    for place in member["stations"]:
        node = min(range(len(x)), key=lambda i: abs(x[i] - place))
        state = found.sol(1.0)[4 * node - 4 : 4 * node] if node > 0 else found.sol(0.0)[:4]
        stations.append({"at": place, "v_mm": state[0], "turn_mrad": state[1], "moment": state[2], "shear": state[3]})
    slides = any(stretch[2] is not None for stretch in member["stretches"])
    residual = found.rms_residuals.max()
    return {"reactions": reactions, "stations": stations, "slides": slides, "greatest_residual": residual}


def fem(member):
    """By Hermite elements; reactions from K u - f. None where the element does not serve."""
    if member["hinges"] or any(stretch[2] is not None for stretch in member["stretches"]):
        return None
    x = places(member)
    nodes = [np.linspace(a, b, 17)[:-1] for a, b in zip(x, x[1:])] + [np.array([x[-1]])]
    mesh = skfem.MeshLine(np.concatenate(nodes))
    basis = skfem.Basis(mesh, skfem.ElementLineHermite(), intorder=8)

    def each(w, function):
        flat = w.x[0]
        values = np.empty_like(flat)
        for element in range(flat.shape[0]):
            middle = flat[element].mean()
            a, b = next((a, b) for a, b in zip(x, x[1:]) if a < middle < b)
            values[element] = function(a, b, middle, flat[element])
        return values

    def rigidity(a, b, middle, points):
        law, _, start = stretch_at(member, middle)
        return law(points - start) + 0 * points

    @skfem.BilinearForm
    def bending(u, v, w):
        return each(w, rigidity) * dd(u)[0][0] * dd(v)[0][0]

    @skfem.LinearForm
    def loads(v, w):
        pressed = each(w, lambda a, b, middle, points: intensity(member, a, b, points) + 0 * points)
        bent = each(w, lambda a, b, middle, points: curvature(member, a, b) * rigidity(a, b, middle, points))
        return pressed * v + bent * dd(v)[0][0]

    stiffness = bending.assemble(basis).tolil()
    force = loads.assemble(basis)
    number = {}
    for place in x:
        vertex = int(np.argmin(np.abs(mesh.p[0] - place)))
        number[place] = (basis.nodal_dofs[0, vertex], basis.nodal_dofs[1, vertex])
        force[number[place][0]] += at_place(member, "point", place)
        force[number[place][1]] += at_place(member, "couple", place)
    free_stiffness, free_force = stiffness.tocsr().copy(), force.copy()
    fixed = {}
    held = []
    for name, place, vertical, rotation, settlement, turn in member["supports"]:
        place = min(x, key=lambda other: abs(other - place))
        v, psi = number[place]
        for key, dof, hold, by in (("force", v, vertical, settlement), ("moment", psi, rotation, turn)):
            if hold is None:
                continue
            held.append((name, key, dof))
            if hold == "rigid":
                fixed[dof] = by * 1e-3
            else:
                stiffness[dof, dof] += hold
                force[dof] += hold * by * 1e-3
    moved = np.zeros(basis.N)
    for dof, by in fixed.items():
        moved[dof] = by
    solved = skfem.solve(*skfem.condense(stiffness.tocsr(), force, x=moved, D=np.array(list(fixed), dtype=int)))
    # What the member needs to be held by: K u - f is positive downward and clockwise, a reaction is the opposite.
    rest = free_force - free_stiffness @ solved
    reactions = {}
    for name, key, dof in held:
        reactions.setdefault(name, {})[key] = rest[dof]
    stations = []
    for place in member["stations"]:
        place = min(x, key=lambda other: abs(other - place))
        v, turn = number[place]
        stations.append({"at": place, "v_mm": 1e3 * solved[v], "turn_mrad": 1e3 * solved[turn]})
    return {"reactions": reactions, "stations": stations, "slides": False}


def rounded(value):
    """Ten significant digits: what the methods are good for, and no noise in the file."""
    if isinstance(value, dict):
        return {key: rounded(item) for key, item in value.items()}
    if isinstance(value, list):
        return [rounded(item) for item in value]
    return value if isinstance(value, bool) else float(f"{value:.10g}")


def main():
    """Prints everything."""
    versions = {
        "python": platform.python_version(),
        "numpy": np.__version__,
        "scipy": scipy.__version__,
        "scikit-fem": skfem.__version__,
    }
    members = {}
    for name, member in MEMBERS.items():
        entry = {"bvp": rounded(bvp(member))}
        elements = fem(member)
        if elements is not None:
            entry["fem"] = rounded(elements)
        members[name] = entry
    print(json.dumps({"made_by": "tests/reference/solve.py", "versions": versions, "members": members}, indent=1))


if __name__ == "__main__":
    main()
