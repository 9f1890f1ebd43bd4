"""Drawings of seeded walls, read back by a strict parser and measured: what a drawing must show is worked out here from the
wall line and the catalogs, not by the program. Usage: drawings.py SOURCE BUILD FOLDER"""
import json
import re
import sys
import unicodedata
import xml.etree.ElementTree as ElementTree

SVG = "{http://www.w3.org/2000/svg}"
ELEMENTS = {"svg", "title", "desc", "style", "defs", "pattern", "g", "rect", "circle", "line", "polyline", "polygon", "path",
            "text", "tspan"}
# Coordinates are written to 0.01, so a difference of two is good to 0.01 and a ratio of lengths above 100 to 1e-4.
ROUNDING = 0.011
# Heights of letters over and under the baseline as shares of the size: those of DejaVu Sans, rounded up.
ABOVE, BELOW = 0.78, 0.24
# Widths of letters by kind, in shares of the size: the widest of each kind in a wide sans serif.
KINDS = [("ijl'|", 0.3), (" .,:;fI-/", 0.38), ("()[]rt!", 0.43), ("sz", 0.53), ("acekvxyJLT?", 0.64), ("mwMW@%&", 1.0)]


def fail(message):
    raise AssertionError(message)


# ---- the catalogs and the wall line, read anew ----

class Catalog:
    def __init__(self, source):
        def records(name):
            with open(f"{source}/catalogs/{name}.json", encoding="utf-8") as file:
                return {record["id"]: record for record in json.load(file)["records"]}
        self.boards, self.frames = records("boards"), records("frames")
        self.fills, self.mounts = records("fills"), records("mounts")


EXACT = {305: 304.8, 406: 406.4, 610: 609.6}


def face_of(text):
    layers = []
    for item in text.split("+"):
        count, _, name = item.strip().rpartition("*")
        layers += [name] * int(count or 1)
    return layers


class Wall:
    """Millimetres; layers in the order from room A to room B."""

    def __init__(self, catalog, line):
        self.catalog, parts = catalog, [part.strip() for part in line.split("|")]
        core = next(i for i, part in enumerate(parts) if re.split(r"[@,]", part)[0].strip() in catalog.frames)
        self.layers = face_of(parts[0])
        self.leaf = [list(self.layers), face_of(parts[-1])[::-1]]
        self.mounts, sheath = [None, None], [[], []]
        for side, between in enumerate((parts[1:core], parts[core + 1:-1])):
            for part in between:
                if part.startswith("on "):
                    sheath[side] = face_of(part[3:])
                else:
                    name, _, spacing = part.partition("@")
                    self.mounts[side] = (name, spacing)
        self.read_core(parts[core])
        self.sheath = [sheath[0], sheath[1][::-1]]
        self.order = self.leaf[0] + self.sheath[0] + self.inner[0][::-1] + self.inner[1] + self.sheath[1] + self.leaf[1]

    def read_core(self, text):
        items = [item.strip() for item in text.split(",")]
        name, spacing, gap = re.fullmatch(r"([\w-]+)@(\d+)(?:~(\d+))?", items[0]).groups()
        self.frame, self.spacing = self.catalog.frames[name], EXACT[int(spacing)]
        self.double = self.frame["layout"] == "double"
        self.gap = int(gap or 25) if self.double else 0
        self.fills, self.inner = [], [[], []]
        for item in items[1:]:
            if item.startswith("inner-"):
                self.inner["ab".index(item[6])] = face_of(item[8:])
            else:
                self.fills.append(None if item == "-" else self.catalog.fills[item])
        self.fills += [None] * ((2 if self.double else 1) - len(self.fills))

    def thickness(self):
        stack = sum(self.catalog.boards[name]["thickness_mm"] for side in (0, 1) for name in self.leaf[side] + self.sheath[side])
        stack += sum(self.catalog.mounts[mount[0]]["depth_mm"] for mount in self.mounts if mount)
        return stack + self.frame["row_depth_mm"] * (2 if self.double else 1) + self.gap

    def studs(self, length):
        """How many studs stand whole in `length` of one row: one at the end, then one a spacing; staggered walls have such a line
        for each face, that of B half a spacing off but for its end."""
        half = self.frame.get("flange_mm", self.frame["stud_width_mm"] if "stud_width_mm" in self.frame else 0) / 2
        lines = [0.0, 0.5] if self.frame["layout"] == "staggered" else [0.0]
        count = 0
        for off in lines:
            count += 1
            step = 1
            while (step - off) * self.spacing + half <= length:
                count += 1
                step += 1
        return count * (2 if self.double else 1)

    def names(self):
        names = [self.catalog.boards[name]["name"] for name in self.order]
        names += [fill["name"] for fill in self.fills if fill]
        return names + [self.catalog.mounts[mount[0]]["name"] for mount in self.mounts if mount]


