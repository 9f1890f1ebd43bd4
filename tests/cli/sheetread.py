"""Reads a workbook back: its parts as XML, its cells by openpyxl, its formulas worked out here."""
import re, subprocess, xml.parsers.expat, zipfile
import openpyxl
from openpyxl.utils import column_index_from_string, get_column_letter

MONEY = "#,##0.00"
# A cell holds so many characters, a sheet's name so many (limits of the format as spreadsheets keep it).
CELL_CHARACTERS, NAME_CHARACTERS = 32767, 31
# Formulas are worked out in binary here as there; a cent is 0.01.
SLACK = 1e-6


# One of each printed unit in its SI unit; exact: international inch, foot and pound.
IN, FT, LB = 25.4, 0.3048, 0.45359237


class Units:
    def __init__(self, us, currency="USD"):
        self.us = us
        self.area = FT ** 2 if us else 1
        self.per = "%s per %s" % (currency, "ft2" if us else "m2")
        self.thickness, self.mass, self.length = ("in", "psf", "ft") if us else ("mm", "kg/m2", "m")

    def mm(self, found):
        return found * IN if self.us else found

    def metres(self, found):
        return found * FT if self.us else found

    def m2(self, found):
        return found * self.area

    def kg_m2(self, found):
        return found * LB / FT ** 2 if self.us else found

    def rate(self, unit):
        """A rate as JSON has it, per what text has."""
        return {"m2": FT ** 2, "m": FT}.get(unit, 1) if self.us else 1


def run_with(build, *words):
    done = subprocess.run([build + "/bin/septum", *words], capture_output=True)
    return done.returncode, done.stdout.decode("utf-8"), done.stderr.decode("utf-8")


def same_with(say, where, what, found, wanted, slack):
    """Both missing, equal words, or figures so near."""
    if isinstance(found, (int, float)) and isinstance(wanted, (int, float)):
        if abs(found - wanted) > slack:
            say(where, "%s: %r, JSON has %r" % (what, found, wanted))
    elif (found or None) != (wanted or None):
        say(where, "%s: %r, JSON has %r" % (what, found, wanted))


class Book:
    def __init__(self, path):
        self.path = path
        self.cells = openpyxl.load_workbook(path)
        self.held = openpyxl.load_workbook(path, data_only=True)
        self.names = self.cells.sheetnames
        self.known = {}

    def rows(self, sheet):
        """Rows below the heads as dictionaries by head, with the values that the cells hold."""
        page = self.held[sheet]
        lines = list(page.iter_rows(values_only=True))
        heads = list(lines[0])
        if len(set(heads)) != len(heads):
            raise ValueError("%s: two columns with one head" % sheet)
        return [dict(zip(heads, line)) for line in lines[1:]]

    def facts(self, sheet="Summary"):
        """Label and value of each row; where a label comes again, the first."""
        facts = {}
        for line in self.held[sheet].iter_rows(values_only=True):
            if line[0] is not None:
                facts.setdefault(line[0], line[1])
        return facts

    # ---- formulas ----

    def cell(self, sheet, name):
        key = sheet, name
        if key not in self.known:
            content = self.cells[sheet][name]
            self.known[key] = self.work_out(sheet, content.value) if content.data_type == "f" else content.value
        return self.known[key]

    def area(self, sheet, words):
        first, last = (re.fullmatch(r"([A-Z]+)(\d+)", w).groups() for w in words.split(":"))
        columns = range(column_index_from_string(first[0]), column_index_from_string(last[0]) + 1)
        return [self.cell(sheet, get_column_letter(c) + str(r))
                for r in range(int(first[1]), int(last[1]) + 1) for c in columns]

    def work_out(self, sheet, formula):
        tokens = re.findall(r'"[^"]*"|(?:[A-Za-z]+!|\'[^\']*\'!)?\$?[A-Z]+\$?\d+(?::\$?[A-Z]+\$?\d+)?|[A-Z]+(?=\()|\d+(?:\.\d+)?|[-+*/(),=]', formula[1:])
        if "".join(tokens) != formula[1:]:
            raise ValueError("what is %s?" % formula)
        return Formula(self, sheet, tokens).sum()


