"""The report as a text file for any printer: 80 columns, form feeds between pages, page x of y, a marked end."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from store.errors import brief
from store.reports import figures, sections, strip, wear_rule, wording
from store.reports.characters import in_plain, one_line, width
from store.reports.contents import Report
from store.reports.drawing import unit_line

COLUMNS, LINES = 80, 60
"""Size of a page in characters; 60 lines fit on A4 and on letter at six lines an inch."""

_NAME, _LIMIT, _VALUE, _VERDICT = 21, 12, 8, 14
_DIGITS = 3
"""How many digits before the decimal mark the columns leave room for; a longer number stands further right."""

_RULE = 40
_HEAD, _FOOT = 3, 2
_KEY = (
    "Wear rule: N new size, | limit, x beyond, ~ guard band, ' reading, . reading of the other stage, ^ the value that is"
    " judged (! where it is on the limit), < > off the scale."
)

Lines = list[str]


def write(report: Report) -> str:
    """The whole report; ends in a newline, pages are parted by a form feed."""
    blocks = _blocks(report)
    pages = _paginated(blocks)
    made = []
    for number, lines in enumerate(pages, 1):
        body = [*_head(report), *lines]
        body += [""] * (LINES - _FOOT - len(body))
        made.append("\n".join(line.rstrip() for line in [*body, *_foot(report, number, len(pages))]))
    return "\n\f".join(made) + "\n"


def _head(report: Report) -> Lines:
    title = in_plain(one_line(brief(report.title, 30)))
    shop = _cut(in_plain(one_line(report.shop.name)), COLUMNS - width(title) - 2)
    return [_sides(shop, title), _cut(in_plain(one_line(unit_line(report))), COLUMNS), "-" * COLUMNS]


def _foot(report: Report, page: int, pages: int) -> Lines:
    chain = f"audit chain {report.audit_head[:16]}" if report.audit_head else "no audit chain"
    return ["-" * COLUMNS, _sides(_cut(in_plain(one_line(chain)), 50), f"page {page} of {pages}")]


def _blocks(report: Report) -> list[Lines]:
    """The parts that stay together on a page where they fit."""
    sources = wording.Sources()
    measured = wording.groups(report, sources, running=False)
    running = wording.groups(report, sources, running=True)
    made = [["", sections.title(report).upper(), ""]]
    made += [_wrapped(line, "  ") for line in sections.notices(report)]
    made.append(_pairs((("shop", report.shop.name), ("address", ", ".join(report.shop.address.splitlines())))))
    made += [_pairs(sections.identity(report)), _pairs(sections.visit(report))]
    if report.complaint:
        made.append(_pairs((("complaint, as the customer told it", report.complaint),)))
    made += [_pairs(sections.standing(report)), *_table(sections.findings(report))]
    made += [*_measured("Measured", measured), *([_wrapped(_KEY, "  ")] if measured else [])]
    made += _measured("Running tests", running)
    made += [_wrapped(line) for line in report.diagnosis]
    for table in sections.tables(report, sources):
        made += _table(table)
    made.append([*_title("Decision rule"), *(line for text in sections.decision(report) for line in _wrapped(text))])
    if report.cautions:
        made.append([*_title("Cautions"), *(line for text in report.cautions for line in _wrapped(text, "  "))])
    made.append([*_title("Who answers for it"), *_pairs(sections.people(report))])
    made.append(["", *(line for text in sections.PROMISE for line in _wrapped(text))])
    end = f" {_cut(in_plain(one_line(sections.end(report))), 70)} "
    side = max(2, (COLUMNS - width(end)) // 2)
    made.append(["", "-" * side + end + "-" * max(0, COLUMNS - side - width(end))])
    return made


def _measured(title: str, groups: Sequence[wording.Group]) -> list[Lines]:
    if not groups:
        return []
    heads = f"{'characteristic':{_NAME}}{'limit':{_LIMIT}} {'as found':{_VALUE + _VERDICT + 2}}{'as left':{_VALUE}}"
    made: list[Lines] = []
    for group in groups:
        for n, row in enumerate(group.rows):
            name = (
                _wrapped(group.component.upper()) if n == 0 and group.component.casefold() != title.casefold() else []
            )
            made.append([*name, *_row(row)])
    made[0] = [*_title(title), heads, "-" * COLUMNS, *made[0]]
    return made


def _row(row: wording.Row) -> Lines:
    """One characteristic: its line (more where a name or a limit needs them), its wear rule, its readings, its reasons."""
    names = _wrapped(f"{row.label} {row.unit}".strip(), wide=_NAME - 1)
    limits = [f"{_aligned(size)} {word}".rstrip() if word else size for word, size in row.limits]
    made = []
    for n in range(max(len(names), len(limits))):
        left = names[n] if n < len(names) else ""
        limit = limits[n] if n < len(limits) else ""
        cells = "".join(map(_cell, (row.found, row.left))) if n == 0 else ""
        made += _joined(_filled(left, _NAME), _filled(in_plain(limit), _LIMIT), cells)
    if row.rule is not None:
        words = ", ".join(text for _, text in wear_rule.inscriptions(row.rule))
        made += _wrapped(f"{wear_rule.characters(row.rule, _RULE)}  {words}", "  ", "  ")
    for stage, cell in (("as found", row.found), ("as left", row.left)):
        if cell is not None and (cell.readings or cell.quiet or cell.detail):
            readings = "  ".join(f"{position} {figure}".strip() for position, figure in cell.readings)
            said = "; ".join(part for part in (cell.detail, readings, ", ".join(cell.quiet)) if part)
            made += _wrapped(f"{stage}: {said}", "  ", " " * (len(stage) + 4))
    gauge = f"gauge {row.gauge}" if row.gauge else ""
    method = "; ".join(part for part in (row.datum, gauge, ", ".join(row.limit_quiet)) if part)
    made += _wrapped(method, "  ", "  ") if method else []
    for stage, one in row.strips:
        made += _wrapped(f"{stage}, bars {one.first} to {one.last}: {strip.figures(one)}  (4 even)", "  ", "    ")
    for weight, text in row.says:
        made += _wrapped(("> " if weight == "loud" else "") + text, "  ", "    ")
    return [*made, ""]


def _cell(cell: wording.Cell | None) -> str:
    if cell is None:
        return " " * (_VALUE + 2 + _VERDICT)
    verdict = "out <<<" if cell.verdict == "out" else cell.verdict
    value = _aligned(cell.value) if figures.is_number(cell.value) else in_plain(one_line(cell.value))
    return f" {_filled(value, _VALUE)} {_filled(verdict, _VERDICT)}"


def _aligned(shown: str) -> str:
    """A number with its decimal mark in the fourth column; what is no number as it is."""
    whole, fraction = figures.split(shown)
    return f"{whole:>{_DIGITS}}{fraction}" if figures.is_number(shown) else shown


def _pairs(ledger: Iterable[tuple[str, str]]) -> Lines:
    made: Lines = []
    for label, value in ledger:
        if len(label) > 14:
            made += ["", label, *_wrapped(value, "  ", "  ")]
        elif value:
            made += _wrapped(value, f"{label:15}", " " * 15)
    return [*made, ""]


def _table(table: wording.Table) -> list[Lines]:
    """A table as columns; a row in which a cell would be broken into many short lines is written as label and value."""
    if not table.rows:
        return []
    widths = [max(4, COLUMNS * share // sum(table.widths) - 1) for share in table.widths]
    made: list[Lines] = []
    for row in table.rows:
        cells = [_wrapped(text, wide=wide) for text, wide in zip(row, widths, strict=True)]
        if max(map(len, cells)) > 6:
            made.append(_pairs((head, text) for head, text in zip(table.heads, row, strict=True) if text))
        else:
            made.append(_columns(row, widths))
    # The heads are never left alone at the end of a page.
    made[0] = [*_title(table.title), *_columns(table.heads, widths), "-" * COLUMNS, *made[0]]
    return [*made, *([_wrapped(table.note)] if table.note else [])]


def _columns(row: Sequence[str], widths: Sequence[int]) -> Lines:
    cells = [_wrapped(text, wide=wide) for text, wide in zip(row, widths, strict=True)]
    return [
        " ".join(_filled(cell[n] if n < len(cell) else "", wide) for cell, wide in zip(cells, widths, strict=True))
        for n in range(max(map(len, cells)))
    ]


def _title(title: str) -> Lines:
    return ["", title.upper(), ""]


def _paginated(blocks: Iterable[Lines]) -> list[Lines]:
    """Blocks on pages; one that fits on a page is not parted, one that does not runs on."""
    room = LINES - _HEAD - _FOOT
    pages: list[Lines] = [[]]
    for block in blocks:
        if pages[-1] and len(pages[-1]) + len(block) > room and len(block) <= room:
            pages.append([])
        for line in block:
            if len(pages[-1]) == room:
                pages.append([])
            if line or (pages[-1] and pages[-1][-1]):
                pages[-1].append(line)
    return pages


def _wrapped(text: str, first: str = "", later: str | None = None, *, wide: int = COLUMNS) -> Lines:
    """Text in lines of at most `wide` columns; `first` and `later` stand before the first and the other lines."""
    made: Lines = []
    indent = first
    rest = first if later is None else later
    for paragraph in in_plain(text).split("\n"):
        line, used, empty = indent, width(indent), True
        for word in _words(paragraph, wide - max(width(first), width(rest))):
            if not empty and used + 1 + width(word) > wide:
                made.append(line)
                line, used, empty = rest, width(rest), True
            line += word if empty else f" {word}"
            used += width(word) + (0 if empty else 1)
            empty = False
        made.append(line)
        indent = rest
    return made


def _words(text: str, most: int) -> Iterable[str]:
    """The words of a line, those that are wider than a line cut; runs of spaces are kept between words."""
    for word in text.split(" "):
        if width(word) <= most:
            yield word
            continue
        part, used = "", 0
        for c in word:
            wide = width(c)
            if part and used + wide > most:
                yield part
                part, used = "", 0
            part += c
            used += wide
        yield part


def _joined(name: str, limit: str, cells: str) -> Lines:
    """A row's line; where name or limit are wider than their columns, the cells follow on a line of their own."""
    line = name + limit + cells
    if width(line.rstrip()) <= COLUMNS:
        return [line]
    return [*_wrapped(f"{name} {limit}", "", "  "), *([" " * (_NAME + _LIMIT) + cells] if cells.strip() else [])]


def _filled(text: str, wide: int) -> str:
    return text + " " * max(0, wide - width(text))


def _sides(left: str, right: str) -> str:
    return left + " " * max(1, COLUMNS - width(left) - width(right)) + right


def _cut(text: str, wide: int) -> str:
    """Text of at most `wide` columns."""
    while width(text) > wide:
        text = text[: max(0, min(len(text) - 1, wide))]
    return text
