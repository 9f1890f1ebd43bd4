"""Workbooks of rate, pick, ladder and trim against their own --json: see check_sheets.sh."""
import json, os, re, sys, tempfile, zipfile
from sheetread import CELL_CHARACTERS, Units, check_book, run_with, same_with

source, build = sys.argv[1], sys.argv[2]
faults = 0
# JSON rounds money per area to a hundredth of a cent and lengths to a tenth of a millimetre.
NEAR, MM = 1e-4, 0.051
WALLS = {
    "plain": "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16",
    "double": "2*typex-16 | wood-89-double@406, glass-89, glass-89 | 2*typex-16",
}


def say(where, message):
    global faults
    faults += 1
    print("%s: %s" % (where, message))


def run(*words):
    return run_with(build, *words)


def same(where, what, found, wanted, slack=1e-6):
    same_with(say, where, what, found, wanted, slack)


def two_runs(where, words, folder):
    """The answer, its workbook; equal answers give equal bytes."""
    path, again = folder + "/a.xlsx", folder + "/b.xlsx"
    for old in (path, again):
        if os.path.exists(old):
            os.remove(old)
    status, out, err = run(*words, "--json", "--xlsx", path)
    if status not in (0, 1):
        say(where, "exit %d: %s" % (status, err))
        return None, None
    run(*words, "--xlsx", again)
    with open(path, "rb") as one, open(again, "rb") as other:
        if one.read() != other.read():
            say(where, "two runs give two workbooks")
    return json.loads(out), check_book(path, lambda words: say(where, words))


def check_brief(where, book):
    rows = book.rows("Brief")
    if len(rows) < 20 or any(r["Where from"] not in ("given", "default") for r in rows):
        say(where, "the brief as understood")


def check_rules(where, book, data, units, base):
    rows = book.rows("Rules")
    prices = data.get("price_of_rules", [])
    for row, p in zip(rows[len(rows) - len(prices):], prices):
        same(where, "rule", row["Rule"], p["rule"])
        same(where, "asked", row["Asked"], p["from"])
        same(where, "in its place", row["In its place"], p["to"])
        same(where, p["rule"] + " price", row["Price, USD"], p["price_total"])
        if p["price_per_m2"] is not None:
            same(where, p["rule"] + " price per area", row["Price, " + units.per], p["price_per_m2"] * units.area, NEAR)
        wanted = "the same wall" if base and p["line"] == base else p["line"] or "no wall"
        same(where, p["rule"] + " wall", row["The cheapest wall without it"], wanted)
    if len(rows) < len(prices):
        say(where, "%d rules, JSON has %d" % (len(rows), len(prices)))
    return {r["Rule"]: r for r in rows}


def check_wall(where, row, x, units, line="Wall"):
    """Figures that every table of walls has."""
    same(where, "line", row[line], x["line"])
    same(where, "thickness", units.mm(row["Thickness, " + units.thickness]), x["thickness_mm"], MM)
    same(where, "mass", units.kg_m2(row["Mass, " + units.mass]), x["mass_kg_m2"], 0.0051)
    for metric in ("STC", "Rw", "C", "Ctr", "OITC"):
        if "ratings" in x:
            same(where, metric, row[metric], x["ratings"][metric])


def check_others(where, rows, others, units, role):
    if len(rows) != len(others):
        say(where, "%d walls, JSON has %d" % (len(rows), len(others)))
    for row, x in zip(rows, others):
        same(where, "role", row["What it is"], role)
        check_wall(where, row, x, units)
        if x["cost_per_m2"] is not None:
            same(where, "cost", row["Cost, " + units.per], x["cost_per_m2"] * units.area, NEAR)
        fails = row["What it fails"] or ""
        for f in x.get("fails", []):
            if f["rule"] + ": asks " not in fails:
                say(where, "%s is not said in %r" % (f["rule"], fails))
        if bool(fails) != bool(x.get("fails")):
            say(where, "fails %r" % fails)


