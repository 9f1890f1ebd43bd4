"""Answers of the command checked as a program that reads them would: see check_answers.sh."""
import csv, glob, io, json, os, re, shutil, subprocess, sys, tempfile
from decimal import ROUND_HALF_UP, Decimal
from jsonschema import Draft202012Validator

source, build = sys.argv[1], sys.argv[2]
PAGE = 100  # columns of a text answer
# Keys that answers have had from the start (docs/formats/answers.md).
RATING_KEYS = ("septum wall line bands_hz tl_db ratings stc_exact sd family evidence thickness_mm mass_kg_m2 fire height "
               "short_circuit cost cautions").split()
COST_KEYS = "currency per_m2 per_ft2 per_m hours_per_m2 lines".split()
LINE_KEYS = "item section kind quantity unit rate amount".split()
PICK_KEYS = "septum status chosen runners_up cheaper_but price_of_rules break_even".split()
WALLS = [
    "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16",
    "typex-16 | steel-92-18@610, glass-89 | typex-16",
    "typex-16 | wood-89@406, glass-89 | typex-16",
    "gyp-13 + mlv-5 | wood-89-double@406~50, glass-89, glass-89 | typex-16 + osb-11",
    "typex-16 | rc@610 | on osb-11 | wood-89@406, glass-89 | typex-16",
    "2*typex-16 | clip@610 | wood-89-stag-140@406, glass-140 | 2*typex-16",
    "damp-16 | steel-152-54@406 | 3*gyp-13",
]
faults = 0


def say(where, message):
    global faults
    faults += 1
    print("%s: %s" % (where, message))


def run(*words):
    done = subprocess.run([build + "/bin/septum", *words], capture_output=True)
    return done.returncode, done.stdout.decode("utf-8"), done.stderr.decode("utf-8")


def schema(kind):
    with open("%s/docs/formats/%s.schema.json" % (source, kind), encoding="utf-8") as f:
        loaded = json.load(f)
    Draft202012Validator.check_schema(loaded)
    return Draft202012Validator(loaded)


schemas = {kind: schema(kind) for kind in ("rating", "pick", "trim", "wall")}


def check_schema(where, kind, data):
    for e in schemas[kind].iter_errors(data):
        say(where, "%s %s: %s" % (kind, e.json_path, e.message[:200]))


def check_cost(where, cost):
    """Amounts are quantity x rate to the cent, half up; the total is their sum; per_m2 is the total over the area."""
    for key in COST_KEYS:
        if key not in cost:
            say(where, "cost lacks " + key)
    total = Decimal(0)
    for line in cost["lines"]:
        for key in LINE_KEYS:
            if key not in line:
                say(where, "line lacks " + key)
        exact = Decimal(str(line["quantity"])) * Decimal(str(line["rate"]))
        amount = Decimal(str(line["amount"]))
        # figures are printed with six digits: half a cent may fall to either side only when they were cut there
        if abs(exact - amount) > Decimal("0.0051"):
            say(where, "%s: %s x %s is not %s" % (line["item"], line["quantity"], line["rate"], line["amount"]))
        if line["kind"] != "markup" and not line["section"]:
            say(where, "%s has no section" % line["item"])
        total += amount
    if total != Decimal(str(cost["total"])):
        say(where, "lines add up to %s, total is %s" % (total, cost["total"]))
    if abs(cost["total"] / cost["area_m2"] - cost["per_m2"]) > 0.0001:
        say(where, "per_m2 is not total over area")
    if abs(cost["per_m2"] * 0.09290304 - cost["per_ft2"]) > 0.0001:
        say(where, "per_ft2 is not per_m2")


def check_rating(where, data):
    for key in RATING_KEYS:
        if key not in data:
            say(where, "rating lacks " + key)
    check_schema(where, "wall", data["wall"])
    if data["cost"] is None:
        say(where, "no cost")
    else:
        check_cost(where, data["cost"])
    mounted = data["wall"]["mount_a"] or data["wall"]["mount_b"]
    if bool(mounted) != bool(data["short_circuit"]):
        say(where, "short_circuit goes with mounted leaves")


