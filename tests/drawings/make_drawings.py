"""Makes the drawings of this folder with independent programs.

    python3 -m venv somewhere && somewhere/bin/pip install ezdxf==1.4.5 svgwrite==1.4.3 matplotlib==3.11.2 shapely==2.2.0
    somewhere/bin/python make_drawings.py

All show the rail of cli/demo/facade-rail.section.toml, whose corners, roundings and hole are repeated
here as numbers; tangent points of the roundings are computed by this script, not by the program under
test. The rail is invented.
"""

import math
from pathlib import Path

import ezdxf
import matplotlib
import shapely
import svgwrite
from ezdxf import units
from ezdxf.math import Vec2

matplotlib.use("svg")
matplotlib.rcParams["svg.hashsalt"] = "rail"

HERE = Path(__file__).parent

# (x, y, rounding radius); the side that arrives at the corner marked True is half a turn over (62, 80).
CORNERS = [
    (0, 0, 3, False),
    (60, 0, 3, False),
    (60, 18, 3, False),
    (34, 18, 6, False),
    (34, 70, 6, False),
    (52, 70, 0, False),
    (52, 90, 0, True),
    (14, 90, 3, False),
    (14, 30, 5, False),
    (0, 30, 3, False),
]
HOLE = (24, 48, 4.5)


def outline():
    """Sides as (start, end, bulge): bulge = tan(sweep / 4), positive anticlockwise."""
    n = len(CORNERS)
    arrive, leave, bulge = [], [], []
    for i, (x, y, r, _) in enumerate(CORNERS):
        p = Vec2(x, y)
        if r == 0:
            arrive.append(p), leave.append(p), bulge.append(0.0)
            continue
        before = (Vec2(CORNERS[i - 1][:2]) - p).normalize()
        after = (Vec2(CORNERS[(i + 1) % n][:2]) - p).normalize()
        angle = math.acos(before.dot(after))
        cut = r / math.tan(angle / 2)
        arrive.append(p + before * cut)
        leave.append(p + after * cut)
        turn = math.pi - angle
        left = before.det(after) < 0
        bulge.append(math.tan(turn / 4) * (1 if left else -1))
    sides = []
    for i in range(n):
        j = (i + 1) % n
        sides.append((leave[i], arrive[j], 1.0 if CORNERS[j][3] else 0.0))
        if bulge[j]:
            sides.append((arrive[j], leave[j], bulge[j]))
    return sides


def arc_of(start, end, bulge):
    """Centre, radius, first and last angle in degrees, anticlockwise."""
    return ezdxf.math.bulge_to_arc(start, end, bulge)


def new(insunits):
    doc = ezdxf.new("R2010")
    doc.units = insunits
    return doc


def add_loose(space, layer):
    """Lines and arcs in no good order, some of them backwards, one line twice."""
    sides = outline()
    for k, i in enumerate((i * 7) % len(sides) for i in range(len(sides))):
        start, end, bulge = sides[i]
        if bulge == 0:
            if k % 2:
                start, end = end, start
            space.add_line(start, end, dxfattribs={"layer": layer})
        else:
            centre, first, last, radius = arc_of(start, end, bulge)
            space.add_arc(
                centre,
                radius,
                math.degrees(first),
                math.degrees(last),
                dxfattribs={"layer": layer},
            )
    x, y, r = HOLE
    space.add_circle((x, y), r, dxfattribs={"layer": layer})


def dxf_loose():
    doc = new(units.MM)
    space = doc.modelspace()
    add_loose(space, "RAIL")
    # Drawn twice, and once again over a part of it.
    start, end, _ = next(side for side in outline() if side[2] == 0)
    space.add_line(start, end, dxfattribs={"layer": "RAIL"})
    space.add_line(start.lerp(end, 0.2), end, dxfattribs={"layer": "RAIL"})
    space.add_text("FACADE RAIL (INVENTED)", dxfattribs={"layer": "TEXT"}).set_placement((0, -20))
    space.add_linear_dim(base=(0, -10), p1=(0, 0), p2=(60, 0), dxfattribs={"layer": "TEXT"}).render()
    space.add_hatch(color=2, dxfattribs={"layer": "TEXT"}).paths.add_polyline_path(
        [(0, 0), (60, 0), (60, 18)], is_closed=True
    )
    space.add_point((0, 0), dxfattribs={"layer": "TEXT"})
    doc.saveas(HERE / "rail-lines.dxf")


