"""The workbook of `plan` against its own --json: see check_plan_sheets.sh."""
import json, os, sys, tempfile
from sheetread import Units, check_book, run_with, same_with

source, build = sys.argv[1], sys.argv[2]
faults = 0
# JSON prints lengths and areas to a thousandth, money per area to a hundredth of a cent, dB to a hundredth.
PRINTED, NEAR, DB = 0.00051, 1e-4, 0.0051


def say(where, message):
    global faults
    faults += 1
    print("%s: %s" % (where, message))


def run(*words):
    return run_with(build, *words)


def same(where, what, found, wanted, slack=1e-6):
    same_with(say, where, what, found, wanted, slack)


def check_schedule(where, book, data, units):
    rows = book.rows("Schedule")
    total = rows.pop()
    planned = {a["wall"]: a for a in data["assignments"]}
    left_out = {u["wall"]: u for u in data["unplanned"]}
    # Without a plan JSON lists only the rows that no type fits.
    if {r["Wall"] for r in rows} != set(planned) | set(left_out) and planned:
        say(where, "other rows than JSON")
    for row in rows:
        at, a = "%s, %s" % (where, row["Wall"]), planned.get(row["Wall"])
        if a is None:
            same(at, "type", row["Type"], None)
            if left_out.get(row["Wall"], {"reason": "no plan was found"})["reason"] not in row["Note"]:
                say(at, "note %r" % row["Note"])
            continue
        same(at, "class", row["Class"], a["class"])
        same(at, "storey", row["Storey"], a["storey"])
        same(at, "walls", row["Walls"], a["count"])
        same(at, "type", row["Type"], a["type"])
        same(at, "mirrored", row["Mirrored"], "yes" if a["mirrored"] else "no")
        same(at, "line", row["Wall line as built, side A towards From"], a["line"])
        same(at, "margin", row["Margin, dB"], a["margin_db"], DB)
        if a["probability"] is not None:
            same(at, "sure", row["Sure of the target"], a["probability"], 0.0101)
        for head, keys in (("Cost at list prices, USD", ["cost_list"]), ("Cost by itself, USD", ["cost_walls"]),
                           ("Share of goods, USD", ["cost_goods"]), ("Cost, USD", ["cost_walls", "cost_goods"]),
                           ("Floor value, USD", ["floor_value"])):
            same(at, head, row[head], sum(a[k] for k in keys))
    for head, key in (("Cost by itself, USD", "walls"), ("Share of goods, USD", "goods"), ("Floor value, USD", "floor_value")):
        same(where, "total of " + head, total[head], data["parts"][key])


def check_money(at, row, cost, units, heads):
    for head, key in heads:
        same(at, head, row[head], cost[key])
    if cost.get("per_m2") is not None:
        same(at, "per area", row["Cost, " + units.per], cost["per_m2"] * units.area, NEAR)


def check_types(where, book, data, units):
    rows = book.rows("Types")
    total = rows.pop() if data["types"] else None
    if len(rows) != len(data["types"]):
        return say(where, "%d types, JSON has %d" % (len(rows), len(data["types"])))
    for row, t in zip(rows, data["types"]):
        at, used = "%s, type %s" % (where, t["name"]), t["used"]
        same(at, "name", row["Type"], t["name"])
        same(at, "mark", row["Mark of the drawings"], t["mark"])
        same(at, "line", row["Wall line"], t["line"])
        same(at, "walls", row["Walls"], used["walls"])
        same(at, "rows", row["Rows of the schedule"], used["rows"])
        same(at, "run", units.metres(row["Run, " + units.length]), used["run_m"], PRINTED)
        same(at, "area", units.m2(row["Area, " + units.length + "2"]), used["area_m2"], PRINTED)
        same(at, "floor", units.m2(row["Floor under it, " + units.length + "2"]), used["floor_m2"], PRINTED)
        same(at, "classes", row["Classes"], ", ".join(used["classes"]))
        for metric in ("STC", "Rw", "C", "Ctr", "OITC"):
            same(at, metric, row[metric], t["ratings"][metric])
        same(at, "thickness", units.mm(row["Thickness, " + units.thickness]), t["thickness_mm"], 0.051)
        same(at, "fire", row["Fire, min"], t["fire"]["minutes"])
        check_money(at, row, t["cost_of_use"], units,
                    [("Walls by themselves, USD", "walls"), ("Share of goods, USD", "goods"), ("Setup, USD", "setup"),
                     ("Floor value, USD", "floor_value"), ("Total, USD", "total")])
        more, without = row["The plan without it costs more by, USD"], t["without"]
        if without is None or without["costs_more"] is not None:
            same(at, "without", more, without and without["costs_more"])
        elif more not in ("no plan", "not settled"):
            say(at, "without: %r" % more)
    if total is not None:
        same(where, "total of types", total["Total, USD"], data["cost_total"])


