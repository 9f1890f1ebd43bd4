"""Pages of projects: sound (page.py), what --json says, and small enough to be sent about when the schedule is long."""
import csv
import json
import os
import subprocess
import sys
import tempfile
import time

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from page import Page  # noqa: E402

FT2 = 0.09290304  # m2, exact
MOST_BYTES = 2 << 20  # of a project of 300 rows: what any mailbox takes
ROWS = 300
source, build = sys.argv[1:3]
septum = os.path.join(build, "bin", "septum")
work = tempfile.mkdtemp()
faults = []
compared = 0


def write_project(rows, **more):
    with open(os.path.join(work, "walls.csv"), "w", encoding="utf-8", newline="") as file:
        out = csv.writer(file)
        out.writerow(["id", "storey", "from", "to", "length", "height", "target", "fire", "count", "existing_type"])
        out.writerows(rows)
    project = {"septum": "project/1", "title": "Three hundred walls (invented)", "walls": "walls.csv", "units": "us", "code": "ibc",
               "quantity_breaks": False, "only": ["frame:steel-*"], "structure": {"noncombustible": "strict"}}
    project.update(more)
    path = os.path.join(work, "project.json")
    with open(path, "w", encoding="utf-8") as file:
        json.dump(project, file)
    return path


def run(path, exit_status):
    page = os.path.join(work, "page.html")
    if os.path.exists(page):
        os.remove(page)
    begun = time.monotonic()
    done = subprocess.run([septum, "plan", path, "--json", "--html", page], stdout=subprocess.PIPE, stderr=subprocess.PIPE)
    print("plan with its page: %.1f s, %d bytes" % (time.monotonic() - begun, os.path.getsize(page)))
    if done.returncode != exit_status:
        faults.append("exit %d: %s" % (done.returncode, done.stderr.decode()[:400]))
    read = Page(page)
    faults.extend(read.faults)
    return json.loads(done.stdout.decode()), read


