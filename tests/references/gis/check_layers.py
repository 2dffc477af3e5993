#!/usr/bin/env python3
"""Opens the layers of one run as a GIS does and compares them with the plan.

    mirrorwell run my-plan.toml --out layers
    .venv/bin/python tests/references/gis/check_layers.py my-plan.toml layers --program mirrorwell

Independent of the program: GDAL (pyogrio, rasterio) reads the files, GEOS
(shapely) judges the geometries, PROJ (pyproj) takes wells and edges back to the
plan's coordinates. What must hold is RFC 7946 and the names and units of the
layers; positions have 8 decimals, 0.6 mm, and the program's projection may be
off by 1 cm, as the list of checked systems allows. The GeoPackage, the rasters
and the styles are judged by the modules beside this one.
"""

import argparse
import csv
import json
import os
import pathlib
import sys
import tomllib

os.environ["PROJ_NETWORK"] = "OFF"

import numpy
import pyogrio
import pyproj
import shapely

import packages
import rasters
import styles

NEAR_M = 0.01
BBOX_DEG = 1e-8

TEXT, NUMBER, WHOLE = "text", "number", "whole number"
# Geometry kinds and properties of each layer; {m} is the length's unit, {q}
# the rate's; a name ending in ? may be empty.
LAYERS = {
    "head_contours": ({"LineString"}, {"head_{m}": NUMBER}),
    "drawdown_contours": ({"LineString"}, {"drawdown_{m}": NUMBER}),
    "drawdown_bands": ({"Polygon", "MultiPolygon"}, {"from_{m}": NUMBER, "to_{m}": NUMBER}),
    "wells": ({"Point"}, {
        "name": TEXT, "pumping_{q}": NUMBER, "head_{m}": NUMBER, "drawdown_{m}": NUMBER,
        "own_drawdown_{m}": NUMBER, "interference_{m}": NUMBER, "well_loss_{m}": NUMBER, "flags": TEXT,
    }),
    "neighbours": ({"Point", "Polygon"}, {
        "name": TEXT, "drawdown_{m}": NUMBER, "allowed_drawdown_{m}?": NUMBER, "largest_cause?": TEXT, "flags": TEXT,
    }),
    "boundaries": ({"LineString", "MultiLineString"}, {"name": TEXT, "kind": TEXT, "inflow_{q}": NUMBER}),
    "river_reaches": ({"LineString"}, {"name": TEXT, "inflow_{q}": NUMBER, "inflow_{q}_per_{m}?": NUMBER}),
    "image_wells": ({"Point"}, {"of": TEXT, "sign": WHOLE, "order": WHOLE}),
    "flow": ({"Point"}, {"azimuth": NUMBER, "flux_{m}_per_d?": NUMBER}),
}
# Layers that no plan leaves empty.
NEEDED = {"head_contours", "drawdown_contours", "drawdown_bands", "wells", "flow"}


class Faults(list):
    def expect(self, holds, text):
        if not holds:
            self.append(text)


def positions(geometry):
    """All positions of a GeoJSON geometry."""
    def walk(part):
        if part and isinstance(part[0], (int, float)):
            yield part
        else:
            for inner in part:
                yield from walk(inner)
    yield from walk(geometry["coordinates"])


def rings(geometry):
    """(ring, whether it is an outer one) of a polygon or polygons."""
    polygons = {"Polygon": [geometry["coordinates"]], "MultiPolygon": geometry["coordinates"]}
    for polygon in polygons.get(geometry["type"], []):
        for number, ring in enumerate(polygon):
            yield ring, number == 0


def check_rfc_7946(name, document, faults):
    """Sections 3.1.1 (positions), 3.1.6 (rings), 4 (system), 5 (bbox)."""
    faults.expect(document.get("type") == "FeatureCollection", f"{name}: not a FeatureCollection")
    faults.expect("crs" not in document, f"{name}: a crs member, which RFC 7946 removed")
    faults.expect(bool(document.get("caution")), f"{name}: no caution")
    geometries = [feature["geometry"] for feature in document["features"]]
    everywhere = [position for geometry in geometries for position in positions(geometry)]
    for position in everywhere:
        faults.expect(len(position) == 2, f"{name}: {position} is no longitude and latitude")
        faults.expect(abs(position[0]) <= 180 and abs(position[1]) <= 90, f"{name}: {position} is no place")
        faults.expect(all(round(v, 8) == v for v in position), f"{name}: {position} has more than 8 decimals")
    if everywhere:
        west, south = numpy.min(everywhere, axis=0)
        east, north = numpy.max(everywhere, axis=0)
        bbox = numpy.array(document.get("bbox", [999.0] * 4))
        faults.expect(
            bool((numpy.abs(bbox - [west, south, east, north]) <= BBOX_DEG).all()),
            f"{name}: bbox {bbox.tolist()} is not {[west, south, east, north]}",
        )
    for geometry in geometries:
        for ring, outer in rings(geometry):
            faults.expect(len(ring) >= 4 and ring[0] == ring[-1], f"{name}: a ring is not closed")
            turns_left = shapely.LinearRing(ring).is_ccw
            faults.expect(turns_left == outer, f"{name}: a ring breaks the right-hand rule")


