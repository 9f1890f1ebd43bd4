"""Answers of `ladder` checked as a program that reads them would: see check_ladder.sh."""
import csv, io, json, re, subprocess, sys, tempfile
from jsonschema import Draft202012Validator

source, build = sys.argv[1], sys.argv[2]
PAGE = 100  # columns of a text answer
FT2 = 0.09290304
RUNG_KEYS = "rating cost_per_m2 thickness_mm line".split()  # from the start; docs/formats/answers.md has the rest
GIVEN = "typex-16 | steel-92-18@610, glass-89 | typex-16"
PICKED = ("one-hour", "thin-wall")  # briefs whose rungs are picked for one by one
faults = 0


def say(where, message):
    global faults
    faults += 1
    print("%s: %s" % (where, message))


def run(*words):
    done = subprocess.run([build + "/bin/septum", *words], capture_output=True)
    return done.returncode, done.stdout.decode("utf-8"), done.stderr.decode("utf-8")


with open(source + "/docs/formats/ladder.schema.json", encoding="utf-8") as opened:
    loaded = json.load(opened)
Draft202012Validator.check_schema(loaded)
schema = Draft202012Validator(loaded)


def check_json(where, data):
    for e in schema.iter_errors(data):
        say(where, "%s: %s" % (e.json_path, e.message[:200]))
    rungs = data["rungs"]
    for i, rung in enumerate(rungs):
        for key in RUNG_KEYS:
            if key not in rung:
                say(where, "a rung lacks " + key)
        if abs(rung["cost_per_m2"] * FT2 - rung["cost_per_ft2"]) > 1e-4:
            say(where, "%d: per ft2 and per m2 differ" % rung["rating"])
        if rung["wall_alone"] != (rung["rating"] >= 60):
            say(where, "%d: wall alone" % rung["rating"])
        if (rung["step"] is None) != (i == 0):
            say(where, "%d: step" % rung["rating"])
        if i == 0:
            continue
        below, step = rungs[i - 1], rung["step"]
        if rung["rating"] <= below["rating"] or rung["cost_with_floor_total"] <= below["cost_with_floor_total"]:
            say(where, "%d does not rise" % rung["rating"])
        if rung["serves_from"] != below["rating"] + 1 or step["points"] != rung["rating"] - below["rating"]:
            say(where, "%d: a rating is left out" % rung["rating"])
        if abs(step["cost_total"] - rung["cost_with_floor_total"] + below["cost_with_floor_total"]) > 0.001:
            say(where, "%d: the step is not the difference" % rung["rating"])
        if abs(step["per_point_total"] * step["points"] - step["cost_total"]) > 0.001:
            say(where, "%d: cost of a point" % rung["rating"])
        if not step["changes"]:
            say(where, "%d: no change is told" % rung["rating"])


def check_hull(where, rungs):
    """Worth taking: no chord between two other rungs passes below."""
    points = [(r["rating"], round(100 * r["cost_with_floor_total"])) for r in rungs]
    for i, (x, y) in enumerate(points):
        above = any(a[1] * (b[0] - a[0]) + (b[1] - a[1]) * (x - a[0]) <= y * (b[0] - a[0])
                    for a in points[:i] for b in points[i + 1:])
        if rungs[i]["worth_taking"] == above:
            say(where, "%d: worth taking" % x)


def figures(data):
    """Every number that an answer holds, as text prints it, with words that hold numbers."""
    found = []

    def walk(x):
        if isinstance(x, dict):
            for v in x.values():
                walk(v)
        elif isinstance(x, list):
            for v in x:
                walk(v)
        elif isinstance(x, str):
            found.extend(re.findall(r"\d[\d,]*(?:\.\d+)?", x))
        elif isinstance(x, (int, float)) and not isinstance(x, bool):
            found.extend("{:,.{}f}".format(abs(x), d) for d in (0, 1, 2))
    walk(data)
    return set(found)


def check_text(where, words, data, us):
    known = figures(data)
    known |= {str(r["rating"] - 1) for r in data["rungs"]} | {"0.1.0", "0"}
    for line in words.splitlines():
        if len(line) > PAGE:
            say(where, "%d columns: %s" % (len(line), line))
    flat = " ".join(words.split())
    for rung in data["rungs"]:
        for part in (rung["line"], "{:,.2f}".format(rung["cost_per_ft2" if us else "cost_per_m2"]),
                     "{:,.2f}".format(rung["cost_with_floor_total"])):
            if part not in flat:
                say(where, "text lacks " + part)
        for change in (rung["step"] or {"changes": []})["changes"]:
            if change not in flat:
                say(where, "text lacks " + change)
    # thickness is printed in fractions of an inch: units of the JSON are others
    plain = re.sub(r"\d+(-\d+/\d+)? in\b|\d+/\d+ in\b", "", words)
    for number in re.findall(r"(?<![\w*@~./-])\d[\d,]*(?:\.\d+)?(?![\w*@~/-])", plain):
        if number.rstrip(",.") not in known:
            say(where, "only the text says %s" % number)