def dxf_polyline():
    doc = new(units.MM)
    space = doc.modelspace()
    points = [(s.x, s.y, b) for s, _, b in outline()]
    space.add_lwpolyline(points, format="xyb", close=True)
    x, y, r = HOLE
    space.add_lwpolyline([(x - r, y, 1), (x + r, y, 1)], format="xyb", close=True)
    doc.saveas(HERE / "rail-lwpolyline.dxf")


def dxf_r12():
    doc = ezdxf.new("R12")
    space = doc.modelspace()
    points = [(s.x, s.y, b) for s, _, b in outline()]
    space.add_polyline2d(points, format="xyb", close=True)
    x, y, r = HOLE
    space.add_circle((x, y), r)
    doc.saveas(HERE / "rail-polyline-r12.dxf")


def dxf_insert():
    """In inches: a block in mm that holds the rail mirrored, inserted mirrored, turned and scaled."""
    doc = new(units.IN)
    block = doc.blocks.new("RAIL-MIRRORED", base_point=(-5, 7))
    for start, end, bulge in outline():
        start, end = Vec2(-start.x, start.y), Vec2(-end.x, end.y)
        if bulge == 0:
            block.add_line(start, end)
        else:
            centre, first, last, radius = arc_of(start, end, -bulge)
            block.add_arc(centre, radius, math.degrees(first), math.degrees(last))
    x, y, r = HOLE
    block.add_circle((-x, y), r)
    outer = doc.blocks.new("TURNED")
    outer.add_blockref("RAIL-MIRRORED", (0, 0), dxfattribs={"rotation": 90})
    # The block's base point (-5, 7) is at (5, 7) of the rail.
    doc.modelspace().add_blockref(
        "TURNED",
        (5 / 25.4, 7 / 25.4),
        dxfattribs={"xscale": 1 / 25.4, "yscale": -1 / 25.4, "rotation": 270, "layer": "PLACED"},
    )
    doc.saveas(HERE / "rail-insert-inches.dxf")


def dxf_gap():
    """As rail-lines, one end drawn 0.004 short and another 0.8 short."""
    for name, short in [("rail-small-gap", 0.004), ("rail-open", 0.8)]:
        doc = new(units.MM)
        space = doc.modelspace()
        for i, (start, end, bulge) in enumerate(outline()):
            if bulge == 0:
                if i == 0:
                    end = end - (end - start).normalize() * short
                space.add_line(start, end)
            else:
                centre, first, last, radius = arc_of(start, end, bulge)
                space.add_arc(centre, radius, math.degrees(first), math.degrees(last))
        doc.saveas(HERE / f"{name}.dxf")


def dxf_curves():
    """An ellipse with semi-axes 2 (x) and 1 (y) and a spline-made disc of radius 1 beside it."""
    doc = new(units.CM)
    space = doc.modelspace()
    space.add_ellipse((0, 0), major_axis=(2, 0), ratio=0.5, dxfattribs={"layer": "ELLIPSE"})
    half = math.sqrt(0.5)
    # The circle as a rational quadratic spline of nine control points.
    ring = [(1, 0), (1, 1), (0, 1), (-1, 1), (-1, 0), (-1, -1), (0, -1), (1, -1), (1, 0)]
    space.add_rational_spline(
        [(5 + x, y) for x, y in ring],
        weights=[1, half, 1, half, 1, half, 1, half, 1],
        degree=2,
        knots=[0, 0, 0, 1, 1, 2, 2, 3, 3, 4, 4, 4],
        dxfattribs={"layer": "SPLINE"},
    )
    # A disc that an uneven scale makes the same ellipse.
    block = doc.blocks.new("DISC")
    block.add_circle((0, 0), 1)
    space.add_blockref("DISC", (10, 0), dxfattribs={"xscale": 2, "yscale": 1, "layer": "SCALED"})
    doc.saveas(HERE / "curves.dxf")


