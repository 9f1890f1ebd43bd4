"""Takeoff files read back by the csv module and openpyxl, their figures worked out again in cents: see check_takeoff.sh."""
import csv, io, json, math, os, re, subprocess, sys, tempfile
import openpyxl
from sheetread import check_book

source, build = sys.argv[1], sys.argv[2]
faults = 0
# One of each printed unit in its SI unit; exact: international foot.
SI = {"m2": 1.0, "ft2": 0.3048 ** 2, "m": 1.0, "ft": 0.3048, "each": 1.0}
# Figures of CSV have six digits, so a count of packages may be cut there.
SLACK = 1e-5
WALLS = [
    "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16",
    "typex-16 | rc@610 | on osb-11 | wood-89@406, glass-89 | typex-16",
    "gyp-13 + mlv-5 | wood-89-double@406~50, glass-89, glass-89 | typex-16 + osb-11",
    "typec-13 | steel-92-33@406, stone-76 | typec-13",
]
# A long wall passes quantity breaks, a short one stays below minimum orders.
BRIEFS = {"reference": None, "long": {"length_ft": 260, "height_ft": 12}, "short": {"length_m": 2, "height_m": 2.4}}


def say(where, message):
    global faults
    faults += 1
    print("%s: %s" % (where, message))


def run(*words):
    done = subprocess.run([build + "/bin/septum", *words], capture_output=True)
    return done.returncode, done.stdout.decode("utf-8"), done.stderr.decode("utf-8")


def cents(words):
    """Money in text as whole cents, exactly."""
    match = re.fullmatch(r"(\d+)\.(\d\d)", words)
    if match is None:
        raise ValueError("no money: " + words)
    return 100 * int(match.group(1)) + int(match.group(2))


def rounded(amount):
    """Half-up; a hair above for decimals that binary cuts."""
    return math.floor(100 * amount + 0.5 + 1e-7)


with open(source + "/prices/kestrel-yard.json", encoding="utf-8") as opened:
    BOOK = json.load(opened)
ITEMS = {i["code"]: i for i in BOOK["items"]}


def check_buy(where, row, needed):
    """Packages, minimum order and break of one material from the price book alone; all in SI."""
    item = ITEMS[row["item"]]
    si = SI[item["unit"]]
    wanted = max(needed, item.get("minimum_order", 0) * si)
    stud = re.fullmatch(r"stud (.*)", row["buy_as"])
    if stud and stud.group(1) != "stock length":
        words = stud.group(1)
        if words.endswith(" m"):
            package = None # printed to the centimetre: the quantity bought tells
        elif "-" in words:
            whole, part = words[:-3].split("-")
            over, under = part.split("/")
            package = (int(whole) + int(over) / int(under)) * 0.0254
        else:
            package = float(words[:-3]) * 0.3048
    else:
        package = item["bought_quantity"] * si if "bought_quantity" in item else SI[row["unit"]]
        if "bought_quantity" in item and row["buy_as"] != item["bought_as"]:
            say(where, "%s is bought as %s" % (row["item"], row["buy_as"]))
    count, bought = int(row["buy"]), float(row["buy_quantity"]) * SI[row["unit"]]
    if package is None:
        package = bought / count
    if abs(count * package - bought) > SLACK * bought:
        say(where, "%s: %d x %g is not %g" % (row["item"], count, package, bought))
    if count * package < wanted * (1 - SLACK) or (count - 1) * package >= wanted * (1 + SLACK):
        say(where, "%s: %d packages of %g for %g" % (row["item"], count, package, wanted))
    price = item.get("price", item.get("price_bought", 0) / item.get("bought_quantity", 1)) / si
    note = []
    if item.get("minimum_order", 0) * si > needed:
        note.append("minimum order")
    reached = [b for b in item.get("breaks", []) if bought >= b["from"] * si * (1 - SLACK)]
    if reached:
        price = reached[-1]["price"] / si
        note.append("price from")
    for words in ("minimum order", "price from"):
        if (words in note) != (words in row["buy_note"]):
            say(where, "%s: note is \"%s\"" % (row["item"], row["buy_note"]))
    if rounded(bought * price) != cents(row["buy_amount"]):
        say(where, "%s: %s for %g at %g" % (row["item"], row["buy_amount"], bought, price))
    return note


