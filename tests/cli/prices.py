"""`septum prices` checked by a second reader of CSV and JSON: see check_prices.sh. Standard library only."""
import csv, io, json, os, random, shutil, subprocess, sys, tempfile

source, build = sys.argv[1], sys.argv[2]
PAGE = 100
faults = 0
# One of each unit of a price book in its SI unit; exact: international foot.
SI = {"m2": 1.0, "ft2": 0.3048 ** 2, "m": 1.0, "ft": 0.3048, "each": 1.0}


def say(where, message):
    global faults
    faults += 1
    print("%s: %s" % (where, message))


def run(*words):
    done = subprocess.run([build + "/bin/septum", "prices", *words], capture_output=True)
    return done.returncode, done.stdout.decode("utf-8"), done.stderr.decode("utf-8")


def load(path):
    with open(path, encoding="utf-8") as f:
        return json.load(f)


def read(path):
    with open(path, "rb") as f:
        return f.read()


def price_of(item):
    """Per unit of the item."""
    return item["price"] if "price" in item else item["price_bought"] / item["bought_quantity"]


def check_list(book):
    """The list says what the book says, and read back it changes nothing, to the byte."""
    where = "list of " + os.path.basename(book)
    status, out, err = run("--to-csv", "-", "--prices", book)
    if status != 0:
        return say(where, "exit %d: %s" % (status, err))
    rows = list(csv.DictReader(io.StringIO(out, newline="")))
    items = load(book)["items"]
    if "base" not in load(book):
        if [r["code"] for r in rows] != [i["code"] for i in items]:
            say(where, "other codes")
        for row, item in zip(rows, items):
            holds = float(row["unit"].split()[0]) if " " in row["unit"] else 1.0
            if row["unit"].split()[-1] != item["unit"] or row["description"] != item["name"]:
                say(where, "%s: other words" % item["code"])
            if abs(float(row["price"]) / holds - price_of(item)) > 1e-8:
                say(where, "%s: other price" % item["code"])
            for key in ("waste", "hours", "hours_each", "bought_quantity", "minimum_order"):
                if abs(float(row[key] or 0) - item.get(key, 0)) > 1e-8:
                    say(where, "%s: other %s" % (item["code"], key))
    folder = os.path.dirname(book)
    listed, again = folder + "/list.csv", folder + "/again.json"
    for form in ("as written", "semicolons", "mark and LF"):
        words = out
        if form == "semicolons":
            table = io.StringIO(newline="")
            csv.writer(table, delimiter=";").writerows(csv.reader(io.StringIO(out, newline="")))
            words = table.getvalue()
        elif form == "mark and LF":
            words = "\ufeff" + out.replace("\r\n", "\n")
        with open(listed, "w", encoding="utf-8", newline="") as f:
            f.write(words)
        status, text, err = run("--from-csv", listed, "--prices", book, "--write", again)
        if status != 0 or err:
            say(where, "%s: exit %d: %s" % (form, status, err))
        elif read(again) != read(book):
            say(where, "%s: reading it back changes the book" % form)
        elif "Changes     none." not in text:
            say(where, "%s: changes are shown" % form)
        for path in (listed, again):
            if os.path.exists(path):
                os.unlink(path)


# The rows of docs/examples/supplier-prices.csv by hand: listed price over what its unit holds, in the book's unit.
BY_HAND = {
    "typex-16": 22.40 / 40, "typec-16": 715.00 / 1000, "gyp-13": 20.64 / 48, "abuse-16": 1.10, "gyp-16": 5.60 * 0.3048 ** 2,
    "osb-11": 18.24 / 32, "wood-89": 548.00 / 1000, "steel-92-18": 8.10 / 10, "track-92-18": 7.40 / 10,
    "glass-89-15in": 49.35 / 88.12, "channel": 70.80 / 120, "sealant": 9.60 / 85, "screw": 14.50 / 1000,
}


