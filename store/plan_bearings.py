"""The lines of a rework plan for bushings and journals: what restores a running clearance."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from sqlalchemy import Connection

from store.models import Model
from store.plan_line import PlanLine, Predicted, shown
from store.rules import bushings, quantities
from store.rules.limits import Verdict
from store.sheets import Sheet, SheetRow
from store.sqlite.engine import rows

PLACES = ("commutator-end", "center", "drive-end")


def of_sheet(conn: Connection, model: Model, found: Sheet) -> Iterator[PlanLine]:
    """A line for each place whose clearance, bore or journal is out."""
    housing = found.size("bushing-housing-bore", "mm")
    for place in PLACES:
        row = found.find(f"{place}-clearance")
        if row is None:
            continue
        parts = [found.find(f"{place}-bore"), found.find(f"{place}-journal")]
        if any(part is not None and part.verdict is Verdict.out for part in (row, *parts)):
            yield _line(conn, model, row, place, parts, housing)


def covered() -> frozenset[str]:
    """The characteristics that these lines speak of."""
    return frozenset(f"{place}-{part}" for place in PLACES for part in ("clearance", "bore", "journal"))


def _line(
    conn: Connection, model: Model, row: SheetRow, place: str, parts: list[SheetRow | None], housing: Fraction | None
) -> PlanLine:
    said = place.replace("-", " ")
    bore, journal = parts
    if journal is not None and journal.verdict is Verdict.out and journal.judged is not None:
        because = f"{said} shaft: {journal.judged.because}; a bushing alone does not restore the fit"
        return PlanLine("bearings", "replace", because)
    fit = row.judged.because if row.judged else bore.judged.because if bore and bore.judged else ""
    sizes = [] if journal is None else list(journal.sizes("mm").values())
    low, high = row.end("low", "mm"), row.end("high", "mm")
    choice, formula = "", "clearance = bore - journal"
    if not sizes or high is None:
        return PlanLine("bearings", "replace-bushing", f"{said}: {fit}", formula)
    chosen = bushings.choose(_at_hand(conn, model, place), min(sizes), low, high, housing, max(sizes))
    if not chosen:
        choice = "; no bushing in the lists for this model restores it"
        return PlanLine("bearings", "replace-bushing", f"{said}: {fit}{choice}", formula)
    best = chosen[0]
    also = f" (also {', '.join(c.bushing.number for c in chosen[1:4])})" if chosen[1:] else ""
    named = f"{best.bushing.number} {best.bushing.maker}".strip()
    fits = "its press fit is not checked: the housing is not measured"
    fits = fits if housing is None else "it is tight in the housing"
    choice = f"; {named} would restore it{also}; {fits}"
    formula += f" = {shown(best.bushing.bore)} - {shown(min(sizes))} = {shown(best.clearance)} mm at the loosest"
    unit = row.limit.limit.unit if row.limit else "mm"
    predicted = Predicted(row.characteristic.name, quantities.convert(best.clearance, "mm", unit), unit)
    return PlanLine("bearings", "replace-bushing", f"{said}: {fit}{choice}", formula, (predicted,))


def _at_hand(conn: Connection, model: Model, place: str) -> list[bushings.Bushing]:
    """Bushings that the lists give for this model and not for another place on it, with their diameters in mm."""
    sql = (
        "SELECT p.number, p.maker, s.name, s.value, s.unit, f.position FROM part_number p "
        "JOIN fit f ON f.number_id = p.id JOIN part_size s ON s.number_id = p.id "
        "WHERE f.model_id = ? AND p.kind = 'bushing' AND s.name IN ('id', 'od')"
    )
    sizes: dict[tuple[str, str], dict[str, Fraction]] = {}
    for number, maker, name, value, unit, position in rows(conn, sql, (model.id,)):
        if _goes(position, place):
            sizes.setdefault((number, maker), {})[name] = quantities.convert(Fraction(value), unit, "mm")
    return [bushings.Bushing(n, m, s["id"], s["od"]) for (n, m), s in sorted(sizes.items()) if {"id", "od"} <= s.keys()]


def _goes(position: str, place: str) -> bool:
    """Whether a listed position is this place, or says nothing of any place."""
    said = position.casefold().replace("-", " ").replace("centre", "center")
    named = [one for one in PLACES if one.replace("-", " ") in said]
    return not named or place in named


def loosest(sheet: Sheet, characteristic: str, unit: str) -> Fraction | None:
    """The largest bore less the smallest journal as read, for a clearance of one of the places; else None."""
    place = characteristic.removesuffix("-clearance")
    bore, journal = sheet.find(f"{place}-bore"), sheet.find(f"{place}-journal")
    bores, journals = ([] if one is None else list(one.sizes(unit).values()) for one in (bore, journal))
    return max(bores) - min(journals) if place != characteristic and bores and journals else None
