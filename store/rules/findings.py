"""Findings that a note seems to speak of: "sol contcts burnt" looks like solenoid, contacts burned.

A finding keeps component, mode and mechanism apart (ISO 14224); the vocabulary is the trade's. It is only offered, never
taken unasked; a shop's own findings are offered beside it.
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import lru_cache

from store.rules import shorthand
from store.rules.spelling import allowed_slips
from store.rules.words import forms, indexed

MOST_OFFERED = 3
_CLAUSE = re.compile(r"[,;:.!?()\n]+(?!\d)")
_NOT = frozenset(["no", "not", "none", "without", "never", "isnt", "wasnt", "ok", "good", "fine"])


@dataclass(frozen=True, slots=True)
class Finding:
    """What may be wrong. `mechanism` and `cause` may be empty; `names` and `says`: see `VOCABULARY`."""

    component: str
    mode: str
    mechanism: str = ""
    cause: str = ""
    names: frozenset[str] = frozenset()
    says: frozenset[str] = frozenset()


COMPONENT_NAMES: dict[str, str] = {
    "brushes": "brush", "springs": "spring", "rigging": "holder rigging", "commutator": "commutator",
    "armature winding": "armature winding growler", "armature body": "armature core", "shaft": "shaft", "field": "field coil",
    "bushings": "bushing", "bearings": "bearing", "drive": "drive pinion clutch", "shift": "fork shift linkage",
    "solenoid": "solenoid", "relay": "relay", "housing": "housing nose flange", "slip ring": "slipring rings ring",
    "rotor": "rotor", "stator": "stator", "diode": "diode rectifier", "trio": "trio", "regulator": "regulator",
    "pulley": "pulley fan", "system": "battery cable",
}  # fmt: skip
"""The words by which a component is named in a note."""

_LINES = """
brushes | worn short | wear | | worn short
brushes | stuck in holder | sticking | | stuck hung sticking
brushes | chipped | breakage | | chipped cracked broken
brushes | oil-soaked | contamination | | soaked oily oil greasy
brushes | wrong grade | wrong part | | wrong grade
brushes | lead burned | overheating | lead pigtail | burned loose
brushes | not seated | clearance | | seated unseated
springs | weak | fatigue | | weak soft tired
springs | overheated blue | overheating | | blue overheated
springs | broken | breakage | | broken
rigging | holder grounded | earth fault | holder | grounded ground
rigging | holder bent | deformation | holder | bent
commutator | worn undersize | wear | | worn undersize under minimum small
commutator | out of round | wear | | round eccentric oval
commutator | high mica | wear | mica undercut | high flush
commutator | burned bars | overheating | commutator bar | burned burn
commutator | flat spot | wear | commutator | flat
commutator | loose bar | looseness | bar | loose high low
commutator | grooved | wear | | grooved threaded grooves scored
commutator | copper drag | wear | copper commutator | drag smeared smear dragged
commutator | open riser | open circuit | riser | open dead thrown
commutator | thrown solder | overheating | solder | thrown
commutator | oil film | contamination | | oil oily
armature winding | shorted | short circuit | | shorted short
armature winding | open coil | open circuit | | open
armature winding | grounded | earth fault | | grounded ground
armature winding | burned | overheating | | burned cooked
armature winding | thrown windings | overspeed | winding banding | thrown unbanded
armature body | pole rub | clearance | armature pole | rub rubbing dragging
shaft | bent | deformation | | bent
shaft | worn journal | wear | journal shaft | worn
shaft | worn spline | wear | spline | worn
shaft | broken | breakage | | broken
field | open | open circuit | | open
field | grounded | earth fault | | grounded ground
field | shorted | short circuit | | shorted short
field | loose pole shoe | looseness | shoe pole | loose
field | burned insulation | overheating | field insulation | burned
field | magnet loose | looseness | magnet | loose cracked
bushings | worn | wear | | worn loose sloppy
bushings | egged | wear | | egged oval
bushings | seized | sticking | | seized
bushings | dry | lack of lubrication | | dry
bushings | turned in housing | looseness | | turned spun
bearings | rough | wear | | rough
bearings | noisy | wear | | noisy noise
bearings | seized | sticking | | seized
bearings | dry | lack of lubrication | | dry
bearings | broken cage | breakage | cage | broken
bearings | spun race | looseness | race bearing | spun
drive | slipping | wear | | slipping slips
drive | locked | sticking | | locked
drive | pinion milled | wear | pinion teeth | milled chewed chamfer gone
drive | pinion broken tooth | breakage | pinion tooth | broken chipped
drive | stuck on spline | sticking | drive pinion | stuck sticking
drive | mesh spring broken | breakage | mesh | broken
drive | wrong teeth | wrong part | teeth rotation | wrong
shift | fork worn | wear | fork | worn
shift | fork broken | breakage | fork | broken
shift | boot torn | breakage | boot | torn
shift | linkage out of adjustment | clearance | linkage | adjustment
shift | pinion clearance wrong | clearance | clearance | wrong
solenoid | contacts burned | overheating | contact disc | burned pitted
solenoid | contacts welded | overheating | contact solenoid | welded stuck
solenoid | pull-in open | open circuit | pull pullin | open
solenoid | hold-in open | open circuit | hold holdin solenoid | open chatter chatters
solenoid | grounded | earth fault | | grounded ground
solenoid | plunger sticking | sticking | plunger | sticking stuck
solenoid | return spring weak | fatigue | return | weak
solenoid | terminal loose | looseness | stud terminal | loose
solenoid | insulator cracked | breakage | insulator cap | cracked
relay | contacts burned | overheating | relay | burned pitted
housing | nose cone broken | breakage | nose cone | broken cracked
housing | flange ear broken | breakage | ear flange | broken cracked
housing | stripped thread | wear | thread | stripped
housing | pilot worn | wear | pilot | worn
housing | water ingress | contamination | housing water | water wet rusted
slip ring | worn | wear | | worn
slip ring | grooved | wear | | grooved
slip ring | flashed | electrical | | flashed burned
rotor | open | open circuit | | open
rotor | shorted | short circuit | | shorted short
rotor | grounded | earth fault | | grounded ground
stator | shorted | short circuit | | shorted short
stator | open | open circuit | | open
stator | grounded | earth fault | | grounded ground
stator | burned | overheating | | burned cooked
diode | open | open circuit | | open
diode | shorted | short circuit | | shorted short
trio | bad | electrical | | bad open shorted
regulator | low output | electrical | | low late
regulator | high output | electrical | | high overcharging
regulator | no output | electrical | | dead output
pulley | loose | looseness | | loose
system | battery weak | external | battery | weak flat old bad
system | cables bad | external | cable | bad resistance corroded
"""


def _line(line: str) -> Finding:
    component, mode, mechanism, names, says = (part.strip() for part in line.split("|"))
    return Finding(
        component,
        mode,
        mechanism,
        "",
        frozenset((names or COMPONENT_NAMES[component]).split()),
        frozenset(says.split()),
    )


VOCABULARY: tuple[Finding, ...] = tuple(_line(line) for line in _LINES.strip().splitlines())
"""Findings of the trade: a note speaks of one when a clause of it holds one of `names` and one of `says`."""

WORDS: frozenset[str] = frozenset(
    {word for one in VOCABULARY for word in one.names | one.says}
    | {word for one in VOCABULARY for text in (one.component, one.mode) for word, _ in indexed(text)}
    | {word for names in COMPONENT_NAMES.values() for word in names.split()}
)
"""The trade's own words in the vocabulary: a correctly written one is never a slip of something else."""