def matches(value, wanted):
    if wanted is TEXT:
        return isinstance(value, str)
    if isinstance(value, bool) or not isinstance(value, (int, float)):
        return False
    return wanted is NUMBER or float(value).is_integer()


def check_properties(name, document, units, faults):
    wanted = {key.format(**units): kind for key, kind in LAYERS[name][1].items()}
    for feature in document["features"]:
        given = feature["properties"]
        for key, kind in wanted.items():
            optional, key = key.endswith("?"), key.rstrip("?")
            if key not in given:
                faults.append(f"{name}: {given.get('name', 'a feature')} has no {key}")
            elif not (matches(given[key], kind) or (optional and given[key] is None)):
                faults.append(f"{name}: {key} = {given[key]!r} is no {kind}")
        extra = set(given) - {key.rstrip("?") for key in wanted}
        faults.expect(not extra, f"{name}: unknown properties {sorted(extra)}")


def check_as_gis(name, path, document, faults):
    """GDAL must read every feature on WGS 84, and GEOS find it valid."""
    meta, _, geometries, _ = pyogrio.raw.read(path)
    count = len(document["features"])
    read = 0 if geometries is None else len(geometries)
    faults.expect(read == count, f"{name}: GDAL reads {read} of {count} features")
    if not read:
        return
    faults.expect(pyproj.CRS(meta["crs"]).equals(pyproj.CRS(4326), ignore_axis_order=True), f"{name}: system {meta['crs']}")
    for geometry in shapely.from_wkb(geometries):
        faults.expect(geometry.geom_type in LAYERS[name][0], f"{name}: a {geometry.geom_type}")
        if not shapely.is_valid(geometry):
            faults.append(f"{name}: not valid: {shapely.is_valid_reason(geometry)}")


def grid_of(plan):
    """PROJ's way from longitude and latitude to the plan's grid, and its unit."""
    crs = plan["crs"]
    if isinstance(crs, str):
        crs = pyproj.CRS(crs)
    else:
        longitude, latitude = crs["origin"]
        crs = pyproj.CRS.from_proj4(
            f"+proj=tmerc +lat_0={latitude} +lon_0={longitude} +k=1 +datum=WGS84 +units=m +type=crs"
        )
    grid = pyproj.Transformer.from_crs(4326, crs, always_xy=True, allow_ballpark=False, only_best=False)
    return crs, grid, crs.axis_info[0].unit_conversion_factor


def check_wells(plan, document, grid, metres, faults):
    """Each well that the plan places itself lies where the plan says."""
    placed = {well["name"]: well["at"] for well in plan.get("well", []) if "at" in well}
    found = 0
    for feature in document["features"]:
        at = placed.get(feature["properties"]["name"])
        if at is None:
            continue
        found += 1
        x, y = grid.transform(*feature["geometry"]["coordinates"])
        off = numpy.hypot(x - at[0], y - at[1]) * metres
        faults.expect(off <= NEAR_M, f"wells: {feature['properties']['name']} is {off:.3f} m off")
    faults.expect(found == len(placed), f"wells: {found} of the plan's {len(placed)} wells are there")


def check_boundaries(plan, document, grid, metres, faults):
    """Every vertex of a straight river or barrier lies on the line through its ends."""
    for edge in plan.get("river", []) + plan.get("barrier", []):
        line = numpy.array(edge.get("line", []))
        if len(line) != 2:
            continue
        along = (line[1] - line[0]) / numpy.hypot(*(line[1] - line[0]))
        drawn = [f["geometry"] for f in document["features"] if f["properties"]["name"] == edge["name"]]
        # A barrier may lie off the map; a river's inflow must be told anyway.
        faults.expect(drawn or "stage" not in edge, f"boundaries: {edge['name']} is missing")
        for geometry in drawn:
            for position in positions(geometry):
                away = numpy.array(grid.transform(*position)) - line[0]
                off = abs(away[0] * along[1] - away[1] * along[0]) * metres
                faults.expect(off <= NEAR_M, f"boundaries: {edge['name']} is {off:.3f} m off its line")


