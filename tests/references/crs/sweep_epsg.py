#!/usr/bin/env python3
"""Sweeps every projected EPSG code against PROJ and writes the list of codes
that the program accepts, src/plan/crs/checked.txt.

    python3 -m venv .venv && .venv/bin/pip install pyproj numpy
    .venv/bin/python tests/references/crs/sweep_epsg.py          # writes the list
    .venv/bin/python tests/references/crs/sweep_epsg.py --check  # compares with the committed list

Each code is projected at 8 x 8 points over its area of use, forward and back,
by PROJ (pyproj) and by the program's own library and definitions
(project_points.rs). PROJ runs without datum grids and without the network, and
never with a ballpark transformation: a code for which it has nothing better
is not accepted. The largest difference on the ground decides:
    up to 1 cm   accepted silently
    up to 1 m    accepted with a note
    more         refused, with the nearest accepted code
The box of degrees over which a code was swept is its domain: the area of use
widened by half a degree and rounded out to whole degrees, or rounded out only,
or the bare area, whichever is the widest that is no worse than the bare area.
"""

import argparse
import collections
import functools
import math
import os
import pathlib
import subprocess
import sys
import warnings

os.environ["PROJ_NETWORK"] = "OFF"

import numpy
import pyproj
from pyproj import CRS, Transformer
from pyproj.database import query_crs_info
from pyproj.enums import PJType

ROOT = pathlib.Path(__file__).resolve().parents[3]
LIST = ROOT / "src" / "plan" / "crs" / "checked.txt"
POINTS_EACH_WAY = 8
SILENT_M, NOTED_M = 0.01, 1.0
METRES_A_DEGREE = math.pi * 6378137.0 / 180.0


def boxes(area):
    """Candidate boxes (west, south, east, north), widest first; east may pass 180."""
    west, south, east, north = area.west, area.south, area.east, area.north
    if east < west:
        east += 360.0
    for margin, rounded in ((0.5, True), (0.0, True), (0.0, False)):
        box = [west - margin, south - margin, east + margin, north + margin]
        if rounded:
            box = [math.floor(box[0]), math.floor(box[1]), math.ceil(box[2]), math.ceil(box[3])]
        box[1], box[3] = max(box[1], -90.0), min(box[3], 90.0)
        if box[2] - box[0] >= 360.0:
            box[0], box[2] = -180.0, 180.0
        yield tuple(float(value) for value in box)


def sample(box):
    """Points spread over a box; longitudes within -180 to 180, no pole, no seam."""
    west, south, east, north = box
    if east - west >= 360.0:
        west, east = west + 0.01, east - 0.01
    south, north = max(south, -89.9), min(north, 89.9)
    longitudes, latitudes = numpy.meshgrid(
        numpy.linspace(west, east, POINTS_EACH_WAY), numpy.linspace(south, north, POINTS_EACH_WAY)
    )
    return (longitudes.ravel() + 180.0) % 360.0 - 180.0, latitudes.ravel()


def axes_fit(crs):
    """East and north in either order, or a polar grid whose axes are meridians."""
    directions = sorted(axis.direction for axis in crs.axis_info)
    return directions in (["east", "north"], ["north", "north"], ["south", "south"])


@functools.cache
def from_wgs84(datum):
    """PROJ's way from WGS 84 to a geographic system; None where only ballpark."""
    try:
        return Transformer.from_crs(4326, datum, always_xy=True, allow_ballpark=False, only_best=False)
    except pyproj.exceptions.ProjError:
        return None


def proj_points(code, area):
    """The unit and, for each candidate box, its points and PROJ's answer; None
    where PROJ has no answer or the axes do not fit."""
    crs = CRS.from_epsg(code)
    datum = crs.geodetic_crs
    shift = from_wgs84(datum) if axes_fit(crs) else None
    if shift is None:
        return None
    try:
        grid = Transformer.from_crs(datum, crs, always_xy=True)
    except pyproj.exceptions.ProjError:
        return None
    swept = []
    for box in boxes(area):
        longitude, latitude = sample(box)
        x, y = grid.transform(*shift.transform(longitude, latitude))
        swept.append((longitude, latitude, x, y))
    return Asked(crs.axis_info[0].unit_conversion_factor, datum, list(boxes(area)), swept)


Asked = collections.namedtuple("Asked", "unit datum boxes swept")
Answer = collections.namedtuple("Answer", "box difference shift")


def operation_at(datum, longitude, latitude):
    """The datum operation PROJ uses at a place."""
    transformer = from_wgs84(datum)
    transformer.transform((longitude + 180.0) % 360.0 - 180.0, latitude)
    try:
        return transformer.get_last_used_operation()
    except pyproj.exceptions.ProjError:
        return transformer  # there is only one


def operations(datum, box):
    """The definitions of the datum operations PROJ uses at nine points of a box."""
    return {
        operation_at(datum, longitude, latitude).definition
        for longitude in numpy.linspace(box[0], box[2], 5)[1:4].tolist()
        for latitude in numpy.linspace(box[1], box[3], 5)[1:4].tolist()
    }