def check_csv(where, words, data, text):
    rows = list(csv.DictReader(io.StringIO(words, newline="")))
    lines, total = rows[:-1], rows[-1]
    amounts = sum(cents(r["amount"]) for r in lines)
    if total["kind"] != "total" or amounts != cents(total["amount"]) or amounts != round(100 * data["cost"]["total"]):
        say(where, "lines add up to %d, total %s, answer %s" % (amounts, total["amount"], data["cost"]["total"]))
    if "{:,.2f}".format(amounts / 100) not in text:
        say(where, "the text has another total")
    key = lambda l: (l["item"], l["section"] or "", l["kind"], round(100 * float(l["amount"])))
    if sorted(map(key, lines)) != sorted(map(key, data["cost"]["lines"])):
        say(where, "other lines than the answer")
    sections = [r["section"] for r in lines]
    named = [s for s in sections if s]
    if named != sorted(named) or sections[:len(named)] != named:
        say(where, "not by section")
    for r in lines:
        if r["kind"] != "markup" and abs(rounded(float(r["quantity"]) * float(r["rate"])) - cents(r["amount"])) > 1:
            say(where, "%s: %s x %s is not %s" % (r["item"], r["quantity"], r["rate"], r["amount"]))
    needed, notes = {}, set()
    for r in lines:
        if r["kind"] == "material":
            needed[r["item"]] = needed.get(r["item"], 0) + float(r["quantity"]) * SI[r["unit"]]
    bought = [r for r in lines if r["buy"]]
    if sorted(r["item"] for r in bought) != sorted(needed):
        say(where, "not every material is bought once")
    for r in bought:
        notes.update(check_buy(where, r, needed[r["item"]]))
    if sum(cents(r["buy_amount"]) for r in bought) != cents(total["buy_amount"]):
        say(where, "what is bought does not add up")
    return rows, notes


def check_xlsx(where, path, rows, data):
    whole = check_book(path, lambda words: say(where, words))
    book, held = whole.cells, whole.held
    if whole.names[:3] != ["Summary", "Takeoff", "Buy list"]:
        return say(where, "sheets %s" % whole.names)
    lines = [[c.value for c in line] for line in book["Takeoff"].iter_rows(min_row=2)]
    if len(lines) != len(rows):
        say(where, "%d lines, CSV has %d" % (len(lines), len(rows)))
    for row, line in zip(rows[:-1], lines):
        if not all(isinstance(line[i], (int, float)) for i in (4, 6, 7)):
            say(where, "figures are no numbers: %s" % line)
        elif round(100 * line[7]) != cents(row["amount"]) or abs(line[4] - float(row["quantity"])) > 1e-6 or line[2] != row["name"]:
            say(where, "other line than CSV: %s" % line)
    total = round(100 * data["cost"]["total"])
    last = held["Takeoff"].max_row
    if round(100 * held["Takeoff"]["H%d" % last].value) != total:
        say(where, "total of the takeoff")
    summary = {line[0].value: line[1].value for line in held["Summary"].iter_rows() if line[0].value}
    if round(100 * summary["Total"]) != total or summary["Wall"] != data["line"]:
        say(where, "summary: %s" % summary)
    buys = [[c.value for c in line] for line in held["Buy list"].iter_rows(min_row=2)]
    bought = [r for r in rows[:-1] if r["buy"]]
    for row, line in zip(bought, buys):
        if (line[1], line[5], line[6], round(100 * line[9])) != (row["item"], int(row["buy"]), row["buy_as"], cents(row["buy_amount"])):
            say(where, "other purchase than CSV: %s" % line)
    if len(buys) != len(bought) + 1 or round(100 * buys[-1][9]) != cents(rows[-1]["buy_amount"]):
        say(where, "total of the buy list")


def check(folder, wall, brief, units):
    where = "%s, %s, %s" % (wall, brief, units)
    words = ["rate", wall, "--units", units]
    if BRIEFS[brief] is not None:
        path = folder + "/brief.json"
        with open(path, "w", encoding="utf-8") as f:
            json.dump({"septum": "brief/1", "title": "=1+1", "wall": BRIEFS[brief], "target": {"metric": "STC", "value": 40}}, f)
        words += ["--brief", path]
    table, sheet, again = folder + "/t.csv", folder + "/t.xlsx", folder + "/again.xlsx"
    status, text, err = run(*words, "--csv", table, "--xlsx", sheet)
    if status != 0:
        say(where, "exit %d: %s" % (status, err))
        return set()
    data = json.loads(run(*words, "--json", "--xlsx", again)[1])
    with open(sheet, "rb") as one, open(again, "rb") as other:
        if one.read() != other.read():
            say(where, "two runs give two spreadsheets")
    with open(table, encoding="utf-8", newline="") as f:
        rows, notes = check_csv(where, f.read(), data, text)
    check_xlsx(where, sheet, rows, data)
    if BRIEFS[brief] is not None and openpyxl.load_workbook(sheet)["Summary"]["B3"].data_type != "s":
        say(where, "a title that starts with = is not kept as text")
    return notes


