"""The invented shop behind demo_data: seeded, so that it makes the same files each time.

    python -m tests.demo_shop            writes demo_data anew

No company, brand, person or product in it exists. Planted for the tests of later questions: one lot of contact sets that
comes back several times as often as the rest, one supplier with two early comebacks that are chance, an armature whose next
cut is its last, one that is undersize after turning, a fit that is out though both its parts are in, a brush in doubt,
an armature with a short and one with an open coil bar to bar, a few releases whose running test was conceded, a spring scale found bad.
"""