def as_towgs84(definition):
    """The seven numbers, position vector convention, of a PROJ operation from
    WGS 84; None where it is not one similarity."""
    steps = [step for step in definition.split(" step ") if "proj=helmert" in step or "proj=molobadekas" in step]
    if not steps:
        return "0;0;0" if "grid" not in definition and "push" not in definition else None
    if len(steps) > 1 or "grid" in definition or "t_epoch" in definition:
        return None
    value = {key: word for key, _, word in (part.partition("=") for part in steps[0].split())}
    number_of = lambda key: float(value.get(key, 0.0))
    move = numpy.array([number_of(key) for key in "xyz"])
    turn = numpy.array([number_of(key) for key in ("rx", "ry", "rz")])
    if not steps[0].startswith("inv "):
        if any(turn) or "s" in value:
            return None
        move = -move  # PROJ writes a bare move the way it goes, from WGS 84
    if value.get("convention") == "coordinate_frame":
        turn = -turn
    if value["proj"] == "molobadekas":
        # Turning and scaling about a point p is the same about 0 after a move.
        pivot = numpy.array([number_of(key) for key in ("px", "py", "pz")])
        rx, ry, rz = turn * math.pi / 648000.0
        turned = numpy.array([[1.0, -rz, ry], [rz, 1.0, -rx], [-ry, rx, 1.0]]) @ pivot
        move = move + pivot - (1.0 + number_of("s") * 1e-6) * turned
    numbers = [*move, *turn, number_of("s")]
    if not any(numbers[3:]):
        numbers = numbers[:3]
    return ";".join(f"{round(n, 9):.12g}" for n in numbers)


def ask_program(asked, shifts):
    """The program's answers by (code, shift), as arrays box x point x 4."""
    pairs = [(code, shift) for code in asked for shift in shifts[code]]
    lines = (
        f"{code},{shift},{lon!r},{lat!r},{x!r},{y!r}"
        for code, shift in pairs
        for points in asked[code].swept
        for lon, lat, x, y in zip(*(axis.tolist() for axis in points))
    )
    program = ["cargo", "run", "--quiet", "--example", "project_points"]
    done = subprocess.run(program, cwd=ROOT, input="\n".join(lines), text=True, stdout=subprocess.PIPE, check=True)
    numbers = numpy.fromstring(done.stdout.replace("\n", ","), sep=",")
    answers = numbers.reshape(len(pairs), -1, POINTS_EACH_WAY**2, 4)
    return dict(zip(pairs, answers))


def largest_difference_m(unit, points, answers):
    longitude, latitude, x, y = points
    forward = numpy.hypot(answers[:, 0] - x, answers[:, 1] - y) * unit
    east = (answers[:, 2] - longitude + 180.0) % 360.0 - 180.0
    east = east * METRES_A_DEGREE * numpy.cos(numpy.radians(latitude))
    back = numpy.hypot(east, (answers[:, 3] - latitude) * METRES_A_DEGREE)
    worst = max(forward.max(), back.max())
    return worst if math.isfinite(worst) else math.inf


def grade(difference_m):
    return 0 if difference_m <= SILENT_M else 1 if difference_m <= NOTED_M else 2


def judge(asked, shift, answers):
    """The widest box that grades as well as the bare area, and its difference."""
    differences = [largest_difference_m(asked.unit, *pair) for pair in zip(asked.swept, answers)]
    best = grade(differences[-1])
    if best == 2:
        return None
    return next(
        Answer(box, difference, shift)
        for box, difference in zip(asked.boxes, differences)
        if grade(difference) == best
    )


def judge_all(asked, shifts):
    """The best answer of each code over its candidate shifts, the first of equals."""
    answers = ask_program(asked, shifts)
    best = {}
    for code, question in asked.items():
        found = [judge(question, shift, answers[code, shift]) for shift in shifts[code]]
        found = [answer for answer in found if answer]
        if found:
            best[code] = min(found, key=lambda answer: answer.difference)
    return best


def coarse_shift_m(asked):
    """The registered accuracy of the shift in the middle of the area, where it
    is no mere identity and coarser than 2 m; else 0."""
    west, south, east, north = asked.boxes[-1]
    operation = operation_at(asked.datum, (west + east) / 2.0, (south + north) / 2.0)
    moved = "helmert" in operation.definition or "molobadekas" in operation.definition
    return operation.accuracy if moved and operation.accuracy > 2.0 else 0.0


def overlap(first, second):
    """Shared area of two boxes over the area of both."""
    width = min(first[2], second[2]) - max(first[0], second[0])
    height = min(first[3], second[3]) - max(first[1], second[1])
    if width <= 0.0 or height <= 0.0:
        return 0.0
    size = lambda box: (box[2] - box[0]) * (box[3] - box[1])
    return width * height / (size(first) + size(second) - width * height)


def bare(info):
    return list(boxes(info.area_of_use))[-1]


