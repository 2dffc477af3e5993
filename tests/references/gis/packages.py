"""results.gpkg: SQLite and GDAL judge the file, the GeoJSON layers its content.

What must hold is OGC 12-128r17 (GeoPackage 1.3): clause 1.1.1 (file), 1.1.2
(systems), 2.1 (features) and annex F.3 (R-tree).
"""

import sqlite3

import numpy
import pyogrio
import pyproj
import shapely

GEOPACKAGE = 0x47504B47
KINDS = {"LineString", "Point", "MultiPolygon", "Unknown"}
DTYPES = {"text": "object", "number": "float64", "whole number": "int32"}


def check(path, documents, wanted, crs, placed, near, faults):
    """`documents` are the GeoJSON layers by name, `wanted` their properties and
    kinds, `placed` wells and their coordinates in the plan."""
    check_database(path, set(documents), faults)
    names = {name for name, _ in pyogrio.list_layers(path)}
    faults.expect(names == set(documents), f"gpkg: GDAL lists {sorted(names)}")
    for name in names & set(documents):
        check_layer(path, name, documents[name], wanted[name], crs, faults)
    check_wells(path, placed, near, faults)


def check_database(path, names, faults):
    database = sqlite3.connect(path)
    ask = lambda query: database.execute(query).fetchall()
    faults.expect(ask("PRAGMA integrity_check") == [("ok",)], "gpkg: not sound as a database")
    faults.expect(ask("PRAGMA foreign_key_check") == [], "gpkg: rows refer to rows that are not there")
    faults.expect(ask("PRAGMA application_id") == [(GEOPACKAGE,)], "gpkg: not marked as a GeoPackage")
    faults.expect(ask("PRAGMA user_version")[0][0] >= 10300, "gpkg: older than 1.3")
    systems = {row[0] for row in ask("SELECT srs_id FROM gpkg_spatial_ref_sys")}
    faults.expect({-1, 0, 4326} <= systems, "gpkg: the systems -1, 0 and 4326 are not all there")
    for name in names:
        count = ask(f'SELECT count(*) FROM "{name}"')
        indexed = ask(f'SELECT count(*) FROM "rtree_{name}_geom"')
        faults.expect(count == indexed, f"gpkg: {name} has {count} features, {indexed} of them indexed")
        check = ask(f"SELECT rtreecheck('rtree_{name}_geom')")
        faults.expect(check == [("ok",)], f"gpkg: the index of {name} is not sound: {check}")
        listed = ask(
            "SELECT count(*) FROM gpkg_extensions WHERE extension_name = 'gpkg_rtree_index' "
            f"AND table_name = '{name}' AND column_name = 'geom'"
        )
        faults.expect(listed == [(1,)], f"gpkg: the index of {name} is not listed")
        described = ask(f"SELECT description FROM gpkg_contents WHERE table_name = '{name}'")
        faults.expect("hydrogeologist" in described[0][0], f"gpkg: {name} has no caution")
    database.close()


def check_layer(path, name, document, wanted, crs, faults):
    info = pyogrio.read_info(path, layer=name)
    faults.expect(info["geometry_type"] in KINDS, f"gpkg: {name} holds {info['geometry_type']}")
    faults.expect(
        pyproj.CRS(info["crs"]).equals(crs, ignore_axis_order=True), f"gpkg: {name}: system {info['crs']}"
    )
    types = dict(zip(info["fields"], info["dtypes"]))
    keys = {key.rstrip("?"): DTYPES[kind] for key, kind in wanted.items()}
    faults.expect(types == keys, f"gpkg: {name} has the columns {types}, not {keys}")
    _, _, geometries, columns = pyogrio.raw.read(path, layer=name)
    features = document["features"]
    faults.expect(len(geometries) == len(features), f"gpkg: {name}: {len(geometries)} of {len(features)} features")
    for key, column in zip(info["fields"], columns):
        for value, feature in zip(column, features):
            given = feature["properties"][key]
            empty = value is None or value != value
            same = given is None if empty else value == given
            faults.expect(same, f"gpkg: {name}: {key} is {value!r}, in GeoJSON {given!r}")
    for geometry in shapely.from_wkb(geometries):
        if not shapely.is_valid(geometry):
            faults.append(f"gpkg: {name}: not valid: {shapely.is_valid_reason(geometry)}")
        for polygon in shapely.get_parts(geometry):
            if polygon.geom_type == "Polygon":
                faults.expect(polygon.exterior.is_ccw, f"gpkg: {name}: an outer ring runs clockwise")
                faults.expect(
                    not any(hole.is_ccw for hole in polygon.interiors),
                    f"gpkg: {name}: a hole runs counter-clockwise",
                )


def check_wells(path, placed, near, faults):
    """Wells lie where the plan says, and the index finds each."""
    _, _, geometries, columns = pyogrio.raw.read(path, layer="wells")
    for name, point in zip(columns[0], shapely.from_wkb(geometries)):
        if name in placed:
            off = numpy.hypot(point.x - placed[name][0], point.y - placed[name][1])
            faults.expect(off <= near, f"gpkg: {name} is {off:.3f} off")
            box = (point.x - near, point.y - near, point.x + near, point.y + near)
            found = pyogrio.raw.read(path, layer="wells", bbox=box)[3][0]
            faults.expect(name in found, f"gpkg: the index does not find {name}")
