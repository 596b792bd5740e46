"""Everything out of the record: a CSV file a kind, and the whole as JSON; into a folder that is made."""

from __future__ import annotations

import json
from pathlib import Path

from store import files
from store.errors import RecordUnusable
from store.records import Record
from store.sqlite.engine import rows
from store.whole_files import write_whole


def export(record: Record, folder: Path) -> dict[str, int]:
    """Write every kind as CSV and every table as JSON into a folder; lines by file name. Raises RecordUnusable."""
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as fault:
        raise RecordUnusable(f"{folder} cannot be made: {(fault.strerror or str(fault)).lower()}") from None
    written = {}
    for kind in files.kinds():
        path = folder / f"{kind.name}.csv"
        lines = files.save(record, kind.name, path)
        if lines:
            written[path.name] = lines
        else:
            path.unlink()
    written["record.json"] = _json(record, folder / "record.json")
    return written


def _json(record: Record, path: Path) -> int:
    """Every table that holds what was entered, as a list of objects by the table's name."""
    from sqlmodel import SQLModel

    import store.tables  # the tables register themselves

    assert store.tables.__all__
    whole: dict[str, list[dict[str, object]]] = {}
    count = 0
    with record.read() as conn:
        for name in sorted(SQLModel.metadata.tables):
            names = [column.name for column in SQLModel.metadata.tables[name].columns]
            listed = ",".join(f'"{n}"' for n in names)
            whole[name] = [dict(zip(names, row, strict=True)) for row in rows(conn, f'SELECT {listed} FROM "{name}"')]  # noqa: S608
            count += len(whole[name])
    write_whole(path, (json.dumps(whole, ensure_ascii=False, indent=1) + "\n").encode())
    return count