def thickness_words(mm, units):
    if units == "si":
        return f"{mm:.1f} mm"
    sixteenths = int(mm / 25.4 * 16 + 0.5)
    whole, part, divisor = sixteenths // 16, sixteenths % 16, 16
    while part and part % 2 == 0:
        part, divisor = part // 2, divisor // 2
    return (f"{whole}-{part}/{divisor}" if whole and part else f"{part}/{divisor}" if part else f"{whole}") + " in"


# ---- the drawing ----

def width_of(text, size, bold):
    """A coarse upper estimate, apart from the program's table."""
    ems = 0.0
    for character in text:
        if unicodedata.combining(character) or unicodedata.category(character) == "Cf":
            continue
        kind = next((width for letters, width in KINDS if character in letters), None)
        if kind or unicodedata.east_asian_width(character) in "WF":
            ems += kind or 1.0
        elif character.isupper():
            ems += 0.79
        else:
            ems += 0.64
    return ems * size * (1.08 if bold else 1)


class Drawing:
    def __init__(self, path):
        with open(path, "rb") as file:
            self.root = ElementTree.fromstring(file.read().decode("utf-8"))
        self.parent = {child: parent for parent in self.root.iter() for child in parent}
        self.box = [float(x) for x in self.root.get("viewBox").split()]
        style = self.root.find(SVG + "style").text
        self.sizes = dict(re.findall(r"\.cut (?:\.)?([\w-]+)\{[^}]*?font-size:([\d.]+)px", style))
        self.sizes.update({"small " + k: v for k, v in re.findall(r"\.cut-small \.([\w-]+)\{font-size:([\d.]+)px", style)})
        self.small = "cut-small" in self.root.get("class")

    def find(self, name, css_class, within=None):
        top = self.root if within is None else within
        return [e for e in top.iter(SVG + name) if css_class is None or e.get("class") == css_class]

    def group(self, css_class):
        return self.find("g", css_class)

    def size(self, element):
        css_class = element.get("class") or "text"
        small = self.sizes.get("small " + css_class) if self.small else None
        return float(small or self.sizes.get(css_class) or self.sizes["text"])

    def text_boxes(self):
        boxes = []
        for element in self.root.iter(SVG + "text"):
            size, words = self.size(element), "".join(element.itertext())
            bold = element.get("class") in ("cut-head", "cut-title")
            width = width_of(words, size, bold)
            if element.get("class") == "cut-side": # its name is bold
                width = width_of(words[:6], size, True) + width_of(words[6:], size, False)
            x, y = float(element.get("x")), float(element.get("y"))
            left = {"middle": x - width / 2, "end": x - width}.get(element.get("text-anchor"), x)
            box = (left, y - ABOVE * size, left + width, y + BELOW * size)
            turn = element.get("transform")
            if turn: # upright, reading up
                if not turn.startswith("rotate(-90 "):
                    fail(f"a text is turned by {turn}")
                box = (x - ABOVE * size, y - width / 2, x + BELOW * size, y + width / 2)
            boxes.append((box, words))
        return boxes


def overlap(a, b):
    return a[0] < b[2] - ROUNDING and b[0] < a[2] - ROUNDING and a[1] < b[3] - ROUNDING and b[1] < a[3] - ROUNDING


def check_form(drawing):
    ids = set()
    for element in drawing.root.iter():
        if element.tag.removeprefix(SVG) not in ELEMENTS or not element.tag.startswith(SVG):
            fail(f"element {element.tag}")
        for name, value in element.attrib.items():
            if name.lower().startswith("on") or "href" in name:
                fail(f"attribute {name}")
        if element.get("id"):
            if element.get("id") in ids:
                fail(f"id {element.get('id')} twice")
            ids.add(element.get("id"))
    for element in drawing.root.iter():
        for value in element.attrib.values():
            for wanted in re.findall(r"url\(#([^)]*)\)", value):
                if wanted not in ids:
                    fail(f"no id {wanted}")
    for wanted in drawing.root.get("aria-labelledby").split():
        if wanted not in ids:
            fail(f"no id {wanted}")
    for text in drawing.root.iter(SVG + "text"):
        if "\u202e" in "".join(text.itertext()):
            fail("a character that turns the text around")


