"""What a browser makes of the pages: see check_browser_pages.sh."""
import html
import json
import os
import re
import shutil
import subprocess
import sys
import tempfile

source, build, browser = sys.argv[1:4]
septum = os.path.join(build, "bin", "septum")
work = tempfile.mkdtemp()
faults = []
LINE = "2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16"


def example(name):
    return os.path.join(source, "docs", "examples", name + ".json")


PAGES = {
    "rate": ["rate", LINE],
    "pick": ["pick", example("party-wall")],
    "none": ["pick", example("impossible")],
    "ladder": ["ladder", example("one-hour"), "--have", "typex-16 | steel-92-18@610 | typex-16"],
    "trim": ["trim", example("party-wall"), "--spec", example("specified-party-wall"), "--count", "3"],
    "plan": ["plan", os.path.join(work, "project.json")],
}
# Widths in CSS pixels: a telephone and a desk.
WIDTHS = (400, 1280)
# Headings of pages are alike; one that is smaller by more than this share is of a page that was shrunk.
SHRUNK = 0.01
# Of 255: how far paper and ink are apart at least in relative lightness of the screen's values.
LIGHTER_BY = 150
# The test looks at the pages from outside, through frames as wide as a window would be.
PROBE = """<script>
function light(c) { var n = c.match(/[0-9.]+/g).map(Number); return 0.2126 * n[0] + 0.7152 * n[1] + 0.0722 * n[2]; }
function look(frame) {
  var w = frame.contentWindow, d = frame.contentDocument, seen = [], body = w.getComputedStyle(d.body);
  d.querySelectorAll('main *, header *, footer *').forEach(function (e) {
    if (e.closest('.scroll, .chart, svg')) return;
    var box = e.getBoundingClientRect();
    if (box.right > w.innerWidth + 1 || box.left < -1) seen.push(e.tagName + ' ' + (e.textContent || '').slice(0, 40));
  });
  return {name: frame.name, width: frame.width, inner: w.innerWidth, scroll: d.documentElement.scrollWidth, beyond: seen.slice(0, 5),
          dark: w.matchMedia('(prefers-color-scheme: dark)').matches, paper: light(body.backgroundColor), ink: light(body.color)};
}
addEventListener('load', function () {
  var found = Array.prototype.map.call(document.querySelectorAll('iframe'), look);
  document.body.textContent = 'PROBE ' + JSON.stringify(found) + ' END';
});
</script>"""


def run_browser(arguments, url):
    profile = tempfile.mkdtemp(dir=work)
    done = subprocess.run([browser, "--headless", "--no-sandbox", "--disable-gpu", "--hide-scrollbars", "--user-data-dir=" + profile]
                          + arguments + [url], stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, timeout=120)
    shutil.rmtree(profile, ignore_errors=True)
    return done.stdout.decode("utf-8", "replace")


def probe(paths, dark):
    frames = os.path.join(work, "frames.html")
    with open(frames, "w", encoding="utf-8") as file:
        file.write("<!DOCTYPE html><meta charset=utf-8><title>frames</title>" + PROBE)
        for name, path in paths.items():
            for width in WIDTHS:
                file.write('<iframe name="%s" width="%d" height="900" src="file://%s"></iframe>' % (name, width, path))
    out = run_browser(["--allow-file-access-from-files", "--window-size=1400,900", "--dump-dom"]
                      + (["--blink-settings=preferredColorScheme=0"] if dark else []), "file://" + frames)
    found = re.search(r"PROBE (\[.*\]) END", out, re.S)
    seen = json.loads(html.unescape(found.group(1))) if found else []
    if len(seen) != len(paths) * len(WIDTHS):
        faults.append("the browser tells of %d frames" % len(seen))
    for page in seen:
        where = "%s at %s px%s" % (page["name"], page["width"], ", dark" if dark else "")
        if page["inner"] != int(page["width"]):
            faults.append("%s: the window is %d px" % (where, page["inner"]))
        if page["scroll"] > page["inner"] or page["beyond"]:
            faults.append("%s: %d px wide; beyond: %s" % (where, page["scroll"], page["beyond"]))
        if page["dark"] != dark or (page["paper"] < page["ink"]) != dark or abs(page["paper"] - page["ink"]) < LIGHTER_BY:
            faults.append("%s: paper and ink are %s" % (where, page))