class Formula:
    """Sums, products, references, SUM, SUMIF, and SUMPRODUCT of matching rows: what our workbooks use."""

    def __init__(self, book, sheet, tokens):
        self.book, self.sheet, self.tokens = book, sheet, tokens

    def take(self, *wanted):
        if self.tokens and (not wanted or self.tokens[0] in wanted):
            return self.tokens.pop(0)
        return None

    def sum(self):
        value = self.product()
        while True:
            sign = self.take("+", "-")
            if sign is None:
                return value
            value = value + self.product() if sign == "+" else value - self.product()

    def product(self):
        value = self.single()
        while True:
            sign = self.take("*", "/")
            if sign is None:
                return value
            value = value * self.single() if sign == "*" else value / self.single()

    def single(self):
        if self.take("-"):
            return -self.single()
        if self.take("("):
            value = self.sum()
            self.take(")")
            return value
        word = self.take()
        if word in ("SUM", "SUMIF"):
            return self.call(word)
        if word == "SUMPRODUCT":
            return self.matched()
        if word.startswith('"'):
            return word[1:-1]
        if word[0].isdigit():
            return float(word)
        sheet, words = self.place(word)
        value = self.book.cell(sheet, words)
        return 0 if value is None else value

    def place(self, word):
        sheet, _, words = word.rpartition("!")
        return sheet.strip("'") or self.sheet, words.replace("$", "")

    def call(self, name):
        self.take("(")
        given = self.book.area(*self.place(self.take()))
        if name == "SUMIF":
            self.take(",")
            wanted = self.sum()
            self.take(",")
            summed = self.book.area(*self.place(self.take()))
            given = [v for k, v in zip(given, summed) if k == wanted]
        self.take(")")
        return sum(v for v in given if isinstance(v, (int, float)))


    def matched(self):
        """((keys=wanted)*values): an empty cell counts as "" and as 0; words are the same whatever their case."""
        for sign in "((":
            self.take(sign)
        keys = self.book.area(*self.place(self.take()))
        self.take("=")
        wanted = self.take()
        wanted = wanted[1:-1] if wanted.startswith('"') else self.book.cell(*self.place(wanted))
        for sign in ")*":
            self.take(sign)
        values = self.book.area(*self.place(self.take()))
        self.take(")")
        fold = lambda v: (v or "").casefold() if v is None or isinstance(v, str) else v
        return sum((v or 0) for k, v in zip(keys, values) if fold(k) == fold(wanted))


def check_parts(path, say):
    """Every part is well-formed XML, and every part that is named is there."""
    with zipfile.ZipFile(path) as whole:
        if whole.testzip() is not None:
            say("a part is broken")
        names = set(whole.namelist())
        for name in sorted(names):
            targets = []
            parser = xml.parsers.expat.ParserCreate("UTF-8")
            parser.StartElementHandler = lambda tag, had: targets.append(had["Target"]) if tag == "Relationship" else None
            try:
                parser.Parse(whole.read(name), True)
            except xml.parsers.expat.ExpatError as fault:
                say("%s: %s" % (name, fault))
            folder = name.split("_rels/")[0]
            for target in targets:
                if folder + target not in names:
                    say("%s names %s, which is not there" % (name, target))
        types = whole.read("[Content_Types].xml").decode("utf-8")
        for name in re.findall(r'PartName="/([^"]*)"', types):
            if name not in names:
                say("a type for %s, which is not there" % name)


def check_book(path, say):
    """What holds for every workbook of ours. Answers it."""
    check_parts(path, say)
    book = Book(path)
    formulas = 0
    for page in book.cells:
        if len(page.title) > NAME_CHARACTERS or re.search(r"[\[\]:*?/\\]", page.title):
            say("sheet name %s" % page.title)
        for line in page.iter_rows():
            for c in line:
                where = "%s!%s" % (page.title, c.coordinate)
                if c.data_type == "f":
                    formulas += 1
                    held = book.held[page.title][c.coordinate].value
                    if not isinstance(held, (int, float)) or abs(book.cell(page.title, c.coordinate) - held) > SLACK:
                        say("%s: %s holds %s" % (where, c.value, held))
                elif c.data_type == "s" and len(c.value.encode("utf-16-le")) // 2 > CELL_CHARACTERS:
                    say("%s is too long" % where)
                elif c.data_type == "e":
                    say("%s is an error" % where)
        check_setup(book, page, say)
    if formulas < 2:
        say("hardly a formula")
    return book


def check_setup(book, page, say):
    setup = page.page_setup
    if setup.fitToHeight not in (0, "0") or not page.sheet_properties.pageSetUpPr.fitToPage:
        say("%s does not print to its width" % page.title)
    if "&P" not in (page.oddFooter.right.text or ""):
        say("%s: pages without numbers" % page.title)
    if page.column_dimensions["A"].width is None or page.column_dimensions["A"].width == 13:
        say("%s: no widths" % page.title)
    if page.title == "Summary":
        return
    first = page.freeze_panes
    if first is None or not first.endswith("2"):
        say("%s: the heads are not kept in sight" % page.title)
    if page.print_title_rows not in ("1:1", "$1:$1") or setup.orientation != "landscape":
        say("%s is not set up for print" % page.title)
    filtered = page.auto_filter.ref
    if filtered and not filtered.startswith("A1:"):
        say("%s: filters %s" % (page.title, filtered))
    for c in page[1]:
        if not isinstance(c.value, str) or not c.font.b:
            say("%s: head %s" % (page.title, c.coordinate))
        elif re.search(r", [A-Z]{3}( per|$)", c.value):
            for row in range(2, page.max_row + 1):
                below = page.cell(row, c.column)
                if below.value is not None and (below.data_type not in "nf" or below.number_format not in (MONEY, "#,##0.0000")):
                    say("%s!%s is no money: %r, %s" % (page.title, below.coordinate, below.value, below.number_format))