def bodies(drawing):
    """The wall as drawn: from face to face, in the plan and in the cut at the floor."""
    found = []
    for name in ("cut-plan", "cut-floor"):
        for group in drawing.group(name):
            lines = drawing.find("line", "cut-face", group)
            end = [[float(line.get(k)) for k in ("x1", "y1", "x2", "y2")] for line in lines]
            faces = end[-2:]
            xs = [x for face in faces for x in (face[0], face[2])]
            ys = [y for face in faces for y in (face[1], face[3])]
            found.append((min(xs), min(ys), max(xs), max(ys)))
    return found


def check_labels(drawing):
    boxes = drawing.text_boxes()
    _, _, width, height = drawing.box
    for box, words in boxes:
        if box[0] < 0 or box[1] < 0 or box[2] > width or box[3] > height:
            fail(f"out of the picture: {words[:60]!r} {box} of {width} x {height}")
        for body in bodies(drawing):
            if overlap(box, body):
                fail(f"on the wall: {words[:60]!r}")
    for i, (a, words) in enumerate(boxes):
        for b, others in boxes[:i]:
            if overlap(a, b):
                fail(f"overlap: {words[:60]!r} and {others[:60]!r}")
    return len(boxes)


def cross(a, b):
    def side(p, q, r):
        return (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0])
    return side(*a, b[0]) * side(*a, b[1]) < -1e-9 and side(*b, a[0]) * side(*b, a[1]) < -1e-9


def check_leaders(drawing):
    """No leader crosses another, and none crosses words."""
    paths = []
    for element in drawing.find("polyline", "cut-leader"):
        numbers = [float(x) for x in element.get("points").split()]
        points = list(zip(numbers[::2], numbers[1::2]))
        paths.append(list(zip(points, points[1:])))
    for i, path in enumerate(paths):
        for other in paths[:i]:
            if any(cross(a, b) for a in path for b in other):
                fail("leaders cross")
        for box, words in drawing.text_boxes():
            corners = [(box[0], box[1]), (box[2], box[1]), (box[2], box[3]), (box[0], box[3])]
            edges = list(zip(corners, corners[1:] + corners[:1]))
            if any(cross(piece, edge) for piece in path for edge in edges):
                fail(f"a leader crosses {words[:60]!r}")


def scale_of(drawing, wall):
    """Units a millimetre, from where the studs' centre line is: one spacing from the abutting structure."""
    line = drawing.find("line", "cut-centre")[0]
    structure = [l for l in drawing.find("line", "cut-face", drawing.group("cut-plan")[0])][0]
    return (float(line.get("x1")) - float(structure.get("x1"))) / wall.spacing


def check_size(drawing, wall, units):
    scale, body = scale_of(drawing, wall), bodies(drawing)[0]
    drawn = body[3] - body[1]
    if abs(drawn - wall.thickness() * scale) > ROUNDING + drawn * 1e-4:
        fail(f"drawn {drawn / scale:.2f} mm thick, is {wall.thickness():.2f}")
    texts = ["".join(t.itertext()) for t in drawing.root.iter(SVG + "text")]
    if thickness_words(wall.thickness(), units) not in texts:
        fail(f"no dimension {thickness_words(wall.thickness(), units)}")
    spacing = f"{round(wall.spacing)} mm" if units == "si" else f"{round(wall.spacing / 25.4)} in"
    if not any(t.startswith(spacing + " on centre") for t in texts):
        fail(f"no dimension {spacing}")
    return scale


def check_layers(drawing, wall, scale):
    """Every layer, as thick as it is, in order from A to B, none on another."""
    plan, found = drawing.group("cut-plan")[0], []
    for rect in plan.iter(SVG + "rect"):
        if rect.get("class") in ("cut-layer", "cut-limp", "cut-damping"):
            found.append((float(rect.get("y")), float(rect.get("height"))))
    if len(found) != len(wall.order):
        fail(f"{len(found)} layers drawn, {len(wall.order)} there")
    at = bodies(drawing)[0][1]
    for (y, height), name in zip(found, wall.order):
        real = wall.catalog.boards[name]["thickness_mm"] * scale
        if abs(height - real) > ROUNDING:
            fail(f"{name} is drawn {height / scale:.2f} mm thick")
        if y < at - 2 * ROUNDING:
            fail(f"{name} lies on what comes before")
        at = y + height
    if at > bodies(drawing)[0][3] + ROUNDING:
        fail("layers beyond the face")