def check_pick(folder):
    """`pick` writes the takeoff of the wall that it chose."""
    brief, table, sheet = source + "/docs/examples/party-wall.json", folder + "/p.csv", folder + "/p.xlsx"
    status, out, err = run("pick", brief, "--json", "--csv", table, "--xlsx", sheet)
    if status != 0:
        return say("pick", "exit %d: %s" % (status, err))
    chosen = json.loads(out)["chosen"]
    text = run("pick", brief)[1]
    with open(table, encoding="utf-8", newline="") as f:
        rows, _ = check_csv("pick", f.read(), chosen, text)
    check_xlsx("pick", sheet, rows, chosen)


def check_unpriced(folder):
    """A price book that lacks an item: no candidate has it, and every answer names it."""
    where, path = "no price for typex-16", folder + "/lacking.json"
    lacking = dict(BOOK, items=[i for i in BOOK["items"] if i["code"] != "typex-16"])
    with open(path, "w", encoding="utf-8") as f:
        json.dump(lacking, f)
    status, out, err = run("check", path)
    if status != 0 or 'warning[E232]' not in err or '"typex-16"' not in err:
        say(where, "check: exit %d, %s" % (status, err))
    brief = source + "/docs/examples/party-wall.json"
    status, out, err = run("pick", brief, "--prices", path, "--json")
    data = json.loads(out)
    used = [data["chosen"]["line"]] + [r["line"] for r in data["runners_up"]]
    if status != 0 or data["unpriced"] != ["typex-16"] or any("typex-16 " in l + " " for l in used):
        say(where, "pick: %s, %s" % (data["unpriced"], used))
    if "No price for typex-16" not in run("pick", brief, "--prices", path)[1]:
        say(where, "the text of pick does not say so")
    table, sheet = folder + "/l.csv", folder + "/l.xlsx"
    status, out, err = run("rate", "typex-16 | wood-89@406 | typex-16", "--prices", path, "--csv", table, "--xlsx", sheet)
    with open(table, encoding="utf-8", newline="") as f:
        lines = list(csv.reader(f))
    words = [c.value for line in openpyxl.load_workbook(sheet)["Summary"].iter_rows() for c in line]
    if status != 0 or len(lines) != 1 or "no price for typex-16" not in out or "E232" not in err:
        say(where, "rate: exit %d, %s" % (status, lines))
    if "\nTakeoff" in out or not any("no price for typex-16" in str(w) for w in words):
        say(where, "rate shows a takeoff that has no cost")


def check_refused(folder):
    """A spreadsheet that cannot be written leaves nothing behind."""
    path = folder + "/none/t.xlsx"
    status, out, err = run("rate", WALLS[0], "--xlsx", path)
    if status != 4 or out or "E402" not in err:
        say("no folder", "exit %d, %s" % (status, err))
    old = os.environ.get("TMPDIR")
    os.environ["TMPDIR"] = folder + "/none"
    status, out, err = run("rate", WALLS[0], "--xlsx", folder + "/t.xlsx")
    if old is None:
        del os.environ["TMPDIR"]
    else:
        os.environ["TMPDIR"] = old
    if status != 4 or "E402" not in err:
        say("no temporary folder", "exit %d, %s" % (status, err))


with tempfile.TemporaryDirectory() as work:
    status, out, err = run("rate", WALLS[0], "--xlsx", work + "/there.xlsx")
    if status == 4 and "E404" in err:
        if out or os.path.exists(work + "/there.xlsx"):
            say("without libxlsxwriter", "something was written")
        print("this build writes no spreadsheets: refused as it should be")
        sys.exit(1 if faults or os.environ.get("CI") or os.environ.get("SEPTUM_CI") else 0)
    seen = set()
    for wall_line in WALLS:
        for brief_name in BRIEFS:
            for units_name in ("us", "si"):
                seen |= check(work, wall_line, brief_name, units_name)
    if seen != {"minimum order", "price from"}:
        say("purchases", "these cases reach %s only" % seen)
    check_pick(work)
    check_unpriced(work)
    check_refused(work)
print("%d faults" % faults)
sys.exit(1 if faults else 0)