def print_page(name, path, inches):
    """Words of every sheet with their boxes, by pdftotext."""
    sized = os.path.join(work, "sized.html")
    with open(path, encoding="utf-8") as file:
        text = file.read()
    with open(sized, "w", encoding="utf-8") as file:
        file.write(text.replace("</style>", "@page{size:%gin %gin}</style>" % inches))
    pdf = os.path.join(work, "page.pdf")
    run_browser(["--no-pdf-header-footer", "--print-to-pdf=" + pdf], "file://" + sized)
    boxes = os.path.join(work, "page.xml")
    subprocess.run(["pdftotext", "-bbox", pdf, boxes], check=True)
    with open(boxes, encoding="utf-8") as file:
        text = file.read()
    sheets = []
    for sheet in re.findall(r"<page [^>]*>.*?</page>", text, re.S):
        size = [float(x) for x in re.search(r'width="([\d.]+)" height="([\d.]+)"', sheet).groups()]
        words = [tuple(float(x) for x in m[:4]) + (m[4],) for m in
                 re.findall(r'<word xMin="([-\d.]+)" yMin="([-\d.]+)" xMax="([-\d.]+)" yMax="([-\d.]+)">(.*?)</word>', sheet)]
        sheets.append((size, words))
    return sheets


def check_print(name, path, paper, inches):
    sheets = print_page(name, path, inches)
    if not sheets:
        faults.append("%s on %s: no sheet" % (name, paper))
        return 0
    for number, (size, words) in enumerate(sheets, 1):
        if abs(size[0] - 72 * inches[0]) > 1 or abs(size[1] - 72 * inches[1]) > 1:
            faults.append("%s: the sheet is %s" % (name, size))
        out = [w[4] for w in words if w[0] < 1 or w[2] > size[0] - 1 or w[3] > size[1] - 1]
        if out:
            faults.append("%s on %s, sheet %d: beyond the paper: %s" % (name, paper, number, out[:6]))
    # A browser shrinks the whole page until its widest part fits: then the heading is smaller than the style sheet has it.
    with open(path, encoding="utf-8") as file:
        page = file.read()
    first = re.search(r"<h1[^>]*>([^\s<]+)", page).group(1)
    heading = max(w[3] - w[1] for w in sheets[0][1] if w[4] == first)
    headings["%s on %s" % (name, paper)] = heading
    text = " ".join(w[4] for _, words in sheets for w in words)
    captions = re.findall(r"<caption[^>]*>([^<&]*)</caption>", page)
    for caption in captions:
        if " ".join(caption.split()) not in text:
            faults.append("%s on %s: %s is not printed" % (name, paper, caption))
    return len(sheets)


def write_project():
    with open(os.path.join(work, "walls.csv"), "w", encoding="utf-8") as file:
        file.write("id,storey,from,to,length,height,target,fire\n")
        for i in range(60):
            file.write("W-%02d,%d,living room of flat %d,corridor,%dft,9ft,%d,60\n" % (i, 1 + i % 4, i, 10 + i % 9, 45 + 5 * (i % 3)))
    with open(os.path.join(work, "project.json"), "w", encoding="utf-8") as file:
        file.write('{"septum":"project/1","title":"Sixty walls (invented)","walls":"walls.csv","code":"ibc",'
                   '"quantity_breaks":false,"only":["frame:steel-*"]}')


write_project()
sheets = {}
paths = {}
headings = {}
for name, arguments in PAGES.items():
    path = os.path.join(work, name + ".html")
    done = subprocess.run([septum] + arguments + ["--html", path], stdout=subprocess.DEVNULL, stderr=subprocess.PIPE)
    if not os.path.exists(path):
        faults.append("%s: %s" % (name, done.stderr.decode()))
        continue
    paths[name] = path
for dark in (False, True):
    probe(paths, dark)
for name, path in paths.items():
    sheets[name] = [check_print(name, path, "A4", (210 / 25.4, 297 / 25.4))]
    if name in ("trim", "plan"):  # the widest tables
        sheets[name].append(check_print(name, path, "Letter", (8.5, 11)))
shutil.rmtree(work, ignore_errors=True)
for where, height in headings.items():
    if height < (1 - SHRUNK) * max(headings.values()):
        faults.append("%s: shrunk to the paper, the heading is %.1f pt high" % (where, height))
for fault in faults:
    print(fault)
print("%d pages, sheets in A4 and Letter: %s; %d faults" % (len(PAGES), sheets, len(faults)))
sys.exit(1 if faults else 0)
