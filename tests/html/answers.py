"""Answers of the demo as pages: each is sound (page.py) and says what --json says."""
import json
import os
import re
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from page import Page  # noqa: E402

FT2 = 0.09290304  # m2, exact
source, build = sys.argv[1:3]
septum = os.path.join(build, "bin", "septum")
work = tempfile.mkdtemp()
faults = []
compared = 0


def run(arguments):
    path = os.path.join(work, "page.html")
    if os.path.exists(path):
        os.remove(path)
    done = subprocess.run([septum] + arguments + ["--json", "--html", path], stdout=subprocess.PIPE, stderr=subprocess.PIPE)
    if done.returncode not in (0, 1) or not os.path.exists(path):
        faults.append("%s: exit %d: %s" % (arguments, done.returncode, done.stderr.decode()))
        return None, None
    return json.loads(done.stdout.decode()), Page(path)


def thousands(value, decimals=2):
    """As pages write money: half away from zero."""
    scaled = abs(value) * 10**decimals + 0.5 + 1e-9
    whole = int(scaled)
    words = "{:,}".format(whole // 10**decimals)
    if decimals:
        words += "." + str(whole % 10**decimals).zfill(decimals)
    return ("-" if value < 0 and whole else "") + words


class Comparison:
    """Looks for facts of the JSON among the words of the page."""

    def __init__(self, name, page, us, within=None):
        self.name, self.page, self.us, self.within = name, page, us, within
        self.words = page.text(page.root.find("body") if within is None else within)

    def part(self, heading):
        """The same for one section of the page."""
        return Comparison("%s, %s" % (self.name, heading), self.page, self.us, self.page.section(heading))

    def table(self, caption):
        return self.page.table(caption, self.within)

    def holds(self, fact, words):
        """The words stand there, and not as a part of longer numbers."""
        global compared
        compared += 1
        words = " ".join(str(words).split())
        if not re.search(r"(?<!\d)(?<!\d[.,])" + re.escape(words) + r"(?![.,]?\d)", self.words):
            faults.append("%s: %s is not on the page: %r" % (self.name, fact, words))

    def near(self, fact, value, found, tolerance):
        global compared
        compared += 1
        if found is None or abs(value - found) > tolerance:
            faults.append("%s: %s is %r, the page has %r" % (self.name, fact, value, found))

    def money(self, fact, value):
        self.holds(fact, thousands(value))

    def per_area(self, fact, entry, key):
        """`key` per m2 or per ft2, as the page's units want it."""
        self.money(fact, entry[key + "_ft2"] if self.us else entry[key + "_m2"])

    def thickness(self, fact, mm):
        if not self.us:
            self.holds(fact, "%.1f mm" % (int(mm * 10 + 0.5) / 10))

    def mass(self, fact, kg_m2):
        if not self.us:
            self.near(fact, kg_m2, self.nearest(r"(\d+\.\d) kg/m2", kg_m2), 0.0501)

    def nearest(self, pattern, value):
        found = [float(x) for x in re.findall(pattern, self.words)]
        return min(found, key=lambda x: abs(x - value)) if found else None


def compare_rating(c, r):
    """The facts of a rating/1."""
    c.holds("line", r["line"])
    ratings = r["ratings"]
    rows = c.table("Ratings")
    want = [str(ratings[k]) for k in ("STC", "Rw", "C", "Ctr", "OITC")]
    if not any(row[1:] == want for row in rows):
        faults.append("%s: ratings %s stand in no row" % (c.name, want))
    bands = [row[1:] for row in c.table("Transmission loss")]
    if ["%.1f" % x for x in r["tl_db"]] not in bands:
        faults.append("%s: the bands are not those of the JSON: %s" % (c.name, bands))
    found = {row[0]: row[1:] for row in c.table("The prediction")}
    for metric, exact in r["prediction"]["exact"].items():
        c.near("exact " + metric, exact, float(found.get(metric, ["nan"])[0]), 1e-9)
        c.near("sd " + metric, r["prediction"]["sd"][metric], float(found.get(metric, ["", "nan"])[1]), 1e-9)
    c.holds("family", r["family"])
    for near in r["evidence"]["nearest"]:
        for key in ("id", "line", "source"):
            c.holds("nearest " + key, near[key])
        for difference in near["differs"]:
            c.holds("difference", difference)
    if r["evidence"]["match"]:
        c.holds("match", r["evidence"]["match"]["id"])
    for reason in r["prediction"]["outside"]:
        c.holds("outside", reason)
    for target in r["targets"]:
        shares = [int(100 * (target["probability"] + last)) for last in (-0.0005, 0, 0.0005)]
        if not any(" %d %%" % share in c.words for share in shares):
            faults.append("%s: no probability of %s" % (c.name, shares))
    c.thickness("thickness", r["thickness_mm"])
    c.mass("mass", r["mass_kg_m2"])
    compare_checks(c, r)
    if r["cost"]:
        compare_cost(c, r["cost"])
    for caution in r["cautions"]:
        c.holds("caution", caution)


def compare_checks(c, r):
    c.holds("fire", "%d min" % r["fire"]["minutes"] if r["fire"]["minutes"] else "not shown")
    for key in ("basis", "source", "row"):
        if r["fire"]["minutes"] and r["fire"][key]:
            c.holds("fire " + key, r["fire"][key])
    for key in ("basis", "governs", "source"):
        c.holds("height " + key, r["height"][key])
    if not c.us:
        c.holds("height", "%.2f m" % r["height"]["limit_m"])
    if r["short_circuit"]:
        c.holds("short circuit", r["short_circuit"]["line"])
        c.holds("short circuit", "exact %.1f" % r["short_circuit"]["stc_exact"])
    if r["composite"]:
        c.holds("ceiling", "STC %.1f" % r["composite"]["ceiling"])
    for rule in r["rules"]["in_force"]:
        if rule != "price":
            c.holds("rule", rule)
    for broken in r["rules"]["broken"]:
        c.holds("broken", broken["limit"])


def compare_cost(c, cost):
    c.per_area("cost", cost, "per")
    c.money("per length", cost["per_ft"] if c.us else cost["per_m"])
    for key in ("material", "labour", "markup", "total"):
        c.money(key, cost[key])
    if cost["floor_value"]:
        c.money("floor value", cost["floor_value"])
    if "What the wall uses" in c.words:
        compare_takeoff(c, "What the wall uses", cost)
    sections = {row[0]: row[1:] for row in c.table("Cost by section")}
    sums = {}
    for line in cost["lines"]:
        kinds = sums.setdefault(line["section"] or "tax, overhead and profit", {})
        kinds[line["kind"]] = kinds.get(line["kind"], 0) + line["amount"]
    for section, kinds in sums.items():
        want = [thousands(kinds[k]) if k in kinds else "" for k in ("material", "labour")] + [thousands(sum(kinds.values()))]
        if sections.get(section) != want:
            faults.append("%s: section %s is %s, expected %s" % (c.name, section, sections.get(section), want))
    facts = c.page.facts()
    for key, label in (("name", "Price book"), ("place", "Place of the prices"), ("date", "Date of the prices"),
                       ("source", "Source of the prices")):
        if facts.get(label) != [cost["prices"][key]]:
            faults.append("%s: %s is %s" % (c.name, label, facts.get(label)))


def compare_takeoff(c, caption, cost):
    rows = c.table(caption)
    amounts = sorted(thousands(line["amount"]) for line in cost["lines"])
    if sorted(row[7] for row in rows[:-1]) != amounts:
        faults.append("%s: amounts of the takeoff differ" % c.name)
    if c.us:
        return
    quantities = sorted("%.2f" % (int(line["quantity"] * 100 + 0.5 + 1e-6) / 100) for line in cost["lines"])
    if sorted(row[4] for row in rows[:-1]) != quantities:
        faults.append("%s: quantities of the takeoff differ" % c.name)


def compare_others(c, others):
    for other in others:
        c.holds("other wall", other["line"])
        if other["cost_per_m2"] is not None:
            c.per_area("its cost", other, "cost_per")
        c.thickness("its thickness", other["thickness_mm"])
        for fails in other.get("fails", []):
            c.holds("what it fails", fails["rule"])
            c.holds("what it fails", fails["limit"])


def compare_rules(c, prices):
    for price in prices:
        c.holds("rule", price["rule"])
        c.holds("from", price["from"])
        c.holds("to", price["to"])
        if price["price_total"] is not None:
            c.per_area("price of a rule", price, "price_per")
            c.money("price of a rule", price["price_total"])


def compare_pick(c, a):
    if a["objective"] is not None:
        c.money("objective", a["objective"])
        c.money("bound", a["bound"])
    c.holds("walls", thousands(a["walls"], 0))
    c.holds("candidates", thousands(a["candidates"], 0))
    if a["chosen"]:
        compare_rating(c, a["chosen"])
    compare_others(c, a["runners_up"] + a["cheaper_but"] + a["nearest"])
    compare_rules(c, a["price_of_rules"])
    for item in a["break_even"]:
        c.holds("break-even", item["item"])
        for side in ("low", "high"):
            if item[side] is None:
                continue
            c.holds("break-even", item[side + "_line"])
            factor = {"m2": FT2, "m": 0.3048}.get(item["unit"], 1) if c.us else 1
            value = item[side] * factor
            decimals = 3 if value < 1 else 2
            c.near("break-even " + item["item"], value, c.nearest(r"(?<![\d,.])(\d+\.\d{%d})(?![\d.])" % decimals, value),
                   0.5001 * 10**-decimals)
    for conflict in a["conflicts"]:
        c.holds("conflict", " and ".join([", ".join(conflict[:-1]), conflict[-1]]) if len(conflict) > 1 else conflict[0])


def compare_ladder(c, a):
    c.holds("words", a["target"]["words"])
    for rung in a["rungs"]:
        c.holds("rung", rung["line"])
        c.per_area("rung", rung, "cost_per")
        c.money("rung", rung["cost_total"])
        c.thickness("rung", rung["thickness_mm"])
        c.holds("rung", "%d (%.1f, sd %.1f)" % (rung["predicted"], rung["predicted_exact"], rung["predicted_sd"]))
        if rung["step"]:
            c.money("step", rung["step"]["cost_total"])
            c.per_area("step", rung["step"], "cost_per")
            c.per_area("point", rung["step"], "per_point_per")
            for change in rung["step"]["changes"]:
                c.holds("change", change)
        if a["have"]:
            c.money("extra", rung["from_have"]["extra_total"])
            c.per_area("extra", rung["from_have"], "extra_per")
            for change in rung["from_have"]["changes"]:
                c.holds("change", change)
    ratings = [row[0] for row in c.table("For each rating")]
    if ratings != [str(rung["rating"]) for rung in a["rungs"]]:
        faults.append("%s: rungs are %s" % (c.name, ratings))
    worth = [row[0] for row in c.table("For each rating") if row[1]]
    if worth != [str(rung["rating"]) for rung in a["rungs"] if rung["worth_taking"]]:
        faults.append("%s: worth taking are %s" % (c.name, worth))
    for caution in sorted(set(x for rung in a["rungs"] for x in rung["cautions"])):
        c.holds("caution", caution)
    if a["have"]:
        c.holds("have", a["have"]["line"])
        for edit in a["have"]["single_changes"]:
            c.holds("single change", edit["line"])
            c.money("single change", edit["extra_total"])
    compare_rules(c, a["price_of_rules"])
    compare_others(c, a["nearest"])


def compare_trim(whole, a):
    c = whole
    c.holds("held to", a["held_to"]["words"])
    compare_rating(c.part("The specified wall"), a["specified"])
    takeoffs = c.part("Takeoffs")
    compare_takeoff(takeoffs, "The specified wall", a["specified"]["cost"])
    for number, other in enumerate(a["alternatives"], 1):
        compare_takeoff(takeoffs, "Wall %d" % number, other["rating"]["cost"])
        c = whole.part("Wall %d:" % number)
        c.holds("alternative", other["line"])
        c.money("saving", other["saving_total"])
        c.per_area("saving", other, "saving_per")
        c.money("together", other["together"])
        c.holds("share", "%.1f %%" % (100 * other["saving_share"]))
        compare_rating(c, other["rating"])
        for change in other["changes"]:
            for key in ("what", "from", "to"):
                c.holds("change", change[key])
            if change["alone"]:
                c.money("change", change["saving_total"])
                c.holds("change", change["alone"]["effect"])
                c.holds("change", change["alone"]["line"])
            else:
                c.holds("change", change["why_not"])
        for loss in other["gives_up"]:
            c.holds("gives up", loss)
    compare_others(whole, a["cheaper_but"])
    compare_rules(whole, a["price_of_rules"])


EXAMPLES = os.path.join(source, "docs", "examples")


def example(name):
    return os.path.join(EXAMPLES, name + ".json")


LINES = [
    "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16",
    "gyp-13 + mlv-5 | wood-89-double@406~25, glass-89, glass-89 | typex-16 + osb-11",
]
cases = [(["rate", line, "--units", units], compare_rating) for line in LINES for units in ("us", "si")]
cases += [(["rate", LINES[0], "--brief", example("party-wall")], compare_rating)]
for brief in ("party-wall", "corridor", "heavy-fastening", "impossible", "thin-wall"):
    cases.append((["pick", example(brief)], compare_pick))
cases.append((["pick", example("one-hour"), "--units", "si"], compare_pick))
cases.append((["ladder", example("one-hour")], compare_ladder))
cases.append((["ladder", example("one-hour"), "--units", "si", "--from", "45", "--to", "60", "--have",
               "typex-16 | steel-92-18@610 | typex-16"], compare_ladder))
cases.append((["trim", example("party-wall"), "--spec", example("specified-party-wall"), "--count", "3"], compare_trim))
cases.append((["trim", example("one-hour"), "--units", "si", "--spec", "2*typex-16 | steel-92-18@610, glass-89 | 2*typex-16"],
              compare_trim))
for arguments, compare in cases:
    answer, page = run(arguments)
    if answer is None:
        continue
    si = "--units" in arguments and arguments[arguments.index("--units") + 1] == "si"
    compare(Comparison(" ".join([arguments[0]] + [os.path.basename(a) for a in arguments[1:]]), page, not si), answer)
    faults.extend(page.faults)
for fault in faults[:60]:
    print(fault)
print("%d pages, %d facts compared, %d faults" % (len(cases), compared, len(faults)))
sys.exit(1 if faults or compared < 1000 else 0)
