"""Styles: well-formed, in the order of elements that SLD 1.0.0 asks for, and of
properties that the layer has.

The order is that of OGC 02-070, annex A, from memory.
"""

import re
import xml.etree.ElementTree as tree

SLD, OGC = "{http://www.opengis.net/sld}", "{http://www.opengis.net/ogc}"
SYMBOLIZERS = {"LineSymbolizer", "PolygonSymbolizer", "PointSymbolizer", "TextSymbolizer", "RasterSymbolizer"}
HEAD = ["Name", "Title", "Abstract"]
# Children in their order; those within one inner tuple may mix.
ORDER = {
    "StyledLayerDescriptor": [*HEAD, ("NamedLayer", "UserLayer")],
    "NamedLayer": ["Name", "LayerFeatureConstraints", ("NamedStyle", "UserStyle")],
    "UserStyle": [*HEAD, "IsDefault", "FeatureTypeStyle"],
    "FeatureTypeStyle": [*HEAD, "FeatureTypeName", "SemanticTypeIdentifier", "Rule"],
    "Rule": [*HEAD, "LegendGraphic", ("Filter", "ElseFilter"), "MinScaleDenominator", "MaxScaleDenominator", tuple(SYMBOLIZERS)],
    "LineSymbolizer": ["Geometry", "Stroke"],
    "PolygonSymbolizer": ["Geometry", "Fill", "Stroke"],
    "PointSymbolizer": ["Geometry", "Graphic"],
    "TextSymbolizer": ["Geometry", "Label", "Font", "LabelPlacement", "Halo", "Fill"],
    "RasterSymbolizer": [
        "Geometry", "Opacity", "ChannelSelection", "OverlapBehavior", "ColorMap", "ContrastEnhancement", "ShadedRelief",
        "ImageOutline",
    ],
    "Graphic": [("ExternalGraphic", "Mark"), "Opacity", "Size", "Rotation"],
    "Mark": ["WellKnownName", "Fill", "Stroke"],
    "Fill": ["GraphicFill", "CssParameter"],
    "Stroke": [("GraphicFill", "GraphicStroke"), "CssParameter"],
    "GraphicFill": ["Graphic"],
    "LabelPlacement": [("PointPlacement", "LinePlacement")],
    "PointPlacement": ["AnchorPoint", "Displacement", "Rotation"],
    "AnchorPoint": ["AnchorPointX", "AnchorPointY"],
    "Displacement": ["DisplacementX", "DisplacementY"],
    "LinePlacement": ["PerpendicularOffset"],
    "Halo": ["Radius", "Fill"],
    "ColorMap": ["ColorMapEntry"],
    "Font": ["CssParameter"],
}
MARKS = {"square", "circle", "triangle", "star", "cross", "x"}


def check(path, properties, features, faults):
    """`properties` are the names that the layer has, `features` what it holds."""
    expect = lambda holds, what: faults.expect(holds, f"{path.name}: {what}")
    try:
        root = tree.parse(path).getroot()
    except tree.ParseError as error:
        faults.append(f"{path.name}: not well-formed: {error}")
        return
    expect(root.tag == SLD + "StyledLayerDescriptor" and root.get("version") == "1.0.0", "no SLD 1.0.0")
    expect(root.findtext(f"{SLD}NamedLayer/{SLD}Name") == path.stem, "names another layer")
    for element in root.iter():
        if element.tag.startswith(SLD):
            check_order(element, expect)
    for rule in root.iter(SLD + "Rule"):
        expect(any(child.tag.removeprefix(SLD) in SYMBOLIZERS for child in rule), "a rule draws nothing")
    for name in root.iter(OGC + "PropertyName"):
        expect(name.text in properties, f"the layer has no {name.text}")
    for mark in root.iter(SLD + "WellKnownName"):
        expect(mark.text in MARKS, f"no mark is called {mark.text}")
    check_classes(root, expect)
    check_labels(root, features, expect)
    for feature in features:
        drawn = sum(fits(rule, feature["properties"]) for rule in root.iter(SLD + "Rule"))
        expect(drawn > 0, f"no rule draws {feature['properties']}")
        if path.stem == "drawdown_bands":
            # Its own band's rule, and the one that draws every limit.
            expect(drawn == 2, f"{drawn} rules draw {feature['properties']}")


def check_labels(root, features, expect):
    """A label is a name or a round number: a GIS shows all digits of others."""
    names = {name.text for name in root.iterfind(f".//{SLD}Label/{OGC}PropertyName")}
    for name in names:
        for value in (feature["properties"][name] for feature in features):
            expect(isinstance(value, str) or len(f"{value}") <= 9, f"a label of {value}")


def fits(rule, properties):
    """Whether a rule draws a feature, as OGC 02-059 (Filter 1.0.0) has it."""
    condition = rule.find(OGC + "Filter")
    return condition is None or holds(condition[0], properties)


def holds(condition, properties):
    name = condition.tag.removeprefix(OGC)
    if name == "And":
        return all(holds(part, properties) for part in condition)
    value, literal = properties[condition[0].text], condition[1].text
    if name == "PropertyIsLike":
        pattern = "".join({"*": ".*", "?": "."}.get(letter, re.escape(letter)) for letter in literal)
        return re.fullmatch(pattern, value, re.DOTALL) is not None
    if name == "PropertyIsEqualTo":
        return str(value) == literal
    compare = {
        "PropertyIsLessThan": float.__lt__,
        "PropertyIsGreaterThan": float.__gt__,
        "PropertyIsGreaterThanOrEqualTo": float.__ge__,
    }[name]
    return compare(float(value), float(literal))


def check_order(element, expect):
    name = element.tag.removeprefix(SLD)
    order = ORDER.get(name)
    if order is None:
        expect(not any(child.tag.startswith(SLD) for child in element), f"{name} is not known")
        return
    places = {child: place for place, children in enumerate(order)
              for child in (children if isinstance(children, tuple) else (children,))}
    found = [places.get(child.tag.split("}")[1]) for child in element]
    expect(None not in found and found == sorted(found), f"{name} holds {[child.tag for child in element]}")
    expect(element.text is None or not element.text.strip(), f"text in {name}: {element.text!r}")


def check_classes(root, expect):
    """Levels rise, and colours are colours."""
    quantities = [float(entry.get("quantity")) for entry in root.iter(SLD + "ColorMapEntry")]
    expect(quantities == sorted(set(quantities)), f"quantities {quantities}")
    colours = [entry.get("color") for entry in root.iter(SLD + "ColorMapEntry")]
    colours += [p.text for p in root.iter(SLD + "CssParameter") if p.get("name") in ("fill", "stroke")]
    for colour in colours:
        expect(len(colour) == 7 and colour[0] == "#" and int(colour[1:], 16) >= 0, f"colour {colour}")
    for words in root.itertext():
        leftover = {"FROM", "TO", "COLOUR", "LABEL", "UNIT", "QUANTITY"} & set(words.split())
        expect(not leftover, f"{leftover} was not filled in")
