"""Heads of a plan by least squares with analytic functions.

The head is a known part (wells, recharge, jumps of stage, uniform flow far away) plus the real part of
an analytic function f = head + i stream, and f is a sum of

- simple poles clustered exponentially at the corners (Gopal & Trefethen 2019,
  SIAM J. Numer. Anal. 57:2074-2094),
- fractional powers at the corners, cut by a Moebius map to a line that ends
  outside the aquifer (Lehman 1959, J. Math. Mech. 8:727-760 for the exponents),
- a polynomial, and Laurent series in islands and lakes, orthogonalised as they
  are made (Brubeck, Nakatsukasa & Trefethen 2021, SIAM Rev. 63:405-415),
- logarithms and a few poles at the mirror images of wells in nearby edges, and
  a logarithm in each lake.

Conditions are put down at points clustered at the corners: the head on clean
banks, the stream function on barriers (constant on each, so a barrier needs no
derivative), head + K c dh/dn on clogged banks. An open chain is inverted about
a point outside the aquifer first; harmonic functions stay harmonic and the
conditions keep their form, and infinity becomes one more corner.

The residual on a second, finer set of points bounds the error of the head where
all edges are rivers (maximum principle), and measures it elsewhere.
"""

import math
from dataclasses import dataclass

import numpy as np

import plans

TAU = 2 * math.pi


@dataclass
class Stretch:
    """Sample points of one edge or circle, in order of travel."""


    z: np.ndarray
    w: np.ndarray
    normal: np.ndarray  # outward, in z
    condition: str
    name: str
    stage: np.ndarray
    skin: float
    weight: np.ndarray
    ends: tuple  # corner numbers or None
    length_along: np.ndarray  # metres along the edge: for recharge
    gaps: dict  # corner number -> w - w of the corner, without cancellation
    flow: np.ndarray | float = 0.0  # head + i stream of the uniform flow; on half-lines the part that is constant


class Plane:
    """The plane in which f is made: z itself, or inverted about a point."""

    def __init__(self, plan, about):
        self.about = about
        if about is None:
            places = np.array([edge.start for edge in plan.outer] or [lake.centre for lake in plan.lakes])
            self.middle = places.mean()
            self.scale = np.abs(places - self.middle).max()

    def to_w(self, z):
        if self.about is None:
            return (z - self.middle) / self.scale
        return INVERSION_SCALE / (z - self.about)

    def slope(self, z):
        """dw/dz."""
        if self.about is None:
            return np.ones_like(z) / self.scale
        return -INVERSION_SCALE / (z - self.about) ** 2

    def to_z(self, w):
        return w * self.scale + self.middle if self.about is None else self.about + INVERSION_SCALE / w


INVERSION_SCALE = 1000.0


class Corner:
    """A corner in w: its place, the direction of the outside bisector, the
    angle inside, the kinds of both edges, the length to the next edge outside."""

    def __init__(self, w, outside, angle, kinds, reach, jump):
        self.w, self.outside, self.angle, self.kinds = w, outside, angle, kinds
        self.reach, self.jump = reach, jump

    def exponents(self, highest):
        like = [("flow" if kind == "skin" else kind) for kind in self.kinds]
        step = math.pi / self.angle
        first = step if like[0] == like[1] else step / 2
        values = []
        for k in range(40):
            for m in range(6):
                value = first + k * step + m
                if value > highest or abs(value - round(value)) < 1e-7:
                    continue
                if all(abs(value - other) > 1e-7 for other in values):
                    values.append(value)
        return sorted(values)