def check_sound(where, book, x):
    rows = book.rows("Curve")
    same(where, "bands", [r["Band, Hz"] for r in rows], x["bands_hz"])
    for row, tl in zip(rows, x["tl_db"]):
        same(where, "TL at %g Hz" % row["Band, Hz"], row["Predicted transmission loss, dB"], tl, 0.051)
    rows, near = book.rows("Evidence"), x["evidence"]["nearest"]
    same(where, "evidence", [[r["Published wall"], r["STC"], r["Wall line"], r["Source"]] for r in rows],
         [[n["id"], n["rating"], n["line"], n["source"]] for n in near])
    for row, n in zip(rows, near):
        same(where, "differs", row["What differs from it"], "; ".join(n["differs"]))


def check_rate(where, words, us, folder):
    units = Units(us)
    data, book = two_runs(where, ["rate", *words, "--units", "us" if us else "si"], folder)
    if book is None:
        return
    same(where, "sheets", book.names, ["Summary", "Takeoff", "Buy list", "Rules", "Curve", "Evidence", "Brief"])
    facts = book.facts()
    check_brief(where, book)
    check_sound(where, book, data)
    for metric in ("STC", "Rw", "C", "Ctr", "OITC"):
        same(where, metric, facts[metric], data["ratings"][metric])
    same(where, "exact", facts["Predicted STC, exact"], data["stc_exact"], 0.051)
    same(where, "sd", facts["Standard deviation of it, dB"], data["sd"], 0.0051)
    same(where, "bridged", facts.get("STC if the mount is bridged"), data["short_circuit"] and data["short_circuit"]["ratings"]["STC"])
    same(where, "thickness", units.mm(facts["Thickness, " + units.thickness]), data["thickness_mm"], MM)
    same(where, "mass", units.kg_m2(facts["Mass, " + units.mass]), data["mass_kg_m2"], 0.0051)
    same(where, "fire", facts["Fire rating shown, min"], data["fire"]["minutes"] or "not shown")
    same(where, "height", units.metres(facts["Limiting height, " + units.length]), data["height"]["limit_m"], 0.0051)
    same(where, "hours", facts["Labour hours"], data["cost"]["hours_per_m2"] * data["cost"]["area_m2"], 0.01)
    rules = {r["Rule"]: r for r in book.rows("Rules")}
    same(where, "rules", sorted(rules), sorted(set(data["rules"]["in_force"]) - {"price"}))
    broken = {b["rule"]: b for b in data["rules"]["broken"]}
    for name, row in rules.items():
        same(where, name + " kept", row["Kept"], "no" if name in broken else "yes")
        if name in broken:
            same(where, name + " asked", row["Asked"], broken[name]["limit"])
            same(where, name + " found", row["Found"], broken[name]["found"].rstrip("."))