def check_lists(where, book, data, units):
    for row, s in zip(book.rows("By storey"), data["storeys"]):
        at = "%s, storey %r" % (where, s["storey"])
        same(at, "name", row["Storey"], s["storey"])
        same(at, "walls", row["Walls"], s["walls"])
        same(at, "run", units.metres(row["Run, " + units.length]), s["run_m"], PRINTED)
        check_money(at, row, s["cost"], units,
                    [("Walls by themselves, USD", "walls"), ("Share of goods, USD", "goods"),
                     ("Floor value, USD", "floor_value"), ("Total without setup, USD", "total")])
    rows = book.rows("By section")
    if len(rows) != len(data["sections"]) + 2:
        say(where, "sections")
    for row, s in zip(rows, data["sections"]):
        same(where, "section", row["Section"], s["section"])
        same(where, s["section"] + " material", row["Material, USD"], s["material"])
        same(where, s["section"] + " labour", row["Labour, USD"], s["labour"])
    same(where, "markup", rows[-2]["Both, USD"], data["markup"])
    same(where, "walls and goods", rows[-1]["Both, USD"], data["parts"]["walls"] + data["parts"]["goods"])
    rows = book.rows("Takeoff")
    for row, b in zip(rows, data["buy"]):
        at = "%s, %s" % (where, b["item"])
        same(at, "item", row["Item"], b["item"])
        same(at, "buy", [row["Buy"], row["As"]], [b["buy"], b["buy_as"]])
        same(at, "amount", row["Amount, USD"], b["amount"])
        same(at, "price", row["Price"], b["rate"] * units.rate(b["unit"]), 1e-5)
        for head, key in (("Needed", "needed"), ("Bought", "bought"), ("From stock", "from_stock"), ("Left over", "surplus")):
            same(at, head, row[head] or 0, b[key] / units.rate(b["unit"]), 1e-4)
    same(where, "buy list", [len(rows) - 1, rows[-1]["Amount, USD"]], [len(data["buy"]), data["buy_total"]])


def check_why(where, book, data):
    rows = book.rows("How many types")
    if len(rows) != len(data["curve"]):
        say(where, "the curve")
    for row, c in zip(rows, data["curve"]):
        at = "%s, %d types" % (where, c["max_types"])
        same(at, "most", row["Types, at most"], c["max_types"])
        same(at, "cost", row["Cost, USD"], c["cost_total"])
        same(at, "saves", row["Saves against the row above, USD"], c["saves"])
    rules = {r["Rule"]: r for r in book.rows("Rules")}
    for p in data["price_of_rules"]:
        row = rules[p["rule"]]
        same(where, p["rule"], row["Asked"], p["from"])
        same(where, p["rule"] + " price", row["Price, USD"], p["price_total"])
        same(where, p["rule"] + " cost", row["The plan without it costs, USD"], p["cost_total"])
    rows = {r["Class"]: r for r in book.rows("Classes")}
    for c in data["classes"]:
        row = rows[c["class"]]
        same(where, c["class"], [row["What it asks"], row["Type"], row["Rows of the schedule"]], [c["words"], c["type"], c["rows"]])


def check_drawings(where, book, data, units):
    rows = book.rows("Drawings")
    if len(rows) != len(data["drawings"]["types"]):
        say(where, "drawings")
    for row, d in zip(rows, data["drawings"]["types"]):
        at = "%s, mark %s" % (where, d["mark"])
        same(at, "mark", row["Mark"], d["mark"])
        same(at, "walls", row["Walls"], d["walls"])
        same(at, "cost", row["Cost at list prices, USD"], d["cost_list"])
        same(at, "type", row["Type of the plan"], d["type"])
        same(at, "asks more", row["Walls that ask more"], d["misses_walls"])