def check_demo(folder):
    where = "supplier-prices.csv"
    book, listed, new = folder + "/prices/kestrel-yard.json", folder + "/docs/examples/supplier-prices.csv", folder + "/new.json"
    words = ("--from-csv", listed, "--prices", book)
    before = read(book)
    status, text, err = run(*words)
    if status != 0 or err:
        say(where, "exit %d: %s" % (status, err))
    for line in text.splitlines():
        if len(line) > PAGE:
            say(where, "%d columns: %s" % (len(line), line))
    if os.path.exists(new) or read(book) != before:
        say(where, "something was written without --write")
    status, out, err = run(*words, "--write", new, "--json")
    data, old, found = json.loads(out), load(book), load(new)
    if data["written"] != new:
        say(where, "says it wrote %s" % data["written"])
    touched = {l["code"]: l for l in data["lines"] if l["kind"] in ("changed", "confirmed", "new")}
    if set(touched) != set(BY_HAND):
        say(where, "touches %s" % sorted(set(touched) ^ set(BY_HAND)))
    for one, other in zip(old["items"], found["items"]):
        code = one["code"]
        if code not in BY_HAND:
            if one != other:
                say(where, "%s changed" % code)
            continue
        if abs(price_of(other) - BY_HAND[code]) > 1e-6:
            say(where, "%s costs %s, by hand %s" % (code, price_of(other), BY_HAND[code]))
        rest = {k: v for k, v in other.items() if k not in ("price", "price_bought", "date", "source")}
        if rest != {k: v for k, v in one.items() if k not in ("price", "price_bought")}:
            say(where, "%s: more than price, date and source changed" % code)
        row = list(csv.DictReader(io.StringIO(read(listed).decode(), newline="")))[touched[code]["row"] - 2]
        if other["date"] != row["date"] or other["source"] != "supplier-prices.csv, row %d" % touched[code]["row"]:
            say(where, "%s: dated %s, from %s" % (code, other["date"], other["source"]))
        expected = 100 * (touched[code]["after"] / touched[code]["before"] - 1)
        if abs(touched[code]["percent"] - expected) > 0.051:
            say(where, "%s: %s %%" % (code, touched[code]["percent"]))
        if touched[code]["age_days"] != {"2031-06-02": 0, "2031-05-20": 13}[row["date"]]:
            say(where, "%s is %s days old" % (code, touched[code]["age_days"]))
    if {k: v for k, v in old.items() if k != "items"} != {k: v for k, v in found.items() if k != "items"}:
        say(where, "the book's own keys changed")
    kinds = {l["row"]: l["kind"] for l in data["lines"]}
    if (kinds[15], kinds[16], kinds[17], kinds[18]) != ("no-price", "unmatched", "ambiguous", "unmatched"):
        say(where, "rows 15 to 18 are %s" % [kinds[r] for r in (15, 16, 17, 18)])
    # The new book with the same list: nothing to do.
    if "Changes     none." not in run("--from-csv", listed, "--prices", new)[1]:
        say(where, "a second time it changes something")


def check_base(folder):
    """Prices of a book that builds on another are written into that book, and only there."""
    where = "upriver-prices.json"
    book, listed = folder + "/docs/examples/upriver-prices.json", folder + "/docs/examples/supplier-prices.csv"
    below = read(folder + "/prices/kestrel-yard.json")
    new = folder + "/docs/examples/new.json"
    status, out, err = run("--from-csv", listed, "--prices", book, "--write", new)
    if status != 0:
        return say(where, "exit %d: %s" % (status, err))
    found = {i["code"]: i for i in load(new)["items"]}
    for code, price in BY_HAND.items():
        if code == "sealant":
            price = 9.60
        if code not in found or abs(found[code].get("price", found[code].get("price_bought", 0)) - price) > 1e-6:
            say(where, "%s: %s" % (code, found.get(code)))
    if found["steel-92-18"]["waste"] != 0.03 or read(folder + "/prices/kestrel-yard.json") != below:
        say(where, "more than prices changed")
    if "Changes     none." not in run("--from-csv", listed, "--prices", new)[1]:
        say(where, "a second time it changes something")
    # Away from its base the book cannot be read, so it is not written.
    away = folder + "/away.json"
    status, out, err = run("--from-csv", listed, "--prices", book, "--write", away)
    if status != 3 or os.path.exists(away) or "E233" not in err:
        say(where, "written away from its base: exit %d" % status)


