"""Prove that a store holds together; only what is kept beside its ledger is ever set right."""

from __future__ import annotations

from datetime import date

from stockroom.service.answers import Done
from stockroom.settings import StoreAt
from stockroom.store import verify as store_verify

# handed on by name: the command line may not reach into the store
from stockroom.store.verify import Proved as Proved


def verify(path: StoreAt, *, quick: bool = False) -> Proved:
    """Everything in the store at `path` that does not hold together, with how to mend it.

    `quick` leaves out the engine's own look at every page of the file, the slowest part.
    Raises: StoreTrouble when there is no store, or one of a newer version.
    """
    return store_verify.verify(path, quick=quick)


def keep_afresh(path: StoreAt, *, today: date, by: str) -> Done:
    """Keep every balance by the entries of the ledger again, and say which were kept otherwise.

    No entry is written or altered; each balance that was changed is noted as a correction.
    Raises: BadInput without initials; StoreTrouble where the ledger cannot be added up.
    """
    from stockroom.service.work import working
    from stockroom.store.kept_afresh import keep_afresh as keep

    with working(path, on=None, today=today, by=by) as work:
        done = keep(work.session, work.stamp)
        several = f"{len(done)} balances were" if len(done) > 1 else "1 balance was"
        told = f"{several} kept otherwise than the entries come to, and kept by them now."
        return Done(
            told if done else "Every balance is kept as its entries come to; nothing was changed.",
            next="stockroom verify",
            practice=work.practice,
            details=tuple(f"{each.number}: {each.before} → {each.after}." for each in done),
        )
