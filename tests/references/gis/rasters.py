"""head.tif and drawdown.tif: GDAL reads them, `mirrorwell heads` knows the values."""

import csv
import io
import subprocess

import numpy
import pyproj
import rasterio

CELLS = 400
# A 32-bit float holds 24 binary digits; half of the last is lost.
FLOAT32 = 2.0**-24


def check(folder, plan_path, plan, program, crs, unit, faults):
    for name in ("head", "drawdown"):
        with rasterio.open(folder / f"{name}.tif") as raster:
            check_header(name, raster, plan, crs, unit, faults)
            check_values(name, raster, plan_path, program, faults)


def check_header(name, raster, plan, crs, unit, faults):
    expect = lambda holds, what: faults.expect(holds, f"{name}.tif: {what}")
    given = pyproj.CRS.from_wkt(raster.crs.to_wkt())
    expect(given.equals(crs, ignore_axis_order=True) or same_grid(given, crs), f"system {raster.crs}")
    expect(raster.dtypes == ("float32",), f"values of {raster.dtypes}")
    expect(raster.nodata is not None and numpy.isnan(raster.nodata), f"no data is {raster.nodata}")
    expect(raster.compression.name == "deflate", f"compression {raster.compression}")
    expect(raster.descriptions == (name,) and raster.units == (unit,), f"{raster.descriptions}, {raster.units}")
    width, height = raster.res
    spacing = plan.get("map", {}).get("spacing", width)
    expect(width == height == spacing, f"cells of {width} by {height}, spacing {spacing}")


def same_grid(given, wanted):
    """Whether two systems put places to the same coordinates, to a millimetre."""
    way = pyproj.Transformer.from_crs(wanted, given, always_xy=True)
    places = [(-20000.0, 5000.0), (0.0, 0.0), (15000.0, -8000.0)]
    return given.coordinate_operation.method_name == wanted.coordinate_operation.method_name and all(
        numpy.hypot(*numpy.subtract(way.transform(*place), place)) <= 1e-3 for place in places
    )


def check_values(name, raster, plan_path, program, faults):
    """Some cells, evenly spread, against the head at their middles."""
    values = raster.read(1)
    cells = numpy.linspace(0, values.size - 1, CELLS).astype(int)
    cells = [divmod(int(cell), raster.width) for cell in cells]
    middles = [raster.xy(row, column) for row, column in cells]
    points = "".join(f"{float(x)!r},{float(y)!r}\n" for x, y in middles)
    output = subprocess.run(
        [program, "heads", plan_path, "--points", "-", "--quiet"], input=points, capture_output=True, text=True, check=True
    ).stdout
    known = 0
    for cell, row in zip(cells, csv.DictReader(io.StringIO(output)), strict=True):
        value, exact = float(values[cell]), float(row[name] or "nan")
        if numpy.isnan(exact) or numpy.isnan(value):
            faults.expect(numpy.isnan(exact) and numpy.isnan(value), f"{name}.tif: cell {cell} is {value}, not {exact}")
            continue
        known += 1
        # Middles and nodes differ by the rounding of coordinates.
        slack = FLOAT32 * abs(exact) + 1e-7
        faults.expect(abs(value - exact) <= slack, f"{name}.tif: cell {cell} is {value}, not {exact}")
    faults.expect(known > CELLS / 10, f"{name}.tif: only {known} of {CELLS} cells hold data")