def check(where, words, us, folder, twice):
    units, path, again = Units(us), folder + "/a.xlsx", folder + "/b.xlsx"
    words = ["plan", *words, "--units", "us" if us else "si"]
    status, out, err = run(*words, "--json", "--xlsx", path)
    if status not in (0, 1):
        return say(where, "exit %d: %s" % (status, err))
    if twice:
        run(*words, "--xlsx", again)
        with open(path, "rb") as one, open(again, "rb") as other:
            if one.read() != other.read():
                say(where, "two runs give two workbooks")
    data, book = json.loads(out), check_book(path, lambda words: say(where, words))
    facts = book.facts()
    names = ["Summary", "Schedule", "Types", "Classes", "How many types", "Rules"]
    names += ["Takeoff", "By storey", "By section"] if data["cost_total"] is not None else []
    same(where, "sheets", book.names, names + (["Drawings"] if data["drawings"] else []))
    same(where, "project", facts.get("Project"), data["title"])
    same(where, "types", facts["Types"], len(data["types"]))
    check_schedule(where, book, data, units)
    check_types(where, book, data, units)
    check_why(where, book, data)
    if data["drawings"]:
        check_drawings(where, book, data, units)
    if data["cost_total"] is None:
        return data
    same(where, "total", facts["Total"], data["cost_total"])
    same(where, "bound", facts["No plan costs less than, USD"], data["bound"])
    same(where, "margin", facts.get("Least margin, dB"), data["worst_margin_db"], DB)
    same(where, "floor", units.m2(facts["Floor under the walls, " + units.length + "2"]), data["floor_m2"], PRINTED)
    if data["drawings"] and data["drawings"]["saving_total"] is not None:
        same(where, "saving", facts["Saving against the drawings, USD"], data["drawings"]["saving_total"])
    check_lists(where, book, data, units)
    return data


# Names that a sum over matching rows could take for a pattern, a comparison or a formula.
PROJECT = {"septum": "project/1", "title": "=1+1", "walls": "walls.csv", "only": ["wood-89", "gyp-13", "typex-16"],
           "wall": {"height_m": 2.7}, "type_setup_cost": 200, "max_types": 2, "floor_area_value_per_m2": 900,
           "stock": [{"item": "typex-16", "quantity": 30, "unit": "m2"}],
           "types": {"*": {"line": "typex-16 | wood-89@406 | typex-16", "locked": True}, ">1": {"line": "gyp-13 | wood-89@610 | gyp-13"}}}
WALLS = [["id", "storey", "from", "to", "length_m", "count", "target", "fire", "existing_type"],
         ["=A1", "*", "<script>", "@SUM(A1)", "5", "2", "32", "", ">1"],
         ["+B2", "?", "\u05d7\u05d3\u05e8", "x" * 900, "4.25", "1", "30", "", ""],
         ["C3", "", "_x0041_", "=cmd|' '!A0", "7.5", "3", "28", "", ">1"],
         ["D4", "<2", "a", "b", "3.3", "1", "25", "", "*"],
         ["E5", "2", "a", "b", "3.3", "1", "70", "", ""],
         ["F6", "=2", "a", "b", "6", "1", "30", "", ""]]


def write_project(folder, project, walls):
    path = folder + "/project.json"
    with open(path, "w", encoding="utf-8") as f:
        json.dump(project, f)
    with open(folder + "/walls.csv", "w", encoding="utf-8") as f:
        for line in walls:
            f.write(",".join('"%s"' % cell.replace('"', '""') for cell in line) + "\n")
    return path


def check_small(folder):
    for us in (True, False):
        data = check("names of all kinds, %s" % us, [write_project(folder, PROJECT, WALLS)], us, folder, True)
        if data and ([u["wall"] for u in data["unplanned"]] != ["E5"] or len(data["storeys"]) != 6 or not data["drawings"]):
            say("names of all kinds", "the case is not what it should be")
    path = write_project(folder, dict(PROJECT, budget=10), WALLS)
    data = check("no plan", [path], True, folder, False)
    if data and data["cost_total"] is not None:
        say("no plan", "the case is not what it should be")
    status, out, err = run("plan", path, "--xlsx", folder + "/none/t.xlsx")
    if status != 4 or out or "E402" not in err:
        say("no folder", "exit %d, %s" % (status, err))


def main(folder):
    path = write_project(folder, PROJECT, WALLS)
    status, out, err = run("plan", path, "--xlsx", folder + "/there.xlsx")
    if status == 4 and "E404" in err:
        if out or os.path.exists(folder + "/there.xlsx"):
            say("without libxlsxwriter", "something was written")
        print("this build writes no spreadsheets: refused as it should be")
        return 1 if faults or os.environ.get("CI") or os.environ.get("SEPTUM_CI") else 0
    check_small(folder)
    check("Kestrel Yard", [source + "/docs/examples/kestrel-yard.json"], True, folder, False)
    print("%d faults" % faults)
    return 1 if faults else 0


with tempfile.TemporaryDirectory() as folder_name:
    sys.exit(main(folder_name))
