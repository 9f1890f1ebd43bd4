#!/usr/bin/python3
"""Carries the rows of nbc2020_fire.csv and nbc2020_stc.csv over into catalogs/fire.json and catalogs/published.json.

usage: rows.py check ROOT   the catalogs hold exactly these rows (exit 1 and the first difference otherwise)
       rows.py write ROOT   replaces them; what else stands in the two files is kept

Only nominal sizes, notes and reading rules are applied; no figure is changed:
- 400 and 600 mm are 16 and 24 in (406.4, 609.6 mm); 64, 89, 92, 152 mm studs are 63.5, 88.9, 92.1, 152.4 mm;
- "400 or 600 allowed" covers both. The fire table is carried without that note, so a fire row takes the note of its row in the
  STC table, or of its group when every row of the group that is carried has it;
- the load-bearing studs (0.84 to 1.52 mm) are 33 to 54 mil; 0.46 mm is 18 mil;
- a bracketed fire figure becomes a row of its own that asks for rock or slag fibre;
- a row without any fire figure (a hyphen: not assigned) has no minutes.
"""
import csv
import json
import os
import re
import sys

HERE = os.path.dirname(os.path.abspath(__file__))
TABLE = "National Building Code of Canada 2020, Table 9.10.3.1.-A"
BOARDS = {"15.9X": "typex-16", "12.7X": "typex-13", "12.7R": "gyp-13", "12.7OSB": "osb-13"}
DEPTH = {"64": 63.5, "89": 88.9, "92": 92.1, "152": 152.4}
SPACING = {"400": 406.4, "600": 609.6}
LAYOUT = {"staggered": "staggered", "double": "double"}
FIBRES = ["glass", "stone", "cellulose"]
BRACKET = re.compile(r"with rock or slag fibre filling the cavity \(>= ([0-9.]+) kg/m2[^)]*\): ([^;]*)")


def read(name):
    with open(os.path.join(HERE, name), newline="") as f:
        return list(csv.DictReader(f))


def side(leaf):
    out = []
    for part in leaf.split("+"):
        count, _, board = part.rpartition("x")
        out += [BOARDS[board]] * int(count or 1)
    return out


def group(row_id):
    return re.match(r"NBC-([WS]\d+)", row_id).group(1)


def says_both(row):
    return "; spacing: 400 or 600 allowed" in "; " + row["note"]


def says_both_channels(row):
    return "RC spacing 400 or 600 allowed" in row["note"]


class Spacings:
    """Which rows, and which whole groups, cover both spacings."""

    def __init__(self, stc):
        self.stc = {r["id"]: r for r in stc}
        self.groups = {}
        for r in stc:
            self.groups.setdefault(group(r["id"]), []).append(r)

    def both(self, row_id, says):
        if row_id in self.stc:
            return says(self.stc[row_id])
        rows = self.groups.get(group(row_id), [])
        return bool(rows) and all(says(r) for r in rows)


def framing(row):
    family = row["family"]
    steel = family.startswith("steel")
    layout = next((v for k, v in LAYOUT.items() if k in family), "single")
    out = {"material": "steel" if steel else "wood", "layout": layout, "depth_mm": DEPTH[row["stud_depth_mm"]]}
    if steel:
        bearing = row["steel_thickness_mm"] != "0.46"
        out["mil_min"] = 33 if bearing else 18
        out["mil_max"] = 54 if bearing else 18
    if row["gap_mm"]:
        out["gap_mm"] = float(row["gap_mm"])
    return out


def filled(row):
    total = float(row["fill_mm"])
    if total == 0:
        return {"fill": "none"}
    rows = 2 if "double" in row["family"] and total > 100 else 1
    out = {"fill": "required", "fill_kinds": FIBRES, "filled_rows": rows}
    if "staggered" in row["family"]:
        out["fill_thickness_mm"] = 88.9  # 89 mm on one side of the 140 mm plate is enough there
    return out


def words(row):
    mount = ", resilient channel" if row["mount"] != "none" else ""
    fill = ", fibre" if float(row["fill_mm"]) else ""
    return "%s + %s, %s %s mm%s%s" % (row["leaf_a"], row["leaf_b"], row["family"].split("-rc")[0],
                                      row["stud_depth_mm"], mount, fill)


def base(row, prefix):
    short = row["id"][4:]
    return {"id": prefix + row["id"], "name": short + ": " + words(row), "source": TABLE + ", row " + short}


def minutes(row):
    out = {}
    if row["frr_loadbearing_min"]:
        out["minutes_loadbearing"] = int(row["frr_loadbearing_min"])
    if row["frr_nonloadbearing_min"]:
        out["minutes_nonloadbearing"] = int(row["frr_nonloadbearing_min"])
    return out


def fire_note(row):
    parts = [p.strip() for p in BRACKET.sub("", row["note"]).split(";")]
    drop = ("bracket has no note tag in the file, read as the same note",)
    return "; ".join(p for p in parts if p and p not in drop)