def path_data():
    """In the section's axes; a group mirrors it. Sweep 1 turns from x to y, here anticlockwise."""
    sides = outline()
    text = f"M {sides[0][0].x:.10g} {sides[0][0].y:.10g}"
    for start, end, bulge in sides:
        if bulge == 0:
            text += f" L {end.x:.10g} {end.y:.10g}"
        else:
            _, _, _, radius = arc_of(start, end, bulge)
            sweep = 1 if bulge > 0 else 0
            text += f" A {radius:.10g} {radius:.10g} 0 0 {sweep} {end.x:.10g} {end.y:.10g}"
    return text + " Z"


def svg_arcs():
    """A page of 100 mm by 110 mm, user units of 0.5 mm by the viewBox, moved and mirrored by groups."""
    drawing = svgwrite.Drawing(
        str(HERE / "rail-arcs.svg"), size=("100mm", "110mm"), viewBox="0 0 200 220", debug=False
    )
    drawing.add(drawing.rect((0, 0), (200, 220), fill="white"))
    drawing.add(drawing.text("facade rail (invented)", insert=(10, 210)))
    group = drawing.g(transform="translate(0 220) scale(2 -2)", fill="none", stroke="black")
    group.add(drawing.path(path_data()))
    x, y, r = HOLE
    group.add(drawing.circle((x, y), r))
    drawing.add(group)
    drawing.save()


def svg_matplotlib():
    """One data unit is one mm; matplotlib writes points and arcs as cubics."""
    import matplotlib.pyplot as plt
    from matplotlib.patches import Circle, PathPatch
    from matplotlib.path import Path as Outline

    figure = plt.figure(figsize=(80 / 25.4, 110 / 25.4))
    axes = figure.add_axes((0, 0, 1, 1))
    axes.set_xlim(-10, 70)
    axes.set_ylim(-10, 100)
    axes.axis("off")
    sides = outline()
    points, codes = [sides[0][0]], [Outline.MOVETO]
    for start, end, bulge in sides:
        if bulge == 0:
            points.append(end)
            codes.append(Outline.LINETO)
            continue
        centre, first, last, radius = arc_of(start, end, bulge)
        if last < first:
            last += 2 * math.pi
        if bulge < 0:
            first, last = last, first
        pieces = max(1, math.ceil(abs(last - first) / (math.pi / 8) - 1e-9))
        step = (last - first) / pieces
        k = 4 / 3 * math.tan(step / 4)
        for piece in range(pieces):
            a = first + piece * step
            b = a + step
            at = lambda t: Vec2(math.cos(t), math.sin(t)) * radius + centre
            out = lambda t: Vec2(-math.sin(t), math.cos(t)) * radius * k
            points += [at(a) + out(a), at(b) - out(b), at(b)]
            codes += [Outline.CURVE4] * 3
    points.append(sides[0][0])
    codes.append(Outline.CLOSEPOLY)
    axes.add_patch(PathPatch(Outline([(p.x, p.y) for p in points], codes), fill=False))
    axes.add_patch(Circle(HOLE[:2], HOLE[2], fill=False))
    figure.savefig(HERE / "rail-matplotlib.svg", metadata={"Date": None})


def polygons():
    """A plate with two holes, and an island in one of them, by shapely."""
    plate = shapely.Polygon([(0, 0), (80, 0), (80, 50), (0, 50)])
    plate = plate.difference(shapely.Polygon([(5, 5), (35, 5), (35, 45), (5, 45)]))
    plate = plate.difference(shapely.Polygon([(45, 10), (75, 10), (75, 40)]))
    island = shapely.Polygon([(10, 10), (30, 10), (30, 40), (10, 40)])
    both = shapely.MultiPolygon([plate, island])
    (HERE / "plate.wkt").write_text(shapely.to_wkt(plate, rounding_precision=-1) + "\n")
    (HERE / "plate-and-island.wkt").write_text(shapely.to_wkt(both, rounding_precision=-1) + "\n")
    (HERE / "plate.geojson").write_text(shapely.to_geojson(plate) + "\n")
    collection = shapely.GeometryCollection([plate, shapely.Point(1, 1)])
    (HERE / "plate-collection.geojson").write_text(shapely.to_geojson(collection) + "\n")


if __name__ == "__main__":
    dxf_loose()
    dxf_polyline()
    dxf_r12()
    dxf_insert()
    dxf_gap()
    dxf_curves()
    svg_arcs()
    svg_matplotlib()
    polygons()