def check_studs(drawing, wall, scale):
    groups = drawing.group("cut-studs")
    if len(groups) != (2 if wall.double else 1):
        fail(f"{len(groups)} rows")
    wood = wall.frame["material"] == "wood"
    studs = [e for g in groups for e in (drawing.find("rect", "cut-wood", g) if wood else drawing.find("polyline", "cut-steel", g))]
    body = bodies(drawing)[0]
    structure = float(drawing.find("line", "cut-face", drawing.group("cut-plan")[0])[0].get("x1"))
    wanted = wall.studs((body[2] - structure) / scale)
    if len(studs) != wanted:
        fail(f"{len(studs)} studs drawn, {wanted} stand there")
    for stud in studs if wood else []:
        if abs(float(stud.get("height")) - wall.frame["stud_depth_mm"] * scale) > ROUNDING:
            fail("a stud of the wrong depth")
    for shape in studs if not wood else []: # half a line inside the section on every side
        numbers = [float(x) for x in shape.get("points").split()]
        if abs(max(numbers[1::2]) - min(numbers[1::2]) + 2 - wall.frame["stud_depth_mm"] * scale) > ROUNDING:
            fail("a C of the wrong depth")
        if abs(max(numbers[::2]) - min(numbers[::2]) + 2 - wall.frame["flange_mm"] * scale) > ROUNDING:
            fail("a C of the wrong flange")


def check_fills(drawing, wall, scale):
    grounds = [r for r in drawing.group("cut-plan")[0].iter(SVG + "rect")
               if r.get("class") in ("cut-glass", "cut-stone", "cut-cellulose")]
    filled = [fill for fill in wall.fills if fill]
    if len(grounds) != len(filled):
        fail(f"{len(grounds)} fills drawn, {len(filled)} there")
    for rect, fill in zip(grounds, filled):
        thick = min(fill["thickness_mm"], wall.frame["row_depth_mm"])
        if rect.get("class") != "cut-" + fill["material"] or abs(float(rect.get("height")) - thick * scale) > ROUNDING:
            fail(f"{fill['id']} is drawn as {rect.get('class')}, {float(rect.get('height')) / scale:.1f} mm")


def check_mounts(drawing, wall):
    wanted = sum(1 for mount in wall.mounts if mount) * (1 if drawing.small else 2)
    if len(drawing.group("cut-mount")) != wanted:
        fail(f"{len(drawing.group('cut-mount'))} mounts drawn, {wanted} there")


def check_words(drawing, wall):
    """Every part is named in the description, and beside the full drawing."""
    described = drawing.root.find(SVG + "desc").text
    beside = " ".join("".join(t.itertext()) for t in drawing.root.iter(SVG + "text"))
    for name in wall.names():
        if name not in described:
            fail(f"the description leaves out {name}")
        if not drawing.small and name not in beside:
            fail(f"no label for {name}")


def main():
    source, _, folder = sys.argv[1:4]
    catalog, bad, count, labels = Catalog(source), 0, 0, 0
    kinds = set()
    with open(f"{folder}/walls.tsv", encoding="utf-8") as file:
        for row in file:
            name, units, _, line = row.rstrip("\n").split("\t")
            try:
                wall, drawing = Wall(catalog, line), Drawing(f"{folder}/{name}")
                check_form(drawing)
                labels += check_labels(drawing)
                check_leaders(drawing)
                scale = check_size(drawing, wall, units)
                check_layers(drawing, wall, scale)
                check_studs(drawing, wall, scale)
                check_fills(drawing, wall, scale)
                check_mounts(drawing, wall)
                check_words(drawing, wall)
                kinds.add((wall.frame["id"], next((m[0] for m in wall.mounts if m), None)))
            except (AssertionError, ElementTree.ParseError, UnicodeDecodeError) as error:
                print(f"{name} ({units}): {line}\n  {error}")
                bad += 1
            count += 1
    wanted = len(catalog.frames) * (len(catalog.mounts) + 1)
    if len(kinds) != wanted and not bad:
        print(f"{len(kinds)} of {wanted} pairs of frame and mount are drawn")
        bad += 1
    print(f"{count} drawings with {labels} labels, {bad} wrong")
    sys.exit(bad > 0)


main()
