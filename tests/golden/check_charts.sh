#!/bin/sh
# The golden charts, read by a strict XML parser: names and descriptions are there, references lead somewhere, every class is one
# of the style sheet, and nothing in them runs or fetches.
set -eu
python3 - "$1" <<'PYTHON'
import pathlib, re, sys
import xml.etree.ElementTree as tree

root = pathlib.Path(sys.argv[1])
style = (root / "src/report/chart_style.c").read_text() + (root / "src/report/chart.c").read_text()
classes = set(re.findall(r"\.(c-[a-z0-9]+|plot)", style)) | set(re.findall(r'\{"(c-[a-z]+)"', style))
allowed = {"svg", "title", "desc", "defs", "pattern", "clipPath", "g", "line", "rect", "circle", "polyline", "polygon", "path", "text"}
space = "{http://www.w3.org/2000/svg}"
bad = []
charts = sorted((root / "tests/golden/charts").glob("*.svg"))
for chart in charts:
    def fault(words):
        bad.append(f"{chart.name}: {words}")
    top = tree.parse(chart).getroot()
    ids = [e.get("id") for e in top.iter() if e.get("id")]
    if len(set(ids)) != len(ids): fault("an id stands twice")
    if not all(i.startswith("g-") for i in ids): fault("an id without the chart's own beginning")
    if top.tag != space + "svg" or top.get("role") != "img": fault("not an image")
    named = [e for e in top if e.get("id") in (top.get("aria-labelledby") or "").split()]
    if [e.tag for e in named] != [space + "title", space + "desc"]: fault("no title and description")
    if not all(e.text and e.text.strip() for e in named): fault("an empty name")
    for e in top.iter():
        if e.tag.removeprefix(space) not in allowed: fault(f"element {e.tag}")
        for key, value in e.attrib.items():
            if key.startswith("on") or "href" in key or key == "style": fault(f"attribute {key}")
            for name in re.findall(r"url\(#([^)]*)\)", value):
                if name not in ids: fault(f"no {name}")
        if e.get("class") and e.get("class") not in classes: fault(f"no class {e.get('class')}")
print("\n".join(bad))
sys.exit(1 if bad or len(charts) < 10 else 0)
PYTHON