def check_width(where, text):
    for line in text.splitlines():
        if len(line) > PAGE:
            say(where, "%d columns: %s" % (len(line), line))


def check_text(where, text, data):
    check_width(where, text)
    flat = " ".join(text.split())
    wanted = [data["line"], "STC %d" % data["ratings"]["STC"], "OITC %d" % data["ratings"]["OITC"],
              "{:,.2f} ".format(data["cost"]["per_ft2"]), "{:,.2f}".format(data["cost"]["total"])]
    wanted += [" ".join(c.split()) for c in data["cautions"]]
    wanted += [near["line"] for near in data["evidence"]["nearest"]]
    wanted += ["{:,.2f}".format(line["amount"]) for line in data["cost"]["lines"]]
    for words in wanted:
        if words not in flat.replace(" - ", " "):
            if words not in flat:
                say(where, "text lacks: " + words)


def check_csv(where, words, data):
    """The same lines; CSV has them by section, with their sum (takeoff.py works them out again)."""
    rows = list(csv.DictReader(io.StringIO(words, newline="")))
    lines = sorted(data["cost"]["lines"], key=lambda l: (not l["section"], l["section"] or ""))
    lines.append({"item": "total", "kind": "total", "amount": data["cost"]["total"]})
    if [(r["item"], r["kind"], float(r["amount"])) for r in rows] != [(l["item"], l["kind"], l["amount"]) for l in lines]:
        say(where, "CSV and JSON differ")


def rate(wall, *more):
    where = "rate %s" % wall
    status, out, err = run("rate", wall, "--json", *more)
    if status != 0:
        say(where, "exit %d: %s" % (status, err.strip()))
        return None
    data = json.loads(out)
    check_schema(where, "rating", data)
    check_rating(where, data)
    return data


def check_wall(wall):
    data = rate(wall)
    if data is None:
        return
    where = "rate %s" % wall
    if data["line"] != wall:
        say(where, "printed as %s" % data["line"])
    check_text(where, run("rate", wall)[1], data)
    check_width(where, run("rate", wall, "--units", "si")[1])
    check_csv(where, run("rate", wall, "--csv", "-")[1], data)
    with tempfile.NamedTemporaryFile("w", suffix=".json", delete=False) as f:
        json.dump(data["wall"], f)
    again = rate(f.name)
    os.unlink(f.name)
    if again != data:
        say(where, "the wall of the answer, rated as a file, answers otherwise")


def check_pick(path):
    where = os.path.basename(path)
    status, out, err = run("pick", path, "--json")
    if status not in (0, 1):
        say(where, "exit %d: %s" % (status, err.strip()))
        return
    data = json.loads(out)
    check_schema(where, "pick", data)
    for key in PICK_KEYS:
        if key not in data:
            say(where, "pick lacks " + key)
    if (status == 1) != (data["status"] == "infeasible") or (status == 1) != (data["chosen"] is None):
        say(where, "exit %d with status %s" % (status, data["status"]))
    if run("pick", path, "--json")[1] != out:
        say(where, "the second run answers otherwise")
    if status == 1:
        if not data["conflicts"] or not data["nearest"]:
            say(where, "no wall fits, and no word why")
        return
    chosen = data["chosen"]
    check_rating(where, chosen)
    check_text(where, run("pick", path)[1], chosen)
    if chosen["rules"]["broken"]:
        say(where, "the chosen wall breaks a rule")
    if not data["price_of_rules"] or not data["break_even"]:
        say(where, "price_of_rules and break_even are always filled")
    same = rate(chosen["line"], "--brief", path)
    # What concerns the bid as a whole stands once: beside the chosen wall, within a rating.
    of_bid = {key: data[key] for key in ("exclusions", "fastening_options") if key in data}
    if same is not None and {**same, "wall": None} != {**chosen, **of_bid, "wall": None}:
        say(where, "rate of the chosen wall answers otherwise")
    least = chosen["cost"]["per_m2"]
    for other in data["cheaper_but"]:
        if other["cost_per_m2"] + other["floor_value_per_m2"] > least + 0.01:
            say(where, "not cheaper: " + other["line"])
        failing = rate(other["line"], "--brief", path)
        if failing is not None and failing["rules"]["broken"] != other["fails"]:
            say(where, "rate disagrees on what fails: " + other["line"])
    for price in data["price_of_rules"]:
        if price["rule"] == "target" or (price["price_total"] or 0) < 0:
            say(where, "price of %s" % price["rule"])


