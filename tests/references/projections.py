"""Grid coordinates of places in well-known projected systems, by PROJ.

Also for local grids (code 0): transverse Mercator around an origin, scale 1.
"""

import os

os.environ["PROJ_NETWORK"] = "OFF"

from pyproj import CRS, Transformer

COLUMNS = ["epsg", "origin_longitude", "origin_latitude", "longitude", "latitude", "x", "y"]
TOLERANCE = 1e-6

# Each with places spread over the area of use. The five-digit tail keeps a
# place from falling on a graticule line.
PLACES = {
    2263: [(-73.98513, 40.74871), (-72.10237, 41.03519), (-74.21947, 40.51023)],
    2955: [(-114.06587, 51.04473)],
    2154: [(2.29451, 48.85837), (-1.54927, 43.48319)],
    2193: [(174.77623, -41.28657), (168.66271, -45.03119)],
    3006: [(18.06859, 59.32939)],
    3031: [(166.66867, -77.84641)],
    3413: [(-51.72153, 64.18347)],
    3857: [(13.40493, 52.52013)],
    5174: [(126.97797, 37.56653)],
    5186: [(126.97797, 37.56653)],
    6350: [(-96.79703, 40.82583)],
    7856: [(151.20929, -33.86883)],
    22175: [(-60.63937, -32.94681)],
    25832: [(9.99371, 53.55107), (8.54169, 47.37687)],
    26910: [(-122.41941, 37.77493)],
    27700: [(-0.12757, 51.50739), (-4.25179, 55.86419)],
    28992: [(4.89519, 52.37019)],
    31983: [(-46.63329, -23.55051)],
    32633: [(15.00001, 48.00007), (12.03127, 83.51239), (17.97413, 0.50211)],
    32718: [(-77.04281, -12.04639), (-75.01987, -55.98117)],
    32601: [(-179.98213, 65.03417)],
}
LOCAL = {
    (13.4, 52.5): [(13.4, 52.5), (13.84127, 52.71293), (12.96001, 52.30117)],
    (-179.9, -17.0): [(179.95123, -17.05231)],
    (25.0, 69.5): [(29.01237, 70.41129)],
}


def rows():
    for code, places in PLACES.items():
        grid = Transformer.from_crs(
            4326, code, always_xy=True, allow_ballpark=False, only_best=False
        )
        for longitude, latitude in places:
            yield [code, "", "", longitude, latitude, *grid.transform(longitude, latitude)]
    for origin, places in LOCAL.items():
        crs = CRS.from_proj4(
            f"+proj=tmerc +lat_0={origin[1]} +lon_0={origin[0]} +k=1 +datum=WGS84 +units=m +type=crs"
        )
        grid = Transformer.from_crs(4326, crs, always_xy=True)
        for longitude, latitude in places:
            yield [0, *origin, longitude, latitude, *grid.transform(longitude, latitude)]