class Field:
    """Heads before pumping and the unit drawdowns of all wells of a plan."""

    def __init__(self, plan, poles=24, degree=40, highest=5.0, about=None, image_powers=4, laurent=24, samples=4):
        self.plan, self.plane = plan, Plane(plan, about)
        self.poles, self.degree, self.highest = poles, degree, highest
        self.image_powers, self.laurent = image_powers, laurent
        self.corners = self.find_corners()
        self.images = self.find_images()
        self.hess = {}
        fine = self.sample(samples)
        matrix, right = self.system(fine, first=True)
        norms = np.linalg.norm(matrix, axis=0)
        norms[norms == 0] = 1.0
        solution, *_ = np.linalg.lstsq(matrix / norms, right, rcond=1e-15)
        self.solution = solution / norms[:, None]
        self.size = matrix.shape
        check = self.sample(1.7 * samples, shift=0.37)
        matrix, right = self.system(check, first=False)
        rest = np.abs(matrix @ self.solution - right)
        self.residual_head = rest[:, 0].max()
        # Unit drawdowns: metres a (m3/d), times the rates.
        self.residuals = rest
        self.residual_unit = rest[:, 1:].max(axis=0)

    # --- geometry -----------------------------------------------------------

    def inside(self, z):
        """Whether places lie in the aquifer."""
        z = np.atleast_1d(z)
        plan = self.plan
        held = np.ones(z.shape, bool)
        if plan.is_open:
            far = 1e9
            chain = plan.outer
            walk = [chain[0].end - far * chain[0].heading] + [edge.end for edge in chain[:-1]]
            walk += [chain[-1].start + far * chain[-1].heading]
            held &= sum(np.angle((b - z) / (a - z)) for a, b in zip(walk, walk[1:])) > 0
        elif plan.outer:
            held &= plans.winding(plan.outer, z) > 0.5
        for ring in plan.islands:
            held &= plans.winding(ring, z) > -0.5
        for lake in plan.lakes:
            held &= np.abs(z - lake.centre) > lake.radius
        return held

    def distance_to_edges(self, place):
        """Distance of a place from the nearest straight edge."""
        nearest = math.inf
        for edge in self.plan.edges:
            origin = edge.end if edge.start is None else edge.start
            low, high = (-math.inf, 0) if edge.start is None else (0, edge.length)
            along = min(max(((place - origin) * edge.heading.conjugate()).real, low), high)
            nearest = min(nearest, abs(place - origin - along * edge.heading))
        return nearest

    def find_corners(self):
        corners = []
        for ring in [self.plan.outer, *self.plan.islands]:
            for before, after in zip(ring[-1:] + ring[:-1], ring):
                corners.append(self.corner(before, after))
        return corners

    def corner(self, before, after):
        plane = self.plane
        if before.end is None:
            # Infinity: w = 0, both half-lines arrive along their headings.
            w = 0j
            backward = 1 / before.heading * INVERSION_SCALE  # direction of w along the edge, from 0 outward
            forward = 1 / (-after.heading) * INVERSION_SCALE
        else:
            w = plane.to_w(before.end)
            slope = plane.slope(np.array([before.end]))[0]
            backward, forward = -before.heading * slope, after.heading * slope
        # The aquifer is on the left: it is swept from `forward` counterclockwise to `backward`.
        angle = float(np.angle(backward / forward) % TAU)
        if angle < 1e-9:
            angle = TAU
        bisector = forward / abs(forward) * np.exp(0.5j * angle)
        outside = -bisector
        jump = 0.0
        if before.condition == "head" and after.condition == "head":
            jump = before.stages[1] - after.stages[0]
            if before.end is None:
                # What the uniform flow rises by from one half-line to the other.
                jump -= (self.plan.flow.conjugate() * (before.start - after.end)).real
        reach = self.reach(w, outside)
        kinds = (before.condition, after.condition)
        return Corner(w, outside, angle, kinds, reach, jump)

    def size_of_w(self):
        places = [self.plane.to_w(edge.end) for edge in self.plan.outer if edge.end is not None]
        return max(abs(a - b) for a in places for b in places) if len(places) > 1 else 1.0

    def reach(self, w, outside):
        """Largest length along the bisector outside, well clear of the aquifer."""
        size = self.size_of_w()
        lengths = size * np.geomspace(1e-5, 1.0, 400)
        with np.errstate(divide="ignore", invalid="ignore"):
            held = self.inside(self.plane.to_z(w + outside * lengths))
        first = lengths[np.argmax(held)] if held.any() else size
        # An island's bisector leaves it: the pole must stay well inside.
        return 0.5 * first if held.any() else 0.5 * size

    def find_images(self):
        """Mirror images of wells, as (w of the image, distance scale, island or None)."""
        found = []
        for well in self.plan.wells:
            for edge in self.plan.edges:
                origin = edge.end if edge.start is None else edge.start
                foot = ((well.at - origin) * edge.heading.conjugate()).real
                low, high = (-math.inf, 0) if edge.start is None else (0, edge.length)
                mirror = origin + edge.heading * ((well.at - origin) / edge.heading).conjugate()
                if not low <= foot <= high or self.inside(mirror)[0]:
                    continue
                depth = abs(well.at - mirror) / 2
                if self.distance_to_edges(mirror) < 0.5 * depth:
                    continue
                island = next((k for k, ring in enumerate(self.plan.islands)
                               if plans.winding(ring, np.array([mirror]))[0] < -0.5), None)
                found.append((mirror, depth, ("island", island) if island is not None else None))
            for k, lake in enumerate(self.plan.lakes):
                mirror = lake.centre + lake.radius**2 / (well.at - lake.centre).conjugate()
                found.append((mirror, abs(well.at - lake.centre) - lake.radius, ("lake", k)))
        plane = self.plane
        return [(plane.to_w(m), d * abs(plane.slope(np.array([m]))[0]), where) for m, d, where in found]

    # --- samples ------------------------------------------------------------

    def along(self, edge, density, shift):
        """Distances of samples, clustered at both ends; fractions for half-lines."""
        count = int(density * self.poles)
        depth = 4 * (math.sqrt(self.poles) - 1) + 3
        steps = np.sqrt((np.arange(count) + shift) / count)
        near = np.exp(-depth * (1 - steps))  # sqrt law, like the poles
        near = np.concatenate([near, np.geomspace(math.exp(-depth), 1, int(2 * density * 5)) * 0.999])
        even = (np.arange(int(density * 30)) + 0.5 * shift + 0.25) / int(density * 30)
        return np.unique(near), even

    def points_of(self, edge, density, shift):
        """Places on an edge, and their exact offsets from its two ends (None at infinity)."""
        near, even = self.along(edge, density, shift)
        if edge.length < math.inf:
            from_start = np.unique(np.concatenate([0.5 * near, 0.5 * even]))
            step = edge.end - edge.start
            offset = from_start * step
            back = (from_start[from_start < 0.5])[::-1] * step
            z = np.concatenate([edge.start + offset, edge.end - back])
            after = np.concatenate([offset, step - back])
            before = np.concatenate([offset - step, -back])
            return z, after, before
        corner = edge.end if edge.start is None else edge.start
        size = INVERSION_SCALE
        r = np.unique(np.concatenate([size * near, size / near, size * even / (1.0001 - even)]))
        offset = (-edge.heading if edge.start is None else edge.heading) * r
        if edge.start is None:
            return (corner + offset)[::-1], None, offset[::-1]
        return corner + offset, offset, None

    def gap(self, corner, z, offset):
        """w - w of a corner from the exact offset in z."""
        if self.plane.about is None:
            return offset / self.plane.scale
        if offset is None:
            return INVERSION_SCALE / (z - self.plane.about)
        about = self.plane.about
        return -INVERSION_SCALE * offset / ((z - about) * (corner - about))

    def sample(self, density, shift=0.5):
        """All stretches, each chain in order of travel."""
        stretches = []
        index = 0
        for ring in [self.plan.outer, *self.plan.islands]:
            for number, edge in enumerate(ring):
                z, after, before = self.points_of(edge, density, shift)
                ends = (index + number, index + (number + 1) % len(ring))
                gaps = {ends[0]: self.gap(edge.start, z, after), ends[1]: self.gap(edge.end, z, before)}
                stretches.append(self.stretch(edge, z, ends, gaps, after, before))
            index += len(ring)
        for lake in self.plan.lakes:
            count = int(density * 60)
            turn = np.exp(TAU * 1j * (np.arange(count) + shift) / count)
            z = lake.centre + lake.radius * turn
            stretches.append(Stretch(z, self.plane.to_w(z), -turn, "head", lake.name,
                                     np.full(count, lake.stage), 0.0, np.ones(count), (None, None), None, {}))
        return stretches

    def stretch(self, edge, z, ends, gaps, after, before):
        normal = np.full(z.shape, -1j * edge.heading)
        weight = np.ones(z.shape)
        if edge.condition == "skin":
            near = np.minimum(np.abs(after), np.abs(before))
            weight = np.minimum(1.0, np.sqrt(near / (0.05 * edge.length)))
        origin = edge.end if edge.start is None else edge.start
        along = ((z - origin) * edge.heading.conjugate()).real
        flow = self.plan.flow.conjugate() * (z if edge.length < math.inf else np.full(z.shape, origin))
        return Stretch(z, self.plane.to_w(z), normal, edge.condition, edge.name, edge.stage_at(z), edge.skin,
                       weight, ends, along, gaps, flow)

    # --- functions ----------------------------------------------------------

    def logarithms(self):
        """Places of logarithms: images, minus an island's middle where they lie in one; lakes."""
        places = []
        for w, _, where in self.images:
            minus = None
            if where is not None:
                minus = self.island_middle(where)
            places.append((w, minus))
        for k in range(len(self.plan.lakes)):
            places.append((self.island_middle(("lake", k)), None))
        return places

    def island_middle(self, where):
        kind, k = where
        if kind == "lake":
            return self.plane.to_w(self.plan.lakes[k].centre)
        ring = self.plan.islands[k]
        return self.plane.to_w(sum(edge.start for edge in ring) / len(ring))

    def arnoldi(self, key, x, dx, degree, first):
        """Polynomials in x orthogonal on the first samples, with derivatives (dx = dx/dw)."""
        count = len(x)
        q = np.ones((count, degree + 1), complex)
        d = np.zeros((count, degree + 1), complex)
        if first:
            hess = np.zeros((degree + 1, degree), complex)
        else:
            hess = self.hess[key]
        for k in range(degree):
            v, dv = x * q[:, k], x * d[:, k] + dx * q[:, k]
            if first:
                for _ in range(2):
                    part = q[:, : k + 1].conj().T @ v / count
                    v = v - q[:, : k + 1] @ part
                    hess[: k + 1, k] += part
                hess[k + 1, k] = np.linalg.norm(v) / math.sqrt(count)
            else:
                v = v - q[:, : k + 1] @ hess[: k + 1, k]
            dv = dv - d[:, : k + 1] @ hess[: k + 1, k]
            q[:, k + 1], d[:, k + 1] = v / hess[k + 1, k], dv / hess[k + 1, k]
        self.hess[key] = hess
        return q, d

    def gaps(self, w, stretches):
        """w - w of each corner: exact on the edges that meet there."""
        gaps = [w - corner.w for corner in self.corners]
        at = 0
        for s in stretches:
            for corner, gap in s.gaps.items():
                gaps[corner][at:at + len(s.w)] = gap
            at += len(s.w)
        return gaps

    def functions(self, w, first=False, stretches=()):
        """Single-valued analytic functions at w and their derivatives by w."""
        gaps = self.gaps(w, stretches)
        values, slopes = [], []

        def put(value, slope):
            values.append(value)
            slopes.append(slope)

        q, d = self.arnoldi("polynomial", w, np.ones_like(w), self.degree, first)
        values.extend(q.T)
        slopes.extend(d.T)
        holes = [("lake", k) for k in range(len(self.plan.lakes))] + [("island", k) for k in range(len(self.plan.islands))]
        for hole in holes:
            middle = self.island_middle(hole)
            q, d = self.arnoldi(hole, 1 / (w - middle), -1 / (w - middle) ** 2, self.laurent, first)
            values.extend(q.T[1:])
            slopes.extend(d.T[1:])
        for corner, gap in zip(self.corners, gaps):
            n = np.arange(1, self.poles + 1)
            for length in corner.reach * np.exp(-4 * (math.sqrt(self.poles) - np.sqrt(n))):
                to_pole = gap - corner.outside * length
                put(length / to_pole, -length / to_pole**2)
            to_end = gap - corner.outside * corner.reach
            with np.errstate(divide="ignore", invalid="ignore"):
                log = np.log(gap / to_end)
                dlog = 1 / gap - 1 / to_end
            at_corner = gap == 0
            for exponent in corner.exponents(self.highest):
                with np.errstate(divide="ignore", invalid="ignore"):
                    value = np.exp(exponent * log)
                    slope = exponent * value * dlog
                value[at_corner] = 0
                slope[at_corner] = 0
                put(value, slope)
        for image, scale, _ in self.images:
            for power in range(1, self.image_powers + 1):
                base = scale / (w - image)
                put(base**power, -power * base**power / (w - image))
        return np.array(values).T, np.array(slopes).T

    def jump_terms(self, w, stretches=()):
        """f and f' of the jumps of stage, Re f = stage rise over the corner's angle."""
        f, slope = np.zeros_like(w), np.zeros_like(w)
        for corner, gap in zip(self.corners, self.gaps(w, stretches)):
            if corner.jump:
                to_end = gap - corner.outside * corner.reach
                with np.errstate(divide="ignore", invalid="ignore"):
                    # Re(-i a log) = a arg; arg rises by the angle from the edge after to the edge before.
                    factor = -1j * corner.jump / corner.angle
                    f = f + factor * np.log(gap / to_end)
                    slope = slope + factor * (1 / gap - 1 / to_end)
        return f, slope

    # --- system -------------------------------------------------------------

    def chains(self, stretches):
        """Runs of consecutive barrier stretches that share corners."""
        runs, current = [], []
        number = 0
        for ring in [self.plan.outer, *self.plan.islands]:
            indices = list(range(number, number + len(ring)))
            number += len(ring)
            flows = [stretches[i].condition == "flow" for i in indices]
            if all(flows):
                runs.append(indices)
                continue
            start = flows.index(False)
            rotated = indices[start:] + indices[:start]
            for i in rotated:
                if stretches[i].condition == "flow":
                    current.append(i)
                elif current:
                    runs.append(current)
                    current = []
            if current:
                runs.append(current)
                current = []
        return runs

    def system(self, stretches, first):
        plan, plane = self.plan, self.plane
        w = np.concatenate([s.w for s in stretches])
        values, slopes = self.functions(w, first, stretches)
        offsets = np.cumsum([0] + [len(s.w) for s in stretches])
        logs = self.logarithms()
        wells = [plane.to_w(well.at) for well in plan.wells]
        runs = self.chains(stretches)
        chain_of = {i: k for k, run in enumerate(runs) for i in run}
        # arg of each logarithm, continuous along each chain
        args = {}
        for run in runs:
            path = np.concatenate([stretches[i].w for i in run])
            for key, (a, b) in {**{("log", j): l for j, l in enumerate(logs)},
                                **{("well", j): (x, None) for j, x in enumerate(wells)}}.items():
                ratio = path - a if b is None else (path - a) / (path - b)
                turn = np.unwrap(np.angle(ratio))
                at = 0
                for i in run:
                    args[key, i] = turn[at:at + len(stretches[i].w)]
                    at += len(stretches[i].w)
        count = values.shape[1]
        matrix = np.zeros((len(w), 2 * count - 1 + len(logs) + len(runs)))
        right = np.zeros((len(w), 1 + len(wells)))
        for i, s in enumerate(stretches):
            rows = slice(offsets[i], offsets[i + 1])
            v, d = values[rows], slopes[rows]
            jump, jump_slope = self.jump_terms(s.w, [s])
            turn = (plane.slope(s.z) * s.normal)[:, None]
            log_part = lambda a, b: np.log(np.abs(s.w - a)) - (0 if b is None else np.log(np.abs(s.w - b)))
            log_slope = lambda a, b: 1 / (s.w - a) - (0 if b is None else 1 / (s.w - b))
            known, known_slope = self.recharge_terms(s)
            if s.condition == "flow":
                # Re and Im parts of c: Im(c v) = Re c Im v + Im c Re v
                a_re, a_im = v.imag, v.real
                log_columns = [args[("log", j), i] for j in range(len(logs))]
                matrix[rows, 2 * count - 1 + len(logs) + chain_of[i]] = -1.0
                right[rows, 0] = self.recharge_stream(stretches, runs[chain_of[i]], i) - jump.imag - np.imag(s.flow)
                for j in range(len(wells)):
                    right[rows, 1 + j] = args[("well", j), i] / TAU
            elif s.condition == "head":
                a_re, a_im = v.real, -v.imag
                log_columns = [log_part(a, b) for a, b in logs]
                right[rows, 0] = s.stage - known - jump.real - np.real(s.flow)
                for j, at in enumerate(wells):
                    right[rows, 1 + j] = log_part(at, None) / TAU
            else:
                full = v + s.skin * d * turn
                a_re, a_im = full.real, -full.imag
                robin_log = lambda a, b: log_part(a, b) + s.skin * (log_slope(a, b) * turn[:, 0]).real
                log_columns = [robin_log(a, b) for a, b in logs]
                right[rows, 0] = (s.stage - known - s.skin * known_slope - jump.real
                                  - s.skin * (jump_slope * turn[:, 0]).real
                                  - np.real(s.flow) - s.skin * (plan.flow.conjugate() * s.normal).real)
                for j, at in enumerate(wells):
                    right[rows, 1 + j] = robin_log(at, None) / TAU
            matrix[rows, :count] = a_re
            # The imaginary constant of f is taken up by the barriers' constants.
            matrix[rows, count:2 * count - 1] = a_im[:, 1:]
            for j, column in enumerate(log_columns):
                matrix[rows, 2 * count - 1 + j] = column
            matrix[rows] *= s.weight[:, None]
            right[rows] *= s.weight[:, None]
        return matrix, right

    def recharge_terms(self, s):
        """Head of the particular solution -N/(4T) r^2 and its outward slope."""
        if not self.plan.recharge:
            return 0.0, 0.0
        factor = self.plan.recharge / self.plan.transmissivity
        away = s.z - self.plane.middle
        return -factor / 4 * np.abs(away) ** 2, -factor / 2 * (away * s.normal.conj()).real

    def recharge_stream(self, stretches, run, i):
        """Stream function that cancels the particular solution's flow through a barrier chain."""
        if not self.plan.recharge:
            return np.zeros(len(stretches[i].z))
        factor = self.plan.recharge / self.plan.transmissivity
        total = 0.0
        for j in run:
            s = stretches[j]
            rate = factor / 2 * ((s.z[:1] - self.plane.middle) * s.normal[:1].conj()).real[0]
            if j == i:
                return total + rate * s.length_along
            edge = self.plan.edges[j]
            total += rate * edge.length
        raise ValueError(i)

    # --- answers ------------------------------------------------------------

    def parts(self, z):
        """Ambient heads and unit Green's functions (columns of wells) at places."""
        z = np.asarray(z, complex)
        w = self.plane.to_w(z)
        values, _ = self.functions(w)
        count = values.shape[1]
        logs = self.logarithms()
        columns = np.concatenate([values.real, -values.imag[:, 1:]]
                                 + [(np.log(np.abs(w - a)) - (0 if b is None else np.log(np.abs(w - b))))[:, None]
                                    for a, b in logs], axis=1)
        harmonic = columns @ self.solution[: columns.shape[1]]
        jump, _ = self.jump_terms(w)
        ambient = harmonic[:, 0] + jump.real + (self.plan.flow.conjugate() * z).real
        if self.plan.recharge:
            ambient = ambient - self.plan.recharge / self.plan.transmissivity / 4 * np.abs(z - self.plane.middle) ** 2
        wells = [self.plane.to_w(well.at) for well in self.plan.wells]
        green = harmonic[:, 1:].copy()
        for j, at in enumerate(wells):
            with np.errstate(divide="ignore"):
                green[:, j] -= np.log(np.abs(w - at)) / TAU
        return ambient, green

    def drawdowns(self, z):
        _, green = self.parts(z)
        rates = np.array([well.pumping for well in self.plan.wells])
        return green @ rates / self.plan.transmissivity

    def own_drawdowns(self):
        """Drawdown of each well at its rim, from itself alone."""
        own = []
        for j, well in enumerate(self.plan.wells):
            ring = well.at + well.radius * np.exp(TAU * 1j * np.arange(16) / 16)
            _, green = self.parts(ring)
            own.append(well.pumping / self.plan.transmissivity * green[:, j].mean())
        return np.array(own)

    def shares(self):
        """Share of each well's water by river: name -> array over wells."""
        shares = {name: np.zeros(len(self.plan.wells)) for name in self.plan.rivers()}
        for stretch, rise in self.stream_rises():
            shares[stretch.name] -= rise[1:]
        return shares

    def exchanges(self):
        """What rivers give before pumping over transmissivity, metres: name -> value,
        of those without a jump of the stage; none under recharge."""
        found = {}
        if self.plan.recharge:
            return found
        for stretch, rise in self.stream_rises():
            corners = [self.corners[end] for end in stretch.ends if end is not None]
            is_known = np.isfinite(rise[0]) and not any(corner.jump for corner in corners)
            found.setdefault(stretch.name, []).append(rise[0] if is_known else None)
        return {name: sum(parts) for name, parts in found.items() if None not in parts}

    def stream_rises(self):
        """Rise of the stream function along each stretch of river, aquifer on the left:
        before pumping (infinite on half-lines that the flow crosses), and of each G."""
        plane, rises = self.plane, []
        wells = [plane.to_w(well.at) for well in self.plan.wells]
        logs = self.logarithms()
        corners = [corner.w for corner in self.corners]
        for s in self.sample(8):
            if s.condition == "flow":
                continue
            closed = s.ends[0] is None
            ends = np.array([s.w[0], s.w[0]] if closed else [corners[s.ends[0]], corners[s.ends[1]]])
            path = np.concatenate([ends[:1], s.w, ends[1:]])
            values, _ = self.functions(ends)
            count = values.shape[1]
            stream = np.concatenate([values.imag, values.real[:, 1:]], axis=1)
            rise = (stream[1] - stream[0]) @ self.solution[: 2 * count - 1]
            turn = lambda a: (lambda angles: angles[-1] - angles[0])(np.unwrap(np.angle(path - a)))
            for j, (a, b) in enumerate(logs):
                rise = rise + (turn(a) - (0 if b is None else turn(b))) * self.solution[2 * count - 1 + j]
            rise[1:] -= np.array([turn(at) for at in wells]) / TAU
            with np.errstate(divide="ignore", invalid="ignore"):
                rise[0] += np.diff(self.jump_terms(ends)[0].imag)[0]
                rise[0] += math.inf if self.plan.flow and 0 in ends else self.flow_rise(plane.to_z(ends))
            # Circles are sampled counterclockwise: the aquifer is on their right.
            rises.append((s, -rise if closed else rise))
        return rises

    def flow_rise(self, ends):
        """What the stream function of the uniform flow rises by between two places."""
        return (self.plan.flow.conjugate() * (ends[1] - ends[0])).imag if self.plan.flow else 0.0