def check_pick(where, words, us, folder):
    units = Units(us)
    data, book = two_runs(where, words + ["--units", "us" if us else "si"], folder)
    if book is None:
        return
    chosen = data["chosen"]
    facts, rows = book.facts(), book.rows("Candidates")
    check_brief(where, book)
    if chosen is None:
        same(where, "sheets", book.names, ["Summary", "Candidates", "Rules", "Brief"])
        check_others(where, rows, data["nearest"], units, "comes near")
        if " and ".join(data["conflicts"][0]) not in facts["In the way"]:
            say(where, "conflicts: %r" % facts["In the way"])
        rules = {r["Rule"] for r in book.rows("Rules")}
        if not set(data["rules"]) - {"price"} <= rules:
            say(where, "rules %s, JSON has %s" % (rules, data["rules"]))
        return
    same(where, "sheets", book.names, ["Summary", "Takeoff", "Buy list", "Candidates", "Rules", "Break-even", "Curve", "Evidence", "Brief"])
    same(where, "wall", facts["Wall"], chosen["line"])
    same(where, "total", facts["Total"], chosen["cost"]["total"])
    same(where, "per area", facts["Cost per " + ("ft2" if us else "m2")], chosen["cost"]["per_m2"] * units.area, NEAR)
    same(where, "area", facts["Area, " + ("ft2" if us else "m2")] * units.area, chosen["cost"]["area_m2"], 1e-5)
    same(where, "objective", facts["Objective, USD"], data["objective"])
    same(where, "walls", facts["Walls judged"], data["walls"])
    same(where, "STC", facts["STC"], chosen["ratings"]["STC"])
    same(where, "book", facts["Date of the prices"], chosen["cost"]["prices"]["date"])
    if data["version"] not in facts["Program"]:
        say(where, "program %s" % facts["Program"])
    check_wall(where, rows[0], chosen, units)
    same(where, "cost", rows[0]["Cost, USD"], chosen["cost"]["total"])
    same(where, "floor", rows[0]["Floor value, USD"], chosen["cost"]["floor_value"])
    same(where, "with floor", rows[0]["With floor, USD"], data["objective"])
    n = 1 + len(data["runners_up"])
    check_others(where, rows[1:n], data["runners_up"], units, "keeps every rule too")
    check_others(where, rows[n:], data["cheaper_but"], units, "cheaper, but fails")
    for row in rows:
        same(where, "beyond", row["Beyond the first, USD"], row["With floor, USD"] - rows[0]["With floor, USD"])
    rules = check_rules(where, book, data, units, chosen["line"])
    if any(r["Kept"] != "yes" or not r["Found"] for r in rules.values()) or "target" not in rules:
        say(where, "rules of the chosen wall: %s" % rules)
    check_sound(where, book, chosen)
    limits = book.rows("Break-even")
    if len(limits) != len(data["break_even"]):
        say(where, "break-even")
    for row, b in zip(limits, data["break_even"]):
        same(where, "item", row["Item"], b["item"])
        for head, key in (("Price, USD", "price"), ("Cheapest from", "low"), ("Cheapest up to", "high")):
            wanted = None if b[key] is None else b[key] * units.rate(b["unit"])
            same(where, "%s %s" % (b["item"], key), row[head], wanted)
        same(where, "below", row["below it this wall"], b["low_line"])
        same(where, "above", row["above it this wall"], b["high_line"])


def check_ladder(where, words, us, folder):
    units = Units(us)
    data, book = two_runs(where, words + ["--units", "us" if us else "si"], folder)
    if book is None:
        return
    facts, have = book.facts(), data["have"]
    names = ["Summary", "Takeoff", "Candidates"] + (["Single changes"] if have else []) + ["Rules", "Brief"]
    same(where, "sheets", book.names, names)
    check_brief(where, book)
    rows = book.rows("Candidates")
    if not data["rungs"]:
        if data["lowest"] is None:
            check_others(where, rows, data["nearest"], units, "comes near")
        return
    same(where, "lowest", facts["The cheapest wall meets"], data["lowest"])
    same(where, "highest", facts["The most that any meets"], data["highest"])
    if len(rows) != len(data["rungs"]):
        return say(where, "%d rungs, JSON has %d" % (len(rows), len(data["rungs"])))
    for row, g in zip(rows, data["rungs"]):
        at = "%s, %d" % (where, g["rating"])
        check_wall(at, row, g, units)
        figures = {data["metric"]: "rating", "Cheapest from": "serves_from", "Meets": "reaches", "Cost, USD": "cost_total",
                   "Floor value, USD": "floor_value_total", "With floor, USD": "cost_with_floor_total",
                   "Predicted, exact": "predicted_exact", "Standard deviation, dB": "predicted_sd"}
        for head, key in figures.items():
            same(at, head, row[head], g[key], 0.051 if key.startswith("predicted") else 1e-6)
        same(at, "cost per area", row["Cost, " + units.per], g["cost_per_m2"] * units.area, NEAR)
        same(at, "worth", row["Worth taking"], "yes" if g["worth_taking"] else "no")
        step = g["step"] or {}
        same(at, "points", row["Points above"], step.get("points"))
        same(at, "step", row["Step, USD"], step.get("cost_total"))
        same(at, "a point", row["A point, USD"], step.get("per_point_total"), NEAR)
        same(at, "changes", row["Changes from the rung below"], "; ".join(step.get("changes", [])))
        if have:
            same(at, "extra", row["Beyond the given wall, USD"], g["from_have"]["extra_total"])
            same(at, "from have", row["Changes from the given wall"], "; ".join(g["from_have"]["changes"]) or "no change")
    if have:
        same(where, "given", facts["Wall"], have["line"])
        same(where, "given cost", facts["Cost, USD"], have["cost_total"])
        edits = book.rows("Single changes")
        same(where, "edits", len(edits), len(have["single_changes"]))
        for row, e in zip(edits, have["single_changes"]):
            same(where, "edit", row["Wall"], e["line"])
            same(where, "edit extra", row["Beyond the given wall, USD"], e["extra_total"])
            same(where, "edit points", row["Points gained"], e["points"])
    check_rules(where, book, data, units, None)