def check_csv(where, words, data, us):
    rows = list(csv.DictReader(io.StringIO(words, newline="")))
    if len(rows) != len(data["rungs"]):
        say(where, "CSV has %d rungs" % len(rows))
    for row, rung in zip(rows, data["rungs"]):
        area = "ft2" if us else "m2"
        same = (int(row["rating"]) == rung["rating"] and row["line"] == rung["line"]
                and float(row["cost_per_" + area]) == rung["cost_per_" + area]
                and float(row["cost_total"]) == rung["cost_total"]
                and (row["worth_taking"] == "yes") == rung["worth_taking"]
                and row["changes"] == ("; ".join(rung["step"]["changes"]) if rung["step"] else "")
                and (row["step_total"] == "" if rung["step"] is None
                     else float(row["step_total"]) == rung["step"]["cost_total"]))
        if not same:
            say(where, "CSV and JSON differ at %d" % rung["rating"])


def check_answer(where, us, *words):
    status, out, err = run("ladder", *words, "--json")
    if status != 0:
        say(where, "exit %d: %s" % (status, err.strip()))
        return None
    data = json.loads(out)
    if run("ladder", *words, "--json")[1] != out:
        say(where, "the second run answers otherwise")
    check_json(where, data)
    check_hull(where, data["rungs"])
    check_text(where, run("ladder", *words)[1], data, us)
    check_csv(where, run("ladder", *words, "--csv", "-")[1], data, us)
    return data


def pick_at(brief, value):
    asked = json.loads(json.dumps(brief))
    asked["target"]["value"] = value
    with tempfile.NamedTemporaryFile("w", suffix=".json") as f:
        json.dump(asked, f)
        f.flush()
        status, out, _ = run("pick", f.name, "--json")
    return json.loads(out)["chosen"] if status == 0 else None


def check_picks(name, data):
    """Each rung is the pick at its rating and at the lowest that it serves; above the highest nothing is."""
    with open("%s/docs/examples/%s.json" % (source, name), encoding="utf-8") as f:
        brief = json.load(f)
    for rung in data["rungs"]:
        for value in {rung["rating"], rung["serves_from"]}:
            chosen = pick_at(brief, value)
            if chosen is None or abs(chosen["cost"]["total"] - rung["cost_total"]) > 0.001:
                say(name, "a pick at %d costs otherwise" % value)
            elif value == rung["rating"] and chosen["line"] != rung["line"]:
                say(name, "a pick at %d is %s" % (value, chosen["line"]))
    if pick_at(brief, data["highest"] + 1) is not None:
        say(name, "a wall reaches more than %d" % data["highest"])


def check_have(name):
    """The given wall as rate sees it; each rung and change against a rating of its wall."""
    path = "%s/docs/examples/%s.json" % (source, name)
    data = check_answer(name + " from a given wall", True, path, "--have", GIVEN, "--to", "60")
    if data is None:
        return
    have = data["have"]
    total = {}
    for line in [have["line"]] + [c["line"] for c in have["single_changes"]] + [r["line"] for r in data["rungs"]]:
        total[line] = json.loads(run("rate", line, "--brief", path, "--json")[1])["cost"]["total"]
    for change in have["single_changes"]:
        if abs(total[change["line"]] - total[GIVEN] - change["extra_total"]) > 0.001:
            say(name, "a change costs otherwise: %s" % change["changes"])
        if len(change["changes"]) != 1 or change["points"] != change["rating"] - have["rating"]:
            say(name, "not one change: %s" % change["changes"])
    for gain in (3, 5):
        enough = [c for c in have["single_changes"] if c["points"] >= gain]
        least = min(enough, key=lambda c: c["extra_total"]) if enough else None
        if [c for c in have["single_changes"] if gain in c["least_for"]] != ([least] if least else []):
            say(name, "not the least for %d points more" % gain)
    for rung in data["rungs"]:
        if rung["rating"] <= have["rating"] or abs(total[rung["line"]] - total[GIVEN] - rung["from_have"]["extra_total"]) > 0.001:
            say(name, "from the given wall to %d" % rung["rating"])


counted = 0
for name in PICKED + ("party-wall", "heavy-fastening", "tall-wall"):
    brief_path = "%s/docs/examples/%s.json" % (source, name)
    answer = check_answer(name, True, brief_path, "--units", "us")
    check_answer(name + " in SI", False, brief_path, "--units", "si", "--from", "40", "--to", "55")
    if answer and name in PICKED:
        check_picks(name, answer)
    counted += 1
check_have("corridor")
print("%d briefs, %d faults" % (counted, faults))
sys.exit(1 if faults or counted == 0 else 0)
