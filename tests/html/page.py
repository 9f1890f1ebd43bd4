"""What every page must be, whatever it says: read by a strict HTML parser and as XML, whole without
anything else, and in an order that a screen reader can follow."""
import re
import xml.etree.ElementTree as tree

import html5lib

SVG = "{http://www.w3.org/2000/svg}"


class Page:
    """A page that was read; faults are collected in `faults`."""

    def __init__(self, path):
        self.path = path
        with open(path, encoding="utf-8", newline="") as file:
            self.source = file.read()
        self.faults = []
        self.root = tree.fromstring(self.source)  # XML: raises where it is not well-formed
        parser = html5lib.HTMLParser(strict=True)  # raises at the first parse error
        self.html = parser.parse(self.source)
        self._check_outside()
        self._check_ids()
        self._check_headings()
        self._check_parts()
        self._check_drawings()
        self._check_tables()
        self._check_same_reading()

    def fault(self, words):
        self.faults.append("%s: %s" % (self.path, words))

    def text(self, element=None):
        return " ".join(" ".join((self.root if element is None else element).itertext()).split())

    def body_text(self):
        return self.text(self.root.find("body"))

    def _check_outside(self):
        """Nothing is fetched and nothing runs."""
        for element in self.root.iter():
            name = element.tag.replace(SVG, "")
            if name in ("script", "link", "img", "iframe", "object", "embed", "a", "form", "base", "video", "audio", "image",
                        "foreignObject", "animate", "set", "handler"):
                self.fault("holds <%s>" % name)
            for key, value in element.attrib.items():
                if key.startswith("on") or key in ("style", "srcdoc", "action", "formaction"):
                    self.fault("<%s %s>" % (name, key))
                if key.split("}")[-1] in ("href", "src", "srcset") and not value.startswith("#"):
                    self.fault("<%s %s=%r>" % (name, key, value))
                for target in re.findall(r"url\(([^)]*)\)", value):
                    if not target.startswith("#"):
                        self.fault("<%s %s=%r>" % (name, key, value))
        style = self.text(self.root.find("head/style"))
        for word in ("@import", "url(", "http:", "https:", "//", "expression"):
            if word in style:
                self.fault("the style sheet holds %s" % word)
        if len(list(self.root.iter("style"))) != 1:
            self.fault("not one <style>")

    def _check_ids(self):
        ids = [e.get("id") for e in self.root.iter() if e.get("id") is not None]
        for word in sorted(set(i for i in ids if ids.count(i) > 1)) if len(ids) != len(set(ids)) else []:
            self.fault("id %s stands twice" % word)
        known = set(ids)
        for element in self.root.iter():
            for word in (element.get("aria-labelledby") or "").split():
                if word not in known:
                    self.fault("aria-labelledby names %s, which is not there" % word)
            for value in element.attrib.values():
                for target in re.findall(r"url\(#([^)]*)\)", value):
                    if target not in known:
                        self.fault("url(#%s) is not there" % target)

    def _check_headings(self):
        level = 0
        count = {1: 0}
        for element in self.root.iter():
            if not re.fullmatch(r"h[1-6]", element.tag):
                continue
            new = int(element.tag[1])
            count[new] = count.get(new, 0) + 1
            if new > level + 1:
                self.fault("h%d after h%d: %s" % (new, level, self.text(element)))
            if not self.text(element):
                self.fault("an empty h%d" % new)
            level = new
        if count[1] != 1:
            self.fault("%d h1" % count[1])

    def _check_parts(self):
        if self.root.get("lang") != "en":
            self.fault("no lang")
        for path in ("head/title", "body/header", "body/main", "body/footer"):
            if len(self.root.findall(path)) != 1:
                self.fault("not one %s" % path)
        metas = {m.get("name") or "charset": m.get("content") or m.get("charset") for m in self.root.findall("head/meta")}
        if metas.get("charset") != "utf-8" or "width=device-width" not in (metas.get("viewport") or ""):
            self.fault("no charset or viewport")
        for section in self.root.iter("section"):
            heading = next(iter(section), None)
            if heading is None or heading.tag != "h2" or section.get("aria-labelledby") != heading.get("id"):
                self.fault("a section that its heading does not name")
        for scroller in self.root.iter("div"):
            if scroller.get("class") == "scroll" and scroller.get("tabindex") != "0":
                self.fault("a part that scrolls and takes no keys")

    def _check_drawings(self):
        for svg in self.root.iter(SVG + "svg"):
            words = [child.tag for child in list(svg)[:2]]
            if words != [SVG + "title", SVG + "desc"] or not all(self.text(child) for child in list(svg)[:2]):
                self.fault("a drawing without title and description")
            if svg.get("role") != "img" or not svg.get("viewBox"):
                self.fault("a drawing without role or view box")

    def _check_tables(self):
        for table in self.root.iter("table"):
            caption = table.find("caption")
            name = self.text(caption) if caption is not None else ""
            if not name:
                self.fault("a table without a caption")
            heads = table.findall("thead/tr/th")
            if not heads or any(head.get("scope") != "col" for head in heads):
                self.fault("%s: columns without heads" % name)
            for row in table.findall("tbody/tr"):
                if len(row) != len(heads):
                    self.fault("%s: %d cells below %d heads" % (name, len(row), len(heads)))
                if any(cell.tag == "th" and cell.get("scope") != "row" for cell in row):
                    self.fault("%s: a head of a row without scope" % name)

    def _check_same_reading(self):
        """An HTML parser and an XML parser hear the same words in the same elements."""
        names = [e.tag.split("}")[-1] for e in self.html.iter() if isinstance(e.tag, str)]
        if names != [e.tag.split("}")[-1] for e in self.root.iter()]:
            self.fault("HTML and XML see different elements")
        if "".join(self.html.itertext()).split() != "".join(self.root.itertext()).split():
            self.fault("HTML and XML read different words")

    def section(self, heading):
        """The section whose heading begins so."""
        for section in self.root.iter("section"):
            if self.text(section.find("h2")).startswith(heading):
                return section
        self.fault("no section %s" % heading)
        return self.root

    def table(self, caption, within=None):
        """Rows of the first table whose caption begins so, as lists of text."""
        for table in (self.root if within is None else within).iter("table"):
            if self.text(table.find("caption")).startswith(caption):
                return [[self.text(cell) for cell in row] for row in table.findall("tbody/tr")]
        self.fault("no table %s" % caption)
        return []

    def facts(self):
        """Label -> words of all definition lists; of several with one label, all words."""
        out = {}
        for part in self.root.iter("dl"):
            for pair in part:
                label = self.text(pair.find("dt"))
                out.setdefault(label, []).append(" ".join(self.text(d) for d in pair.findall("dd")))
        return out
