"""The cross-check: which number, on whose word, and does it go on this unit.

numbers     what a number is: enter it, relate it, say what it fits
candidates  which numbers of the record may be meant by one that is asked
checking    what a number leads to, by which steps, with conflicts and bench evidence
on_model    does it go on a model
by_size     parts by their sizes
fitting     a part fitted on a job
"""

from __future__ import annotations

from store.parts.checking import models_for
from store.parts.meant import Meant, model_meant

__all__ = ["Meant", "model_meant", "models_for"]