def fire_record(row, spacings):
    out = base(row, "fire-")
    out["code"] = "nbc"
    out["side_a"], out["side_b"] = side(row["leaf_a"]), side(row["leaf_b"])
    out.update(framing(row))
    out.pop("mil_max", None)
    wide = spacings.both(row["id"], says_both)
    out["spacing_max_mm"] = SPACING["600"] if wide else SPACING[row["spacing_mm"]]
    out["mount"] = "none"
    if row["mount"] != "none":
        out["mount"] = "channel"
        wide = spacings.both(row["id"], says_both_channels)
        out["mount_spacing_max_mm"] = SPACING["600"] if wide else SPACING[row["mount_spacing_mm"]]
    out.update(filled(row))
    out.update(minutes(row))
    note = fire_note(row)
    if note:
        out["note"] = note
    return out


def bracket_record(row, record):
    found = BRACKET.search(row["note"])
    if not found:
        return None
    out = dict(record)
    out["id"] += "-rock"
    out["name"] += " of rock or slag"
    out["source"] += ", figure in brackets"
    out.update({"fill": "required", "fill_kinds": ["stone"], "fill_kg_m2": float(found.group(1))})
    out["filled_rows"] = 2 if "double" in row["family"] else 1
    out.pop("fill_thickness_mm", None)  # the note wants a full cavity
    for use, value in re.findall(r"(N?LB) (\d+)", found.group(2)):
        out["minutes_loadbearing" if use == "LB" else "minutes_nonloadbearing"] = int(value)
    return out


def fire_records():
    spacings = Spacings(read("nbc2020_stc.csv"))
    out = []
    for row in read("nbc2020_fire.csv"):
        record = fire_record(row, spacings)
        out.append(record)
        extra = bracket_record(row, record)
        if extra:
            out.append(extra)
    return out


def published_record(row):
    assert row["metric"] == "STC" and row["mount_side"] in ("", "a")
    out = base(row, "")
    out["side_a"], out["side_b"] = side(row["leaf_a"]), side(row["leaf_b"])
    out.update(framing(row))
    one = SPACING[row["spacing_mm"]]
    out["spacing_min_mm"] = one
    out["spacing_max_mm"] = SPACING["600"] if says_both(row) else one
    out["mount"] = "none"
    if row["mount"] != "none":
        out["mount"] = "channel"
        one = SPACING[row["mount_spacing_mm"]]
        out["mount_spacing_min_mm"] = one
        out["mount_spacing_max_mm"] = SPACING["600"] if says_both_channels(row) else one
    out.update(filled(row))
    out["stc"] = int(row["rating"])
    out["stc_sd"] = 1.0
    if row["note"]:
        out["note"] = row["note"]
    return out


def published_records():
    return [published_record(r) for r in read("nbc2020_stc.csv")]


def load(path):
    with open(path, encoding="utf-8") as f:
        return json.load(f)


def ours(record):
    """Whether a record of a catalog is one that this script answers for."""
    return record["id"].startswith(("fire-NBC-", "NBC-"))


def dump(value):
    return json.dumps(value, ensure_ascii=False)


def store(path, document, records):
    kept = [r for r in document["records"] if not ours(r)]
    lines = ["{"]
    for key, value in document.items():
        if key == "records":
            continue
        if isinstance(value, dict):
            inside = ",\n".join("    %s: %s" % (dump(k), membranes(v) if k == "membranes" else dump(v))
                                for k, v in value.items())
            lines.append("  %s: {\n%s\n  }," % (dump(key), inside))
        else:
            lines.append("  %s: %s," % (dump(key), dump(value)))
    lines.append('  "records": [')
    lines.append(",\n".join("    " + dump(r) for r in kept + records))
    lines += ["  ]", "}", ""]
    with open(path, "w", encoding="utf-8") as f:
        f.write("\n".join(lines))


def membranes(rows):
    return "[\n" + ",\n".join("      " + dump(r) for r in rows) + "\n    ]"


def differs(path, document, records):
    have = [r for r in document["records"] if ours(r)]
    if len(have) != len(records):
        return "%s: %d carried rows, expected %d" % (path, len(have), len(records))
    for got, want in zip(have, records):
        if got != want:
            return "%s: %s differs from the table:\n  has  %s\n  want %s" % (path, want["id"], dump(got), dump(want))
    return None


def main(argv):
    if len(argv) != 3 or argv[1] not in ("check", "write"):
        sys.stderr.write(__doc__)
        return 2
    failed = 0
    for name, make in (("fire.json", fire_records), ("published.json", published_records)):
        path = os.path.join(argv[2], "catalogs", name)
        document = load(path)
        if argv[1] == "write":
            store(path, document, make())
            continue
        difference = differs(path, document, make())
        if difference:
            sys.stderr.write(difference + "\n")
            failed = 1
    return failed


if __name__ == "__main__":
    sys.exit(main(sys.argv))
