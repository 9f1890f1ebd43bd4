"""Texts of the user's files are data: on every page they stand as they were written, and are nothing else. Only what XML
forbids, control characters and the characters that turn the letters around them become U+FFFD."""
import csv
import json
import os
import re
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))
from page import Page  # noqa: E402

source, build = sys.argv[1:3]
septum = os.path.join(build, "bin", "septum")
work = tempfile.mkdtemp()
faults = []

TEXTS = {
    "script": "<script>alert(1)</script>",
    "end of title": "</title></h1></style><script src=//x.example/a.js></script><svg onload=alert(1)>",
    "comment": "<!-- --> <![CDATA[ ]]> <?xml ?> &amp; &lt; &#60; &nbsp;",
    "quotes": "\"double\" 'single' `back` = ' onmouseover=\"alert(1)",
    "right to left": "\u05d7\u05d3\u05e8 \u05e9\u05d9\u05e0\u05d4 / \u063a\u0631\u0641\u0629 \u0646\u0648\u0645 12",
    "override": "abc\u202etxt.exe\u202c def\u2066ghi\u2069",
    "control": "bell\u0007 escape\u001b[31m delete\u007f nel\u0085",
    "formula": "=1+1",
    "wide": "\U0001f9f1 \u6d74\u5ba4 Z\u0351\u036b\u0343\u036a\u0302 \ufffe",
    "long": "W" * 9000 + " " + "long words " * 90,
    "blank": " \t ",
}
# What page and XML cannot hold, as docs/formats/answers.md says.
BARRED = re.compile("[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f-\u009f\u202a-\u202e\u2066-\u2069\ufffe\uffff]")


def shown(text):
    return " ".join(BARRED.sub("\ufffd", text).split())


def write(name, value):
    path = os.path.join(work, name)
    with open(path, "w", encoding="utf-8") as file:
        file.write(value if isinstance(value, str) else json.dumps(value))
    return path


def hostile_book(text):
    with open(os.path.join(source, "prices", "kestrel-yard.json"), encoding="utf-8") as file:
        book = json.load(file)
    for key in ("name", "place", "source"):
        book[key] = text
    for item in book["items"]:
        item["name"] = text
        if "bought_as" in item:
            item["bought_as"] = text
    return write("book.json", book)


def hostile_brief(text, prices):
    with open(os.path.join(source, "docs", "examples", "party-wall.json"), encoding="utf-8") as file:
        brief = json.load(file)
    brief["title"] = text
    brief["sides"]["a"]["room"] = brief["sides"]["b"]["room"] = text
    brief["openings"] = [{"kind": text, "area_ft2": 20, "stc": 35}]
    brief["prices"] = prices
    return write("brief.json", brief)


def hostile_project(text, prices):
    name = re.sub(r"\s+", " ", text).strip() or "none"
    with open(os.path.join(work, "walls.csv"), "w", encoding="utf-8", newline="") as file:
        out = csv.writer(file)
        out.writerow(["id", "storey", "from", "to", "length", "height", "target"])
        for i in range(3):
            out.writerow(["%s %d" % (name[:200], i), name[:200], name, name, "20ft", "9ft", "45"])
    return write("project.json", {"septum": "project/1", "title": text, "walls": "walls.csv", "units": "us", "max_types": 1,
                                  "quantity_breaks": False, "only": ["frame:steel-92-*"], "prices": prices})


def check(name, arguments, text, wanted):
    path = os.path.join(work, "page.html")
    if os.path.exists(path):
        os.remove(path)
    done = subprocess.run([septum] + arguments + ["--html", path], stdout=subprocess.DEVNULL, stderr=subprocess.PIPE)
    if done.returncode not in (0, 1) or not os.path.exists(path):
        faults.append("%s: exit %d: %s" % (name, done.returncode, done.stderr.decode()[:400]))
        return
    page = Page(path)
    faults.extend("%s: %s" % (name, words) for words in page.faults)
    # Data stands between the tags, whole: the title as the heading, names among the words.
    found = page.body_text()
    for what, words in wanted.items():
        if shown(words) not in found:
            faults.append("%s: %s is not on the page" % (name, what))
    # Raw characters that would steer a reader are not in the file at all.
    if BARRED.search(page.source):
        faults.append("%s: the file holds barred characters" % name)
    heading = next(page.root.iter("h1"))
    if shown(text) and shown(wanted.get("title", text)) == shown(text) and page.text(heading) != shown(text):
        faults.append("%s: the heading is %r" % (name, page.text(heading)[:80]))
    if heading.get("dir") != "auto" and shown(text):
        faults.append("%s: the heading has no direction of its own" % name)


LINE = "2*typex-16 | wood-89-double@406, glass-89, glass-89 | 2*typex-16"
for kind, text in TEXTS.items():
    prices = hostile_book(text if text.strip() else "x")
    brief = hostile_brief(text, prices)
    whole = {"title": text, "room": text}
    wall = write("wall.json", {"septum": "wall/1", "name": text, "side_a": ["typex-16"], "side_b": ["typex-16"],
                               "frame": {"id": "wood-89", "spacing_mm": 406}, "fill": ["glass-89"]})
    check(kind + ", rate", ["rate", LINE, "--brief", brief], text, dict(whole, item=text))
    check(kind + ", rate by name", ["rate", wall, "--prices", prices], text, {"title": text, "item": text})
    if kind in ("script", "end of title", "quotes", "right to left", "long"):
        check(kind + ", pick", ["pick", brief], text, dict(whole, item=text))
        check(kind + ", ladder", ["ladder", brief, "--from", "50", "--to", "52"], text, whole)
        check(kind + ", trim", ["trim", brief, "--spec", LINE, "--count", "1"], text, whole)
        check(kind + ", plan", ["plan", hostile_project(text, prices)], text, {"title": text, "room": text})
for fault in faults[:40]:
    print(fault)
print("%d texts, %d faults" % (len(TEXTS), len(faults)))
sys.exit(1 if faults else 0)