def offered(text: str, own: Sequence[Finding] = (), same: Mapping[str, str] | None = None) -> tuple[Finding, ...]:
    """The findings that a note seems to speak of, at most MOST_OFFERED, the likeliest first; empty for none.

    `own` are the shop's, the most frequent first: where one has component and mode of the vocabulary its mechanism and
    cause are taken over. `same` is the shorthand (short: long), the shipped list where it is None.
    """
    lines = shorthand.SHIPPED if same is None else same
    usual: dict[tuple[str, str], Finding] = {}
    for finding in own:
        usual.setdefault((finding.component, finding.mode), finding)
    made: dict[tuple[str, str], tuple[float, int]] = {}
    known = [*VOCABULARY, *(_named(f) for key, f in usual.items() if key not in _KEYS)]
    before: list[frozenset[str]] = []
    for clause in _CLAUSE.split(text):
        words = [_meant(word, lines.get(word, "")) for word, _ in indexed(clause)]
        if not words:
            continue
        if not any(meant & _EVERY_NAME for meant in words):
            words = before + words  # "diode plate replaced, two shorted": what is spoken of was named before
        before = words
        for n, finding in enumerate(known):
            score = _score(finding, words)
            key = (finding.component, finding.mode)
            if score > made.get(key, (0.0, 0))[0]:
                made[key] = (score, -n)
    best = sorted(made, key=made.__getitem__, reverse=True)[:MOST_OFFERED]
    by_key = {(f.component, f.mode): f for f in known}
    return tuple(usual.get(key, by_key[key]) for key in best)


def _score(finding: Finding, words: Sequence[frozenset[str]]) -> float:
    """How well a clause speaks of a finding: 0 for not at all; more for the component named, for more of its words, for nearness."""
    names = [n for n, meant in enumerate(words) if meant & finding.names]
    says = [n for n, meant in enumerate(words) if meant & finding.says and not (n and words[n - 1] & _NOT)]
    apart = [abs(a - b) for a in names for b in says if a != b]
    if not apart:
        return 0.0
    component = any(meant & _components(finding.component) for meant in words)
    mode = {word for word, _ in indexed(finding.mode)} | finding.says
    return 1.0 + component + 0.5 * sum(bool(meant & mode) for meant in words) - 0.05 * min(apart)


@lru_cache(maxsize=256)
def _components(component: str) -> frozenset[str]:
    return frozenset(COMPONENT_NAMES.get(component, "").split()) | {word for word, _ in indexed(component)}


def _named(own: Finding) -> Finding:
    """A shop's own finding with the words by which it is known."""
    names = frozenset(word for word, _ in indexed(own.component))
    says = frozenset(word for word, _ in indexed(own.mode)) - names
    return Finding(own.component, own.mode, own.mechanism, own.cause, names, says or names)


_EVERY_NAME = frozenset(name for finding in VOCABULARY for name in finding.names)
_KEYS = frozenset((finding.component, finding.mode) for finding in VOCABULARY)


@lru_cache(maxsize=4096)
def _meant(word: str, long: str) -> frozenset[str]:
    """The words of the vocabulary that a word of a note may mean: itself, its long form, its other forms, else the nearest."""
    every = {word, long, *forms(word), *forms(long)} - {""}
    if every & WORDS or every & _NOT:
        return frozenset(every)
    slips = allowed_slips(word)
    if slips:
        from rapidfuzz import process
        from rapidfuzz.distance import OSA

        for choices in (_SPELLED, _FORMS):
            near = process.extractOne(word, choices, scorer=OSA.distance, processor=None, score_cutoff=slips)
            if near is not None:
                return frozenset({word, near[0], *forms(near[0])})
    return frozenset(every)


_SPELLED = sorted(WORDS)
_FORMS = sorted({form for word in WORDS for form in forms(word) if form.endswith(("s", "ed", "ing"))} - WORDS)
