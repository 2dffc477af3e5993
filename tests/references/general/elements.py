"""Heads of a plan by finite elements (scikit-fem), quadratic on graded triangles.

Wells are taken out as logarithms, so that the elements need not follow them;
triangles shrink in proportion to the distance from corners and, down to the
depth of a well below its nearest edge, from wells. An open chain is inverted
about a point outside the aquifer. Knows nothing of `lightning.py`.
"""

import csv
import math
import time

import numpy as np
import scipy.sparse.linalg
from matplotlib.tri import Triangulation
from meshpy import triangle
from skfem import Basis, BilinearForm, ElementTriP2, FacetBasis, LinearForm, MeshTri, condense
from skfem.helpers import dot, grad

import plans

TAU = 2 * math.pi
INVERSION = 1000.0
CIRCLE_PIECES = 1000
ARC_PIECES = 400


def traced(edge, about):
    """Vertices along an edge, without its last; one for a straight edge."""
    if about is None:
        return np.array([edge.start])
    if edge.length < math.inf:
        u = np.linspace(0, 1, ARC_PIECES, endpoint=False)
        return INVERSION / (edge.start + u * (edge.end - edge.start) - about)
    # Even in the angle at the point of inversion.
    corner, outward = (edge.end, -edge.heading) if edge.start is None else (edge.start, edge.heading)
    first, last = np.angle(corner - about), np.angle(outward)
    turn = (last - first + math.pi) % TAU - math.pi
    angles = first + turn * np.arange(ARC_PIECES) / ARC_PIECES
    # Distance along the half-line at which the line of sight has that angle.
    sight = np.exp(1j * angles)
    r = ((corner - about) * sight.conj()).imag / -((outward * sight.conj()).imag)
    w = INVERSION / (corner + r * outward - about)
    return w if edge.start is not None else np.concatenate([[0j], w[:0:-1]])


