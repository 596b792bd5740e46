"""A hand-made list of parts for tests, every answer known: a chain, a loop, a contradiction, a kit, a twin, a substitute."""

from __future__ import annotations

from pathlib import Path

from store import files
from store.records import Record

MODELS = """model,kind,volts,rotation,viewed_from,teeth
KS-100,starter,12,cw,drive end,9
KS-120,starter,24,cw,drive end,11
"""
NUMBERS = """number,maker,kind,description,status
BR-100,Alder,brush set,four brushes,superseded
BR-101,Alder,brush set,,
BR-102,Alder,brush set,,
BR-103,Alder,brush set,,
BR-104,Alder,brush set,,
00-7710,Birch,brush set,,
SUB-1,Birch,brush set,lead is longer,
SUB-2,Birch,brush set,,
LP-1,Alder,solenoid,,
LP-2,Alder,solenoid,,
LP-3,Alder,solenoid,,
XA-1,Alder,bushing,drive end,
XB-1,Birch,bushing,drive end,
KIT-9,Alder,kit,overhaul kit,
DR-90,Alder,drive,,
DR-90L,Alder,drive,other rotation,
BAD-1,Elm,drive,,
5512,Alder,bearing,,
5512,Birch,bushing,,
OLD-7,,starter,customer's number,
"""
RELATIONS = """from_number,from_maker,relation,to_number,to_maker,caveat,source,dated
BR-100,Alder,superseded-by,BR-101,Alder,,List 1,2019-01-01
BR-101,Alder,superseded-by,BR-102,Alder,,List 1,2019-01-01
BR-102,Alder,superseded-by,BR-103,Alder,,List 1,2020-01-01
BR-103,Alder,superseded-by,BR-104,Alder,,List 1,2021-01-01
BR-104,Alder,same-as,00-7710,Birch,,List 3,
BR-102,Alder,substitute,SUB-1,Birch,shorten the lead,List 2,2020-01-01
SUB-1,Birch,superseded-by,SUB-2,Birch,,List 2,2020-01-01
LP-1,Alder,superseded-by,LP-2,Alder,,List 1,2019-01-01
LP-2,Alder,superseded-by,LP-3,Alder,,List 1,2019-01-01
LP-3,Alder,superseded-by,LP-1,Alder,,List 4,2023-01-01
XA-1,Alder,superseded-by,XB-1,Birch,,List 1,2019-01-01
XB-1,Birch,superseded-by,XA-1,Alder,,List 2,2022-01-01
KIT-9,Alder,holds,BR-104,Alder,,List 1,2021-01-01
KIT-9,Alder,holds,XA-1,Alder,,List 1,2021-01-01
DR-90,Alder,interchanges-with,BAD-1,Elm,,List 5,2018-01-01
BAD-1,Elm,do-not-use,,,cracks at the neck,own bench,2024-03-01
OLD-7,,same-as,KS-100,,,customer's list,2022-05-01
"""
FITS = """number,maker,model,position,quantity,source
BR-100,Alder,KS-100,brushes,1,List 1
DR-90,Alder,KS-100,drive,1,List 1
XA-1,Alder,KS-120,drive end,1,List 1
"""
SIZES = """number,maker,name,value,unit
BR-100,Alder,width,5/16,in
BR-100,Alder,thickness,16,mm
SUB-1,Birch,width,8,mm
SUB-1,Birch,thickness,16.05,mm
XA-1,Alder,od,16.05,mm
XA-1,Alder,id,12.55,mm
XB-1,Birch,od,0.632,in
XB-1,Birch,id,0.494,in
"""
ATTRIBUTES = """number,maker,model,name,value
DR-90,Alder,,rotation,ccw from commutator end
DR-90,Alder,,teeth,9
DR-90L,Alder,,rotation,ccw
DR-90L,Alder,,teeth,9
,,KS-100,pitch,8/10
DR-90,Alder,,pitch,8/10
"""
FILES = {
    "models": MODELS, "numbers": NUMBERS, "relations": RELATIONS, "fits": FITS, "sizes": SIZES, "attributes": ATTRIBUTES,
}  # fmt: skip


def write(folder: Path) -> list[Path]:
    """The lists as files."""
    paths = []
    for name, text in FILES.items():
        path = folder / f"{name}.csv"
        path.write_text(text, encoding="utf-8")
        paths.append(path)
    return paths


def fill(record: Record, folder: Path) -> None:
    """Load the lists into a record, through the ordinary loaders."""
    files.load(record, write(folder))