def thousands(value, decimals=2):
    scaled = int(abs(value) * 10**decimals + 0.5 + 1e-9)
    words = "{:,}".format(scaled // 10**decimals) + ("." + str(scaled % 10**decimals).zfill(decimals) if decimals else "")
    return ("-" if value < 0 and scaled else "") + words


def same(what, found, wanted):
    global compared
    compared += 1
    if found != wanted:
        faults.append("%s: the page has %s, the answer %s" % (what, found, wanted))


def holds(page, what, words):
    global compared
    compared += 1
    if " ".join(str(words).split()) not in page.body_text():
        faults.append("%s is not on the page: %s" % (what, words))


def compare_types(a, page):
    where = {row[0]: row for row in page.table("Types and where")}
    money = {row[0]: row for row in page.table("What each type costs")}
    for t in a["types"]:
        use, cost = t["used"], t["cost_of_use"]
        row = where.get(t["name"], [""] * 11)
        same("walls of " + t["name"], row[1], str(use["walls"]))
        same("rows of " + t["name"], row[2], str(use["rows"]))
        same("run of " + t["name"], row[3], thousands(use["run_m"] / 0.3048, 0) + " ft")
        same("STC of " + t["name"], row[5], str(t["ratings"]["STC"]))
        same("line of " + t["name"], row[10], t["line"])
        row = money.get(t["name"], [""] * 9)
        same("cost of " + t["name"], row[1:7], [thousands(cost["per_ft2"]), thousands(cost["walls"]), thousands(cost["goods"]),
                                                thousands(cost["setup"]), thousands(cost["floor_value"]), thousands(cost["total"])])
        if t["without"] and t["without"]["cost_total"] is not None:
            same("without " + t["name"], row[7], "+" + thousands(t["without"]["costs_more"]))
        holds(page, "fire of " + t["name"], t["fire"]["basis"])
        for near in t["evidence"]["nearest"]:
            holds(page, "evidence of " + t["name"], near["line"])
        if ["%.1f" % x for x in t["tl_db"]] not in [r[1:] for table in page.root.iter("table")
                                                    for r in [[page.text(c) for c in row] for row in table.findall("tbody/tr")]]:
            faults.append("the curve of %s is not on the page" % t["name"])


def compare_rows(a, page):
    rows = {row[0]: row for row in page.table("The schedule")}
    same("rows", len(rows), len(a["assignments"]) + len(a["unplanned"]))
    for row in a["assignments"]:
        found = rows.get(row["wall"], [""] * 18)
        same("row " + row["wall"], [found[i] for i in (1, 4, 7, 8, 9, 13, 14, 15, 16, 17)],
             [row["storey"], str(row["count"]), row["type"], "other way round" if row["mirrored"] else "", row["class"],
              thousands(row["cost_list"]), thousands(row["cost_walls"]), thousands(row["cost_goods"]),
              thousands(row["floor_value"]), row["line"]])
        if row["margin_db"] is not None and abs(float(found[10]) - row["margin_db"]) > 0.0051:
            faults.append("margin of %s: %s, %s" % (row["wall"], found[10], row["margin_db"]))
    for row in a["unplanned"]:
        same("row " + row["wall"], rows.get(row["wall"], [""] * 18)[7], "none")
        holds(page, "why " + row["wall"], row["reason"])


def compare(a, page):
    holds(page, "cost", thousands(a["cost_total"]))
    holds(page, "bound", thousands(a["bound"]))
    compare_types(a, page)
    compare_rows(a, page)
    curve = {row[0]: row for row in page.table("What the project costs")} if a["curve"] else {}
    for point in a["curve"]:
        same("curve at %d" % point["max_types"], curve[str(point["max_types"])][1],
             thousands(point["cost_total"]) if point["cost_total"] is not None else "")
    orders = {row[1]: row for row in page.table("Material in whole")}
    for item in a["buy"]:
        if [line["item"] for line in a["buy"]].count(item["item"]) == 1:
            same("order of " + item["item"], [orders[item["item"]][i] for i in (0, 2, 6, 7, 11)],
                 [item["section"], item["name"], thousands(item["buy"], 0), item["buy_as"], thousands(item["amount"])])
    same("orders", orders["total"][11], thousands(a["buy_total"]))
    sections = {row[0]: row for row in page.table("Walls and goods")}
    for s in a["sections"]:
        same("section " + s["section"], sections[s["section"]][4], thousands(s["material"] + s["labour"]))
    storeys = {row[0]: row for row in page.table("What stands")}
    for s in a["storeys"]:
        same("storey " + s["storey"], storeys[s["storey"]][11], thousands(s["cost"]["total"]))
    classes = {row[0]: row for row in page.table("Walls that ask")}
    for c in a["classes"]:
        same("class " + c["class"], [classes[c["class"]][i] for i in (1, 2, 4)], [c["type"] or "none", str(c["rows"]), c["words"]])
    if a["drawings"]:
        for d in a["drawings"]["types"]:
            holds(page, "drawn " + d["mark"], d["line"])
        holds(page, "saving", thousands(a["drawings"]["saving_total"]))
    holds(page, "tests", a["tests"]["words"])
    for caution in a["cautions"]:
        holds(page, "caution", caution)


def long_rows():
    targets = ["45", "50", "52", "55", "57", "60"]
    fires = ["0", "60", "120"]
    return [["W-%03d" % i, str(1 + i % 5), "room %d" % i, "room %d" % (i + 1), "%dft" % (8 + i % 17), "9ft", targets[i % 6],
             fires[i % 3], str(1 + i % 2), "P1" if i % 2 else ""] for i in range(ROWS)]


answer, page = run(write_project(long_rows(), types={"P1": {"line": "2*typex-16 | steel-92-18@610, glass-89 | 2*typex-16"}}), 0)
compare(answer, page)
if len(page.source.encode()) >= MOST_BYTES:
    faults.append("the page of %d rows has %d bytes" % (ROWS, len(page.source.encode())))
some = long_rows()[:6] + [["W-none", "1", "room", "room", "12ft", "9ft", "95", "0", "1", ""]]
answer, page = run(write_project(some, max_types=2), 1)
compare(answer, page)
for fault in faults[:40]:
    print(fault)
print("%d facts compared, %d faults" % (compared, len(faults)))
sys.exit(1 if faults or compared < ROWS else 0)
