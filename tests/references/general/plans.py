"""Reads a plan file and strings its edges to rings, aquifer on the left.

Knows what the general tables need and no more: lines and circles with metric
numbers, one aquifer, line ends that coincide, and free ends that run straight
to infinity. It shares nothing with the program.
"""

import cmath
import math
import tomllib
from dataclasses import dataclass, field

import numpy as np

JOIN = 1e-3


@dataclass
class Edge:
    """A straight edge from `start` to `end`, or a half-line where one of them
    is None and `heading` points to infinity."""

    start: complex | None
    end: complex | None
    heading: complex  # unit, in the direction of travel
    name: str
    kind: str  # river, barrier
    stages: tuple[float, float] = (0.0, 0.0)  # at start and at end
    skin: float = 0.0  # K c, metres; 0 for a clean bank

    @property
    def length(self):
        return math.inf if self.start is None or self.end is None else abs(self.end - self.start)

    @property
    def condition(self):
        return "flow" if self.kind == "barrier" else ("skin" if self.skin else "head")

    def stage_at(self, z):
        """Stage at places on the edge."""
        if self.length == math.inf:
            return self.stages[0] + 0.0 * z.real
        along = ((z - self.start) * self.heading.conjugate()).real / self.length
        return self.stages[0] + (self.stages[1] - self.stages[0]) * along

    def reversed(self):
        return Edge(self.end, self.start, -self.heading, self.name, self.kind, self.stages[::-1], self.skin)


@dataclass
class Circle:
    centre: complex
    radius: float
    name: str
    stage: float


@dataclass
class Well:
    name: str
    at: complex
    pumping: float
    radius: float


@dataclass
class Plan:
    title: str
    transmissivity: float
    recharge: float
    outer: list[Edge]  # a ring, or an open chain from infinity to infinity; may be empty
    islands: list[list[Edge]] = field(default_factory=list)
    lakes: list[Circle] = field(default_factory=list)
    wells: list[Well] = field(default_factory=list)
    flow: complex = 0j  # dh/dx + i dh/dy far away

    @property
    def is_open(self):
        return bool(self.outer) and self.outer[0].start is None

    @property
    def edges(self):
        return [edge for ring in [self.outer, *self.islands] for edge in ring]

    def rivers(self):
        """Names of the rivers and lakes, in order."""
        names = [edge.name for edge in self.edges if edge.kind == "river"]
        return list(dict.fromkeys(names + [lake.name for lake in self.lakes]))


def pieces_of(table, kind, conductivity):
    line = [complex(*vertex) for vertex in table["line"]]
    stages = table.get("stage", 0.0)
    stages = stages if isinstance(stages, list) else [stages] * len(line)
    resistance = table.get("bank_resistance", 0.0)
    skin = conductivity * resistance if resistance else 0.0
    return [
        Edge(a, b, (b - a) / abs(b - a), table["name"], kind, (s, t), skin)
        for a, b, s, t in zip(line, line[1:], stages, stages[1:])
    ]


def strung(chains):
    """Joins chains of edges whose ends coincide; each turned as needed."""
    chains = [list(chain) for chain in chains]
    joined = True
    while joined:
        joined = False
        for i in range(len(chains)):
            for j in range(len(chains)):
                if i == j:
                    continue
                for other in (chains[j], [edge.reversed() for edge in chains[j][::-1]]):
                    if abs(chains[i][-1].end - other[0].start) < JOIN:
                        chains[i] = chains[i] + other
                        del chains[j]
                        joined = True
                        break
                if joined:
                    break
            if joined:
                break
    return chains


def area(ring):
    return 0.5 * sum((edge.start.conjugate() * edge.end).imag for edge in ring)


def turned(ring):
    return [edge.reversed() for edge in ring[::-1]]


def with_half_lines(chain):
    first, last = chain[0], chain[-1]
    before = Edge(None, first.start, first.heading, first.name, first.kind, (first.stages[0],) * 2, first.skin)
    after = Edge(last.end, None, last.heading, last.name, last.kind, (last.stages[1],) * 2, last.skin)
    return [before, *chain, after]


def left_of(chain, place):
    """Whether a place is on the left of an open chain: by the total turn of
    the line of sight along it."""
    far = 1e9
    walk = [chain[0].end - far * chain[0].heading]
    walk += [edge.end for edge in chain[:-1]] + [chain[-1].start + far * chain[-1].heading]
    turn = sum(cmath.phase((b - place) / (a - place)) for a, b in zip(walk, walk[1:]))
    # The turn is the opening angle, of sign + on the left.
    return turn > 0


def stated_flow(table):
    """dh/dx + i dh/dy of [ambient]; `toward` is clockwise from north."""
    ambient = table.get("ambient", {})
    toward = math.radians(ambient.get("toward", 0.0))
    return -ambient.get("gradient", 0.0) * complex(math.sin(toward), math.cos(toward))


def along_edges(flow, chain):
    """The part of a flow that goes on far away: square to half-lines of rivers,
    along those of barriers. Rounding of the azimuth must not count there."""
    axes = [edge.heading * (1j if edge.kind == "river" else 1) for edge in (chain[0], chain[-1])]
    assert abs((axes[0].conjugate() * axes[1]).imag) < 1e-12, "no flow goes on along both half-lines"
    part = axes[0] * (axes[0].conjugate() * flow).real
    assert abs(part - flow) < 1e-9 * abs(flow), "the flow does not go on far away"
    return part


def read(path):
    return read_text(path.read_text(encoding="utf-8"))


def read_text(text):
    table = tomllib.loads(text)
    aquifer = table["aquifer"]
    conductivity = aquifer.get("conductivity", math.nan)
    transmissivity = aquifer.get("transmissivity", conductivity * aquifer.get("thickness", math.nan))
    wells = [
        Well(w["name"], complex(*w["at"]), w.get("pumping", -w.get("injection", 0.0)), w["radius"])
        for w in table["well"]
    ]
    chains, lakes = [], []
    for kind in ("river", "barrier"):
        for entry in table.get(kind, []):
            if "circle" in entry:
                circle = entry["circle"]
                lakes.append(Circle(complex(*circle["centre"]), circle["radius"], entry["name"], entry["stage"]))
            else:
                chains.append(pieces_of(entry, kind, conductivity))
    rings = strung(chains)
    plan = Plan(table["title"], transmissivity, aquifer.get("recharge", 0.0), [], [], lakes, wells)
    for ring in rings:
        if abs(ring[0].start - ring[-1].end) > JOIN:
            ring = with_half_lines(ring)
            plan.outer = ring if left_of(ring, wells[0].at) else turned(ring)
    flow = stated_flow(table)
    if flow:
        plan.flow = along_edges(flow, plan.outer)
    closed = [ring for ring in rings if abs(ring[0].start - ring[-1].end) < JOIN]
    closed.sort(key=lambda ring: -abs(area(ring)))
    if not plan.outer and closed:
        ring = closed.pop(0)
        plan.outer = ring if area(ring) > 0 else turned(ring)
    plan.islands = [ring if area(ring) < 0 else turned(ring) for ring in closed]
    return plan


def winding(ring, places):
    """Winding number of a closed ring about places."""
    total = 0.0
    for edge in ring:
        total = total + np.angle((edge.end - places) / (edge.start - places))
    return total / (2 * math.pi)
