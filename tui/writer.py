"""The writer: one thread that puts what was typed into the record, in order, and reports back.

All that queued up while it was writing goes into one transaction (a group commit), so a burst from a gauge costs few
commits and nothing waits on the keys. A reading is answered only after its commit: what the screen shows as accepted is
on disk.
"""

from __future__ import annotations

import queue
import threading
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from store.errors import RecordUnusable, WearlineError

if TYPE_CHECKING:
    from store.readings import Accepted, Entry
    from store.records import Record

MOST_AT_ONCE = 500


@dataclass(frozen=True, slots=True)
class Order:
    """An entry for a job, with the token by which whoever gave it knows it again."""

    tag: str
    entry: Entry
    token: object


Answer = tuple[Order, "Accepted | WearlineError"]


class Writer:
    """Takes orders on any thread, answers batches on its own; `answered` is called there and must only pass them on."""

    def __init__(self, record: Record, answered: Callable[[Sequence[Answer]], object]) -> None:
        self.record, self.answered = record, answered
        self.orders: queue.SimpleQueue[Order | None] = queue.SimpleQueue()
        self.thread = threading.Thread(target=self._run, name="writer", daemon=False)
        self.thread.start()

    def put(self, order: Order) -> None:
        """Queue an order; returns at once."""
        self.orders.put(order)

    def close(self) -> None:
        """Write what is queued, then stop. Called once, when the screens close."""
        self.orders.put(None)
        self.thread.join()

    def _run(self) -> None:
        while (order := self.orders.get()) is not None:
            batch, last = [order], False
            while len(batch) < MOST_AT_ONCE:
                try:
                    more = self.orders.get_nowait()
                except queue.Empty:
                    break
                if more is None:
                    last = True
                    break
                batch.append(more)
            self._write(batch)
            if last:
                return

    def _write(self, batch: Sequence[Order]) -> None:
        begin = 0
        while begin < len(batch):
            end = begin
            while end < len(batch) and batch[end].tag == batch[begin].tag:
                end += 1
            self.answered(self._one_job(batch[begin:end]))
            begin = end

    def _one_job(self, orders: Sequence[Order]) -> list[Answer]:
        from store import readings

        try:
            answers = readings.add_many(self.record, orders[0].tag, [order.entry for order in orders])
        except WearlineError as fault:
            return [(order, fault) for order in orders]
        except Exception as fault:
            told = RecordUnusable(f"not written: {type(fault).__name__} {fault}")
            return [(order, told) for order in orders]
        return list(zip(orders, answers, strict=True))