def figures(entry):
    """What a buyer compares, so that more is better. STC stands for the metric that these briefs ask for."""
    return (entry["saving_total"], -entry["thickness_mm"], -entry["mass_kg_m2"], entry["ratings"]["STC"],
            entry["fire_minutes"] or 0, entry["height_m"])


def check_changes(where, entry):
    """Money of the changes and what they do together is the saving, to the cent."""
    total = Decimal(str(entry["together"]))
    for change in entry["changes"]:
        if (change["alone"] is None) == (change["why_not"] is None) or (change["alone"] is None) != (change["saving_total"] is None):
            say(where, "%s: alone, or why not" % change["part"])
        total += Decimal(str(change["saving_total"] or 0))
    if total != Decimal(str(entry["saving_total"])):
        say(where, "changes add up to %s, saving is %s" % (total, entry["saving_total"]))


def check_trim_text(where, text, data):
    """Every amount and line of the answer stands in the text."""
    check_width(where, text)
    flat = " ".join(text.split())
    wanted = ["{:,.2f}".format(data["specified"]["cost"]["total"]), data["specified"]["line"], data["held_to"]["words"]]
    for entry in data["alternatives"]:
        wanted += [entry["line"], "{:,.2f}".format(entry["saving_total"]), "{:,.2f}".format(entry["together"])]
        wanted += entry["gives_up"] + [c["what"] for c in entry["changes"]]
        wanted += ["{:,.2f}".format(c["saving_total"]) for c in entry["changes"] if c["saving_total"] is not None]
        wanted += [c["why_not"] for c in entry["changes"] if c["why_not"]]
    for words in wanted:
        if " ".join(words.split()) not in flat:
            say(where, "text lacks: " + words)


def check_log(where, words, data):
    """The log of proposals, read back: a row a proposal; what is decided is left to who decides."""
    rows = list(csv.DictReader(io.StringIO(words, newline="")))
    if [(r["proposal"], r["proposed_wall"], float(r["saving_total"])) for r in rows] != [
            (str(i + 1), e["line"], e["saving_total"]) for i, e in enumerate(data["alternatives"])]:
        say(where, "CSV and JSON differ")
    for row in rows:
        if any(row[key] for key in ("status", "decided_by", "date", "remarks")) or None in row or None in row.values():
            say(where, "row %s of the log" % row["proposal"])


