"""The audit trail: entries that are only ever appended, from which the state at any entry is replayed."""

from calcgen.trail.canonical import Json, canonical, digest_of
from calcgen.trail.changes import Change, Changes, Item, State, compare
from calcgen.trail.entry import Entry, sealed
from calcgen.trail.errors import TrailBusyError, TrailConflictError, TrailError, TrailWriteError
from calcgen.trail.history import HistoryEntry, Previous, history, last_issue, previous_values
from calcgen.trail.reading import Fault, read_trail
from calcgen.trail.recording import record
from calcgen.trail.store import TRAIL, Appended, append, load
from calcgen.trail.trail import Trail, replay

__all__ = [
    "TRAIL",
    "Appended",
    "Change",
    "Changes",
    "Entry",
    "Fault",
    "HistoryEntry",
    "Item",
    "Json",
    "Previous",
    "State",
    "Trail",
    "TrailBusyError",
    "TrailConflictError",
    "TrailError",
    "TrailWriteError",
    "append",
    "canonical",
    "compare",
    "digest_of",
    "history",
    "last_issue",
    "load",
    "previous_values",
    "read_trail",
    "record",
    "replay",
    "sealed",
]