def check_trim(where, words, us, folder):
    units = Units(us)
    data, book = two_runs(where, words + ["--units", "us" if us else "si"], folder)
    if book is None:
        return
    specified, others = data["specified"], data["alternatives"]
    names = ["Summary", "Takeoff", "Candidates"] + (["Changes"] if others else [])
    names += (["Cheaper but"] if data["cheaper_but"] else []) + ["Rules", "Brief"]
    same(where, "sheets", book.names, names)
    check_brief(where, book)
    facts, rows = book.facts(), book.rows("Candidates")
    same(where, "specified", facts["Specified"], specified["line"])
    same(where, "held to", facts["Held to"], data["held_to"]["words"])
    same(where, "found", facts["Cheaper walls that hold it"], data["found"])
    same(where, "redesign", facts["Redesign and resubmittal, USD"], data["held_to"]["redesign_cost"])
    if len(rows) != 1 + len(others):
        return say(where, "%d walls, JSON has %d" % (len(rows) - 1, len(others)))
    check_wall(where, rows[0], specified, units, "Wall line")
    same(where, "specified cost", rows[0]["Cost, USD"], specified["cost"]["total"])
    same(where, "specified saves", rows[0]["Saving, USD"], None)
    for i, (row, p) in enumerate(zip(rows[1:], others)):
        at = "%s, wall %d" % (where, i + 1)
        same(at, "name", row["Wall"], "wall %d" % (i + 1))
        check_wall(at, row, p, units, "Wall line")
        same(at, "cost", row["Cost, USD"], p["rating"]["cost"]["total"])
        same(at, "saving", row["Saving, USD"], p["saving_total"])
        same(at, "net", row["Saving less redesign, USD"], p["net_saving_total"])
        same(at, "share", row["Saving, share"], p["saving_share"], 0.00051)
        same(at, "saving per area", row["Saving, " + units.per], p["saving_per_m2"] * units.area, NEAR)
        same(at, "thicker", units.mm(row["Thicker by, " + units.thickness]), p["thickness_change_mm"], 2 * MM)
        same(at, "heavier", units.kg_m2(row["Heavier by, " + units.mass]), p["mass_change_kg_m2"], 0.011)
        same(at, "moves", row["Prediction moves, dB"], p["rating_change_db"], 0.051)
        same(at, "fire", row["Fire, min"], p["fire_minutes"])
        same(at, "heavy", [row["Heavy fastening, side A"], row["Heavy fastening, side B"]],
             ["yes" if p["heavy_fastening"][s] else "no" for s in "ab"])
        same(at, "lead", [row["Lead time, weeks"], row["Waits for"]], [p["lead_time"]["weeks"], p["lead_time"]["item"]])
        if p["gives_up"]:
            same(at, "gives up", row["Gives up"], "; ".join(p["gives_up"]))
        if p["probability"]:
            same(at, "sure", row["Sure of the target"], min(p["probability"]), 0.0101)
    check_changes(where, book, others)
    for name in ("Cheaper but",) if data["cheaper_but"] else ():
        check_others(where, book.rows(name), data["cheaper_but"], units, "cheaper, but fails")
    check_rules(where, book, data, units, None if not data["price_of_rules"] else base_line(data))