def check_inflows(document, folder, unit, faults):
    """What the parts of the rivers give adds up to what the findings say."""
    findings = json.loads((folder / "findings.json").read_text(encoding="utf-8"))
    key = f"inflow_{unit}"
    for found in findings["boundaries"]:
        parts = [f["properties"][key] for f in document["features"] if f["properties"]["name"] == found["name"]]
        if not parts:
            continue
        # To the rates' own rounding, and a part of the whole in a general outline.
        near = 1e-9 + 1e-3 * abs(found[key])
        faults.expect(abs(sum(parts) - found[key]) <= near, f"boundaries: {found['name']}: {parts} is not {found[key]}")


def check_names(plan, folder, documents, faults):
    """Names come back from tables and layers as they were."""
    for key in ("well", "neighbour"):
        names = [entry["name"] for entry in plan.get(key, [])]
        layer = [feature["properties"]["name"] for feature in documents[f"{key}s"]["features"]]
        faults.expect(set(names) <= set(layer), f"{key}s: names are lost: {set(names) - set(layer)}")
    with open(folder / "interference.csv", encoding="utf-8", newline="") as table:
        heading, *rows = csv.reader(table)
    cells = heading[1:] + [row[0] for row in rows]
    for cell in cells:
        faults.expect(not cell.startswith(("=", "+", "-", "@", "\t", "\r")), f"interference: {cell} may be run")
    wanted = [feature["properties"]["name"] for name in ("wells", "wells", "neighbours") for feature in documents[name]["features"]]
    faults.expect([cell.removeprefix("'") for cell in cells] == wanted, f"interference: names {cells}")


def check_flow(document, faults):
    for feature in document["features"]:
        azimuth = feature["properties"].get("azimuth", -1.0)
        faults.expect(0 <= azimuth < 360, f"flow: an azimuth of {azimuth}")


def read_geojson(folder, units, faults):
    """The GeoJSON layers by name, each checked."""
    documents = {}
    for path in sorted(folder.glob("*.geojson")):
        name = path.stem
        if name not in LAYERS:
            faults.append(f"{name}: a layer that no contract names")
            continue
        documents[name] = json.loads(path.read_text(encoding="utf-8"))
        check_rfc_7946(name, documents[name], faults)
        check_properties(name, documents[name], units, faults)
        check_as_gis(name, path, documents[name], faults)
    for name in set(LAYERS) - set(documents):
        faults.append(f"{name}: missing")
    for name in NEEDED & set(documents):
        faults.expect(documents[name]["features"], f"{name}: empty")
    return documents


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("plan", type=pathlib.Path)
    parser.add_argument("folder", type=pathlib.Path)
    parser.add_argument("--program", type=pathlib.Path, required=True)
    arguments = parser.parse_args()
    plan = tomllib.loads(arguments.plan.read_text(encoding="utf-8"))
    units = {"m": "ft", "q": "gpm"} if plan.get("units") == "us" else {"m": "m", "q": "m3_per_d"}
    crs, grid, metres = grid_of(plan)
    faults, folder = Faults(), arguments.folder
    documents = read_geojson(folder, units, faults)
    if not faults:
        wanted = {name: {key.format(**units): kind for key, kind in LAYERS[name][1].items()} for name in documents}
        placed = {well["name"]: well["at"] for well in plan.get("well", []) if "at" in well}
        check_wells(plan, documents["wells"], grid, metres, faults)
        check_boundaries(plan, documents["boundaries"], grid, metres, faults)
        check_inflows(documents["boundaries"], folder, units["q"], faults)
        check_names(plan, folder, documents, faults)
        check_flow(documents["flow"], faults)
        packages.check(folder / "results.gpkg", documents, wanted, crs, placed, NEAR_M / metres, faults)
        rasters.check(folder, arguments.plan, plan, arguments.program, crs, units["m"], faults)
        for name in [*documents, "head", "drawdown"]:
            properties = {key.rstrip("?") for key in wanted.get(name, {})}
            features = documents.get(name, {"features": []})["features"]
            styles.check(folder / f"{name}.sld", properties, features, faults)
    if faults:
        sys.exit("\n".join(dict.fromkeys(faults)))
    count = sum(len(document["features"]) for document in documents.values())
    print(f"{folder}: {len(documents)} layers, {count} features, a GeoPackage and two rasters as a GIS wants them")


if __name__ == "__main__":
    main()