def check_new_items(folder):
    """A book is filled: items that it lacks come from lines that are whole."""
    where = "new items"
    book, listed, new = folder + "/thin.json", folder + "/thin.csv", folder + "/filled.json"
    full = load(folder + "/prices/kestrel-yard.json")
    full["items"] = [i for i in full["items"] if i["code"] not in ("typex-16", "sealant", "finish-4")]
    with open(book, "w", encoding="utf-8") as f:
        json.dump(full, f)
    status, out, err = run("--to-csv", listed, "--prices", folder + "/prices/kestrel-yard.json")
    status, out, err = run("--from-csv", listed, "--prices", book, "--write", new, "--json")
    if status != 3 or "E235" not in err or os.path.exists(new):
        say(where, "sealant by 85 ft is no unit of a new item: exit %d" % status)
    words = read(listed).decode().replace("85 ft,9,", "ft,0.105882,")
    with open(listed, "w", encoding="utf-8", newline="") as f:
        f.write(words)
    status, out, err = run("--from-csv", listed, "--prices", book, "--write", new, "--json")
    data = json.loads(out)
    if sorted(l["code"] for l in data["lines"] if l["kind"] == "new") != ["finish-4", "sealant", "typex-16"] or data["unpriced"]:
        say(where, "added %s" % data["rows"])
    whole = {i["code"]: i for i in load(folder + "/prices/kestrel-yard.json")["items"]}
    for item in load(new)["items"]:
        for key in ("name", "section", "unit", "waste", "hours", "trade", "bought_as", "bought_quantity"):
            if item.get(key, 0) != whole[item["code"]].get(key, 0):
                say(where, "%s: %s is %s" % (item["code"], key, item.get(key)))
        if abs(price_of(item) - price_of(whole[item["code"]])) > 1e-6:
            say(where, "%s: other price" % item["code"])


FAULTY = {
    "a bad number": "code,unit,price\ntypex-16,ft2,call\n",
    "a bad unit": "code,unit,price\ntypex-16,ft2,0.5\ngyp-16,hogshead,1\n",
    "an open quote": "code,unit,price\ntypex-16,ft2,0.5\ngyp-16,\"ft2,0.5\n",
    "no columns": "typex-16,ft2,0.5\n",
    "two prices": "code,unit,price\ntypex-16,ft2,0.5\ntypex-16,ft2,0.6\n",
    "another currency": "code,unit,price,currency\ntypex-16,ft2,0.5,EUR\n",
    "nothing": "",
}


def check_faults(folder):
    """Nothing is written on any fault: an old file stays as it was."""
    listed, out_path = folder + "/faulty.csv", folder + "/out.json"
    for name, words in FAULTY.items():
        with open(listed, "w", encoding="utf-8", newline="") as f:
            f.write(words)
        with open(out_path, "w", encoding="utf-8") as f:
            f.write("old")
        status, out, err = run("--from-csv", listed, "--prices", folder + "/prices/kestrel-yard.json", "--write", out_path)
        if status != 3 or "error[E" not in err or out or read(out_path) != b"old":
            say(name, "exit %d, %s" % (status, err))
    files = sorted(os.listdir(folder))
    if [f for f in files if f.endswith(".tmp")]:
        say("faults", "left behind: %s" % files)


def check_damage(folder):
    """Damaged lists end in an answer or in faults, never otherwise, and write nothing with a fault."""
    seeded = random.Random(20310301)
    good = read(folder + "/docs/examples/supplier-prices.csv")
    listed, out_path = folder + "/damaged.csv", folder + "/damaged.json"
    for i in range(150):
        words = bytearray(good)
        for _ in range(seeded.randint(1, 6)):
            at = seeded.randrange(len(words))
            words[at:at + seeded.randint(0, 3)] = bytes(seeded.choice(b'",;\r\n\x00\xff x19.-=') for _ in range(seeded.randint(0, 3)))
        with open(listed, "wb") as f:
            f.write(words)
        status, out, err = run("--from-csv", listed, "--prices", folder + "/prices/kestrel-yard.json", "--write", out_path)
        there = os.path.exists(out_path)
        if status not in (0, 3) or there != (status == 0) or (status == 3) != ("error[E" in err):
            say("damage %d" % i, "exit %d, written: %s, %s" % (status, there, err[:300]))
        if there:
            load(out_path)
            os.unlink(out_path)


with tempfile.TemporaryDirectory() as work:
    shutil.copytree(source + "/prices", work + "/prices")
    shutil.copytree(source + "/docs/examples", work + "/docs/examples")
    check_list(work + "/prices/kestrel-yard.json")
    check_list(work + "/docs/examples/upriver-prices.json")
    check_demo(work)
    check_base(work)
    check_new_items(work)
    check_faults(work)
    check_damage(work)
print("%d faults" % faults)
sys.exit(1 if faults else 0)