def base_line(data):
    """Rules are priced against the cheapest wall that holds everything."""
    if data["cheapest"]:
        return data["cheapest"]["line"]
    return data["alternatives"][0]["line"] if data["alternatives"] else None


def check_changes(where, book, others):
    lines = iter(book.rows("Changes") if others else [])
    for i, p in enumerate(others):
        name = "wall %d" % (i + 1)
        for c in p["changes"]:
            row = next(lines)
            same(where, "change of", row["Wall"], name)
            for head, key in (("Change", "what"), ("Part", "part"), ("From", "from"), ("To", "to"),
                              ("Saving, taken alone, USD", "saving_total")):
                same(where, "%s: %s" % (name, key), row[head], c[key])
            same(where, name + ": line", row["Wall line, taken alone"], c["alone"]["line"] if c["alone"] else None)
        same(where, name + ": together", next(lines)["Saving, taken alone, USD"], p["together"])
        same(where, name + ": saving", next(lines)["Saving, taken alone, USD"], p["saving_total"])
    if next(lines, None) is not None:
        say(where, "more changes than JSON has")


# Text that a spreadsheet or its XML could take for something else; and what it has to become.
SAFE = "\ufffd"
HOSTILE = {
    "=1+1": "=1+1",
    "+cmd|' /C calc'!A0": "+cmd|' /C calc'!A0",
    "@SUM(A1)": "@SUM(A1)",
    "<script>alert(\"&amp;'1'\")</script>": "<script>alert(\"&amp;'1'\")</script>",
    "\u05e7\u05d9\u05e8 \u0645\u0634\u062a\u0631\u0643": "\u05e7\u05d9\u05e8 \u0645\u0634\u062a\u0631\u0643",
    "turned \u202eround\u2066": "turned " + SAFE + "round" + SAFE,
    "_x0041_ stays, and _x000D_": "_x0041_ stays, and _x000D_",
    "bell \u0007 and escape \u001b[2J": "bell " + SAFE + " and escape " + SAFE + "[2J",
    "no character \uffff": "no character " + SAFE,
    "1e5": "1e5",
    "wall \U0001f9f1 brick": "wall \U0001f9f1 brick",
    "w" * 10000: "w" * 10000,
    "\u00e4" * 40000: "\u00e4" * (CELL_CHARACTERS - 1) + "\u2026",
    "\U0001f9f1" * 20000: "\U0001f9f1" * ((CELL_CHARACTERS - 1) // 2) + "\u2026",
}


def check_hostile(folder):
    brief = {"septum": "brief/1", "wall": {"length_m": 4, "height_m": 2.7}, "target": {"metric": "STC", "value": 40},
             "only": ["wood-89"]}
    for given, wanted in HOSTILE.items():
        where = "title %r" % given[:30]
        path, sheet = folder + "/hostile.json", folder + "/hostile.xlsx"
        with open(path, "w", encoding="utf-8") as f:
            json.dump(dict(brief, title=given, sides={"a": {"room": given[:200]}}), f)
        for command in (["pick", path], ["rate", WALLS["plain"], "--brief", path]):
            status, out, err = run(*command, "--xlsx", sheet)
            if status != 0:
                say(where, "%s: exit %d: %s" % (command[0], status, err[:200]))
                continue
            book = check_book(sheet, lambda words: say(where, words))
            held = book.cells["Summary"]["B3"]
            if held.data_type != "s" or held.value != wanted:
                say(where, "%s: %s %r" % (command[0], held.data_type, str(held.value)[:60]))
            if given[:200] in HOSTILE:
                room = [r["Value"] for r in book.rows("Brief") if r["Field"] == "Side A: room"]
                same(where, "room", room, [HOSTILE[given[:200]]])


def check_escapes(where, path, given):
    """The format reads _xHHHH_ as a character of that number (ECMA-376, ST_Xstring): text that only looks so is
    guarded. The reader above takes it either way, so the part itself is looked at."""
    with zipfile.ZipFile(path) as whole:
        words = whole.read("xl/sharedStrings.xml").decode("utf-8")
    for escape in re.findall("_x[0-9A-Fa-f]{4}_", given):
        if "_x005F" + escape not in words or re.search("(?<!_x005F)" + escape, words):
            say(where, "%s is read as a character" % escape)


def check_refused(folder):
    """A workbook that cannot be written leaves nothing behind and is said."""
    brief = source + "/docs/examples/thin-wall.json"
    for words in (["ladder", brief], ["trim", brief, "--spec", WALLS["plain"]], ["pick", brief]):
        status, out, err = run(*words, "--xlsx", folder + "/none/t.xlsx")
        if status != 4 or out or "E402" not in err:
            say(words[0], "no folder: exit %d, %s" % (status, err))


def example(name):
    return source + "/docs/examples/" + name + ".json"


def main(work):
    status, out, err = run("rate", WALLS["plain"], "--xlsx", work + "/there.xlsx")
    if status == 4 and "E404" in err:
        for words in (["pick", example("thin-wall")], ["ladder", example("thin-wall")],
                      ["trim", example("thin-wall"), "--spec", WALLS["plain"]]):
            status, out, err = run(*words, "--xlsx", work + "/there.xlsx")
            if status != 4 or out or "E404" not in err or os.path.exists(work + "/there.xlsx"):
                say("without libxlsxwriter", "%s: exit %d" % (words[0], status))
        print("this build writes no spreadsheets: refused as it should be")
        return 1 if faults or os.environ.get("CI") or os.environ.get("SEPTUM_CI") else 0
    floor = work + "/floor.json"
    with open(example("party-wall"), encoding="utf-8") as f:
        brief = json.load(f)
    with open(floor, "w", encoding="utf-8") as f:
        json.dump(dict(brief, floor_area_value_per_m2=4000), f)
    check_rate("rate", [WALLS["plain"]], True, work)
    check_rate("rate under a brief", [WALLS["plain"], "--brief", example("heavy-fastening")], False, work)
    for name in ("party-wall", "heavy-fastening", "tall-wall", "impossible"):
        check_pick("pick " + name, ["pick", example(name)], name != "tall-wall", work)
    check_pick("pick with floor", ["pick", floor], True, work)
    check_ladder("ladder", ["ladder", example("party-wall"), "--have", WALLS["plain"]], True, work)
    check_ladder("ladder of Rw", ["ladder", floor, "--metric", "Rw"], False, work)
    check_ladder("ladder that ends", ["ladder", example("thin-wall"), "--to", "41"], True, work)
    check_trim("trim", ["trim", example("party-wall"), "--spec", example("specified-party-wall"), "--redesign", "150.5"], True, work)
    check_trim("trim with floor", ["trim", floor, "--spec", WALLS["double"], "--count", "3"], False, work)
    check_trim("nothing cheaper", ["trim", example("thin-wall"), "--spec", "typex-16 | wood-89@610 | typex-16"], True, work)
    check_hostile(work)
    check_refused(work)
    print("%d faults" % faults)
    return 1 if faults else 0


with tempfile.TemporaryDirectory() as folder:
    sys.exit(main(folder))
