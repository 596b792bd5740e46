"""What the invented shop's people and customers say: customers, complaints, faults, and notes in oily shorthand."""

from __future__ import annotations

CUSTOMERS = (
    "Marrow Farm", "Tolland Quarry", "Brindle Buses", "Fenwick Haulage", "Ashby Boatyard", "North Mill", "Parish of Odd",
    "Corran Plant Hire", "Well Street Garage", "Hallow Dairy", "walk-in", "Dunnock Taxis",
)  # fmt: skip
WORKS_ON = {
    "starter": ("tractor", "loader", "bus", "boat", "truck", "generator set"),
    "generator": ("tractor", "crane", "boat"),
    "alternator": ("bus", "truck", "loader", "van"),
}
COMPLAINTS = {
    "starter": (
        "cranks slow",
        "clicks, does not turn",
        "solenoid chatters",
        "spins, does not engage",
        "stays in",
        "no crank",
        "noisy",
        "slow when hot",
    ),
    "generator": ("no charge", "low output", "noisy", "lamp stays on"),
    "alternator": ("no charge", "overcharges", "noisy bearing", "lamp glows", "low output at idle"),
}
FAULTS = {
    "starter": (
        ("solenoid", "contacts burned", "electrical", "overload"), ("brushes", "worn short", "wear", "expected wear"),
        ("commutator", "worn undersize", "wear", "expected wear"), ("commutator", "high mica", "wear", "expected wear"),
        ("bushings", "worn", "clearance", "lack of lubrication"), ("drive", "slipping", "wear", "expected wear"),
        ("armature winding", "grounded", "earth fault", "overcranking"), ("field", "grounded", "earth fault", "water ingress"),
        ("solenoid", "hold-in open", "open circuit", "vibration"), ("springs", "weak", "overheating", "overcranking"),
    ),
    "generator": (
        ("brushes", "worn short", "wear", "expected wear"), ("commutator", "threaded", "wear", "wrong brush grade"),
        ("bearings", "rough", "wear", "lack of lubrication"), ("field", "open", "open circuit", "vibration"),
    ),
    "alternator": (
        ("diode", "shorted", "short circuit", "reversed polarity"), ("bearings", "noisy", "wear", "belt too tight"),
        ("slip ring", "worn", "wear", "expected wear"), ("regulator", "no output", "open circuit", "expected wear"),
        ("stator", "burned", "overheating", "overload"), ("brushes", "worn short", "wear", "expected wear"),
    ),
}  # fmt: skip
_ANY = (
    "customer says battery new, cables not looked at", "oil all over, front seal of the engine leaks",
    "limits from the sheet on the wall, entered as rev 1",
    "tag soaked, number read off the casting", "dried overnight at 80 C, megger good after",
)  # fmt: skip
_WOUND = (
    "grwler ok, comm {comm}, brushs worn to the lead on one side", "comm turned to clean up, undercut again, deburred",
    "{comm} burnt at two bars, riser dark", "arm grounded at the riser, rewind or scrap - ask", "water in the housing, rust on the pole shoes",
    "springs blue, replaced all four", "growler quiet all round, bar to bar even",
)  # fmt: skip
NOTES = {
    "starter": (
        "grwler ok, comm burnt, {sol} contcts pitted", "{sol} contacts burnt, disc turned over last time allready",
        "bushng at drive end eggd, pressed new one", "ran no load 30 s, smooth, no sparking", "drive slips cold, holds warm; replaced",
        "plunger sticking, cleaned and a new return spring", "teeth chamfer gone on two, ring gear to be looked at", *_WOUND, *_ANY,
    ),
    "generator": ("bearing dry at the drive end, replaced both", "polarised after the test, charges", "{comm} threaded, wrong brush grade",
        *_WOUND, *_ANY),
    "alternator": (
        "bearing noisy, spun race at the slip ring end", "diode plate replaced, two shorted", "regulater cuts in late, replaced",
        "slip rings grooved, skimmed", "statr lead burnt off, resoldered", "brushs down to the spring, rings blue", "fan to match the rotation",
        *_ANY,
    ),
}  # fmt: skip