def alternative(info, accepted, infos):
    """The accepted code that serves a refused one: the same area (three quarters
    shared) and method with the most words of its name, else the UTM zone."""
    box, words = bare(info), set(info.name.lower().replace("/", " ").split())
    best = (0.0, None)
    for code in accepted:
        other = infos[code]
        if other.deprecated or not (shared := overlap(box, bare(other))) >= 0.75:
            continue
        common = len(words & set(other.name.lower().replace("/", " ").split())) / len(words)
        same_method = other.projection_method_name == info.projection_method_name
        score = shared + common + 0.5 * same_method + code * 1e-7
        best = max(best, (score, code), key=lambda pair: pair[0])
    if best[1]:
        return best[1]
    if box[2] - box[0] > 12.0:
        return 0
    longitude = ((box[0] + box[2]) / 2.0 + 180.0) % 360.0
    zone = int(longitude // 6.0) + 1
    return (32600 if box[1] + box[3] >= 0.0 else 32700) + zone


def number(value):
    return f"{value:g}"


def merged(rows):
    """Runs of consecutive codes with the same rest, as `first-last rest`."""
    runs = []
    for code, rest in rows:
        if runs and runs[-1][1] == code - 1 and runs[-1][2] == rest:
            runs[-1][1] = code
        else:
            runs.append([code, code, rest])
    return [f"{a}{'' if a == b else f'-{b}'} {rest}" for a, b, rest in runs]


HEADER = """\
# EPSG codes checked against a second projection library.
# Written by tests/references/crs/sweep_epsg.py; do not edit by hand.
# PROJ {proj} with EPSG {epsg}, without datum grids; definitions of crs-definitions
# {definitions} computed by proj4rs {proj4rs}; {points} points a code, both directions.
# {silent} codes agree within 1 cm, {noted} more within 1 m, {refused} are refused.
#
# accepted: code or range, west south east north in degrees (east may pass 180),
#   then if they apply  d<largest difference, mm>  s<accuracy of the datum shift, m>
#   t<the shift PROJ uses, where the definition's own is another>
# refused: code or range, "refused", the nearest accepted code or 0
"""


def locked(package):
    lines = (ROOT / "Cargo.lock").read_text().splitlines()
    return lines[lines.index(f'name = "{package}"') + 1].split('"')[1]


def sweep():
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        infos = {
            int(info.code): info
            for info in query_crs_info(auth_name="EPSG", pj_types=[PJType.PROJECTED_CRS], allow_deprecated=True)
            if info.area_of_use
        }
        asked = {
            code: found
            for code, info in sorted(infos.items())
            if code < 65536 and (found := proj_points(code, info.area_of_use))
        }
    accepted = judge_all(asked, {code: [""] for code in asked})
    # Where the definition's own datum shift is not what PROJ uses, PROJ's is tried.
    again, shifts = {}, {}
    for code, question in asked.items():
        if code in accepted and grade(accepted[code].difference) == 0:
            continue
        candidates = {as_towgs84(text) for text in operations(question.datum, question.boxes[-1])} - {None}
        if candidates:
            again[code], shifts[code] = question, sorted(candidates)
    for code, answer in judge_all(again, shifts).items():
        if code not in accepted or grade(answer.difference) < grade(accepted[code].difference):
            accepted[code] = answer
    coarse = {code: coarse_shift_m(asked[code]) for code in accepted}
    return infos, accepted, coarse


def listing(infos, accepted, coarse):
    rows = []
    for code, info in sorted(infos.items()):
        if code in accepted:
            answer = accepted[code]
            rest = " ".join(number(value) for value in answer.box)
            if grade(answer.difference) == 1:
                rest += f" d{math.ceil(answer.difference * 1000.0)}"
            if coarse[code]:
                rest += f" s{number(coarse[code])}"
            if answer.shift:
                rest += " t" + answer.shift.replace(";", ",")
        else:
            rest = f"refused {alternative(info, accepted, infos)}"
        rows.append((code, rest))
    grades = [grade(answer.difference) for answer in accepted.values()]
    header = HEADER.format(
        proj=pyproj.proj_version_str,
        epsg=pyproj.database.get_database_metadata("EPSG.VERSION"),
        definitions=locked("crs-definitions"),
        proj4rs=locked("proj4rs"),
        points=POINTS_EACH_WAY**2,
        silent=grades.count(0),
        noted=grades.count(1),
        refused=len(infos) - len(accepted),
    )
    return header + "\n".join(merged(rows)) + "\n"


def body(text):
    return [line for line in text.splitlines() if not line.startswith("#")]


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--check", action="store_true", help="compare with the committed list, write nothing")
    arguments = parser.parse_args()
    text = listing(*sweep())
    if not arguments.check:
        LIST.write_text(text)
        print("\n".join(text.splitlines()[:6]))
        return
    if body(text) != body(LIST.read_text()):
        sys.exit(f"{LIST} differs from a new sweep with PROJ {pyproj.proj_version_str}")
    print(f"{LIST.name}: unchanged with PROJ {pyproj.proj_version_str}")


if __name__ == "__main__":
    main()