def check_trim(path, wall, *more):
    where = "trim %s %s" % (os.path.basename(path), wall)
    words = ["trim", path, "--spec", wall, *more]
    status, out, err = run(*words, "--json")
    if status not in (0, 1):
        say(where, "exit %d: %s" % (status, err.strip()))
        return
    data = json.loads(out)
    check_schema(where, "trim", data)
    check_rating(where, data["specified"])
    if (status == 1) != (not data["alternatives"]):
        say(where, "exit %d with %d walls" % (status, len(data["alternatives"])))
    if (data["verdict"] == "holds") == bool(data["specified"]["rules"]["broken"]):
        say(where, "verdict %s" % data["verdict"])
    before = data["specified"]["cost"]
    for i, entry in enumerate(data["alternatives"]):
        check_rating(where, entry["rating"])
        check_changes(where, entry)
        after = entry["rating"]["cost"]
        saving = before["total"] + before["floor_value"] - after["total"] - after["floor_value"]
        if abs(saving - entry["saving_total"]) > 0.001 or abs(saving / before["area_m2"] - entry["saving_per_m2"]) > 0.0001:
            say(where, "%s saves %s" % (entry["line"], saving))
        if entry["rating"]["rules"]["broken"]:
            say(where, "breaks a rule: " + entry["line"])
        if i > 0 and entry["saving_total"] > data["alternatives"][i - 1]["saving_total"]:
            say(where, "not by saving: " + entry["line"])
        for other in data["alternatives"]:
            if other is not entry and all(x >= y for x, y in zip(figures(other), figures(entry))):
                say(where, "%s is beaten by %s" % (entry["line"], other["line"]))
    # A rule that not even its own absence helps has no price and stands last.
    prices = [-1 if p["price_total"] is None else p["price_total"] for p in data["price_of_rules"]]
    if prices != sorted(prices, reverse=True):
        say(where, "prices of rules are not sorted")
    check_trim_text(where, run(*words)[1], data)
    check_width(where, run(*words, "--units", "si")[1])
    check_log(where, run(*words, "--csv", "-")[1], data)
    return data


def check_own_trim():
    """A brief without a target holds the wall to its own figures."""
    with tempfile.NamedTemporaryFile("w", suffix=".json", delete=False) as f:
        json.dump({"septum": "brief/1", "code": "ibc", "wall": {"length_m": 6, "height_m": 2.7},
                   "only": ["typex-1*", "frame:*-92-18*", "frame:wood-89*", "glass-*", "rc"]}, f)
    for wall, slack in ((WALLS[0], 0), (WALLS[2], 25), (WALLS[4], 0)):
        data = check_trim(f.name, wall, "--slack", "%dmm" % slack)
        own = data["specified"]
        for entry in data["alternatives"]:
            if entry["ratings"]["STC"] < own["ratings"]["STC"]:
                say(wall, "a lower rating: " + entry["line"])
            if (entry["fire_minutes"] or 0) < (own["fire"]["minutes"] or 0):
                say(wall, "less fire resistance: " + entry["line"])
            if entry["thickness_mm"] > own["thickness_mm"] + slack + 0.001:
                say(wall, "thicker: " + entry["line"])
    os.unlink(f.name)


def check_model(path):
    """The saved 0-1 model, solved by GLPK's own program, costs what pick says, to the cent."""
    where = "model of " + os.path.basename(path)
    with tempfile.TemporaryDirectory() as folder:
        model, report = folder + "/model.lp", folder + "/report"
        data = json.loads(run("pick", path, "--json", "--save-model", model)[1])
        subprocess.run(["glpsol", "--lp", model, "-o", report], capture_output=True, check=True)
        with open(report, encoding="utf-8") as f:
            words = f.read()
    solved = re.search(r"Status: +INTEGER OPTIMAL", words) is not None
    if solved != (data["status"] == "optimal"):
        say(where, "pick says %s" % data["status"])
    elif solved:
        found = float(re.search(r"Objective: .* = +(\S+)", words).group(1))
        if abs(found - data["objective"]) > 0.005:
            say(where, "costs %s, pick says %s" % (found, data["objective"]))


for wall_line in WALLS:
    check_wall(wall_line)
count = 0
for brief in sorted(glob.glob(source + "/docs/examples/*.json")):
    with open(brief, encoding="utf-8") as opened:
        if json.load(opened)["septum"] == "brief/1":
            check_pick(brief)
            if shutil.which("glpsol"):
                check_model(brief)
            count += 1
example = source + "/docs/examples/"
check_trim(example + "party-wall.json", example + "specified-party-wall.json")
check_trim(example + "corridor.json", example + "corridor-wall.json", "--slack", "1/2in", "--count", "3")
check_own_trim()
print("%d walls, %d briefs, %d faults" % (len(WALLS), count, faults))
sys.exit(1 if faults or count == 0 else 0)