class Elements:
    """One finite-element solution; `size` is the growth of triangles with the distance from corners."""

    def __init__(self, plan, size=0.3, smallest=1e-3, about=None):
        start = time.process_time()
        self.plan, self.about = plan, about
        rings, self.kinds = [], []
        for ring in [plan.outer, *plan.islands]:
            vertices = [traced(edge, about) for edge in ring]
            rings.append(np.concatenate(vertices))
            self.kinds += [edge for edge, part in zip(ring, vertices) for _ in part]
        for lake in plan.lakes:
            rings.append(lake.centre + lake.radius * np.exp(-TAU * 1j * np.arange(CIRCLE_PIECES) / CIRCLE_PIECES))
            self.kinds += [lake] * CIRCLE_PIECES
        self.wells = np.array([self.to_w(well.at) for well in plan.wells])
        self.rates = np.array([well.pumping for well in plan.wells]) / (TAU * plan.transmissivity)
        self.mesh, facets = self.triangles(rings, size, smallest)
        self.meshed = time.process_time() - start
        self.solve(facets)
        self.seconds = time.process_time() - start

    def to_w(self, z):
        return z if self.about is None else INVERSION / (z - self.about)

    def triangles(self, rings, size, smallest):
        points = np.concatenate(rings)
        segments, at = [], 0
        for ring in rings:
            count = len(ring)
            segments += [(at + k, at + (k + 1) % count) for k in range(count)]
            at += count
        edges = self.plan.edges
        centres = [self.to_w(edge.end) if edge.end is not None else 0j for edge in edges]
        extent = np.ptp(points.real) + np.ptp(points.imag)
        floors = [smallest * extent / 2000] * len(centres)
        distance = np.abs(points[:, None] - self.wells).min(axis=0)
        centres, floors = np.array([*centres, *self.wells]), np.array([*floors, *(0.5 * distance)])
        widest = extent / 20 * size

        def wanted_area(places):
            nearest = np.full(len(places), widest / size)
            for centre, floor in zip(centres, floors):
                np.minimum(nearest, np.maximum(np.abs(places - centre), floor), out=nearest)
            return 0.45 * (size * nearest) ** 2

        info = triangle.MeshInfo()
        info.set_points([(p.real, p.imag) for p in points])
        info.set_facets(segments, list(range(2, len(segments) + 2)))
        holes = [sum(edge.start for edge in ring) / len(ring) for ring in self.plan.islands]
        holes += [lake.centre for lake in self.plan.lakes]
        if holes:
            info.set_holes([(hole.real, hole.imag) for hole in holes])
        built = triangle.build(info, min_angle=28)
        while True:
            corners = np.array(built.points) @ np.array([1, 1j])
            a, b, c = corners[np.array(built.elements)].T
            area = 0.5 * np.abs(((b - a).conj() * (c - a)).imag)
            wanted = wanted_area((a + b + c) / 3)
            if (area <= wanted).all():
                break
            # Not below a sixteenth at once: the wish is that of the middle.
            built.element_volumes.setup()
            for number, limit in enumerate(np.maximum(wanted, area / 16).tolist()):
                built.element_volumes[number] = limit
            built = triangle.refine(built, min_angle=28)
        mesh = MeshTri(np.array(built.points).T.copy(), np.array(built.elements).T.copy())
        markers = {}
        for pair, marker in zip(np.array(built.facets), np.array(built.facet_markers)):
            if marker >= 2:
                markers[tuple(sorted(pair))] = marker - 2
        boundary = mesh.boundary_facets()
        edge_of = np.array([markers[tuple(sorted(mesh.facets[:, facet]))] for facet in boundary])
        return mesh, (boundary, edge_of)

    def known(self, w):
        """Heads of the wells alone, and the gradient dh/dx - i dh/dy."""
        head = sum(rate * np.log(np.abs(w - at)) for rate, at in zip(self.rates, self.wells))
        slope = sum(rate / (w - at) for rate, at in zip(self.rates, self.wells))
        return head, slope

    def outflow(self, w, n):
        _, slope = self.known(w)
        return (slope * (n[0] + 1j * n[1])).real

    def solve(self, facets):
        boundary, edge_of = facets
        mesh, plan = self.mesh, self.plan
        self.element = ElementTriP2()
        basis = Basis(mesh, self.element)
        matrix = BilinearForm(lambda u, v, _: dot(grad(u), grad(v))).assemble(basis)
        load = LinearForm(lambda v, _: plan.recharge / plan.transmissivity * v).assemble(basis)
        flow = np.array([isinstance(k, plans.Edge) and k.condition != "head" for k in self.kinds])[edge_of]
        if flow.any():
            side = FacetBasis(mesh, self.element, facets=boundary[flow], intorder=6)
            load = load - LinearForm(lambda v, w: self.outflow(w.x[0] + 1j * w.x[1], w.n) * v).assemble(side)
        fixed = {}
        for number, kind in enumerate(self.kinds):
            condition = "head" if isinstance(kind, plans.Circle) else kind.condition
            if condition == "flow":
                continue
            own = boundary[edge_of == number]
            if condition == "head":
                dofs = basis.get_dofs(own).all()
                places = basis.doflocs[0, dofs] + 1j * basis.doflocs[1, dofs]
                stage = kind.stage if isinstance(kind, plans.Circle) else kind.stage_at(places)
                fixed.update(zip(dofs, stage + 0 * places.real - self.known(places)[0]))
            else:
                side = FacetBasis(mesh, self.element, facets=own, intorder=6)
                matrix = matrix + BilinearForm(lambda u, v, _: u * v / kind.skin).assemble(side)
                load = load + LinearForm(lambda v, w: (
                    kind.stage_at(w.x[0] + 1j * w.x[1]) - self.known(w.x[0] + 1j * w.x[1])[0]) / kind.skin * v).assemble(side)
        dofs = np.array(list(fixed))
        values = np.zeros(basis.N)
        values[dofs] = list(fixed.values())
        inner, right, x, free = condense(matrix, load, x=values, D=dofs)
        factor = scipy.sparse.linalg.splu(inner.tocsc(), permc_spec="MMD_AT_PLUS_A", options={"SymmetricMode": True}, diag_pivot_thresh=0.0)
        x[free] = factor.solve(right)
        self.basis, self.x, self.unknowns = basis, x, len(free)

    def heads(self, z):
        """Heads at places of the plan."""
        w = self.to_w(np.asarray(z, complex))
        mesh = self.mesh
        cells = Triangulation(*mesh.p, mesh.t.T).get_trifinder()(w.real, w.imag)
        lost = cells < 0
        if lost.any():
            middles = mesh.p[:, mesh.t].mean(axis=1)
            middles = middles[0] + 1j * middles[1]
            cells[lost] = [np.abs(middles - place).argmin() for place in w[lost]]
        x = np.array([w.real, w.imag])
        local = self.basis.mapping.invF(x[:, :, np.newaxis], tind=cells)
        total = 0.0
        for k in range(self.basis.Nbfun):
            shape = self.element.gbasis(self.basis.mapping, local, k, tind=cells)[0]
            total = total + np.asarray(shape)[:, 0] * self.x[self.basis.element_dofs[k, cells]]
        return total + self.known(w)[0]


def expected(path):
    """Places and heads of a table."""
    with open(path, newline="", encoding="utf-8") as file:
        rows = [row for row in csv.DictReader(file) if row["kind"] == "head"]
    return [row["name"] for row in rows], np.array([complex(float(r["x"]), float(r["y"])) for r in rows]), np.array(
        [float(r["value"]) for r in rows])


def compare(plan_path, table_path, about=None, size=0.2):
    """How far the table is from a finite-element solution."""
    plan = plans.read(plan_path)
    names, z, heads = expected(table_path)
    solution = Elements(plan, size, about=about)
    apart = np.abs(solution.heads(z) - heads)
    away = np.array(["corner" not in name for name in names])
    worst = names[int(np.argmax(apart))]
    return (f"{solution.unknowns} unknowns, {solution.seconds:.1f} s ({solution.meshed:.1f} s mesh): largest difference "
            f"{apart[away].max():.1e} m, with corners {apart.max():.1e} m ({worst}), median {np.median(apart):.1e} m")
