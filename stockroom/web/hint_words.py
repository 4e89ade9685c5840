"""What a hint's commands are called on the pages: the form each has, or the page that shows it."""

from __future__ import annotations

POSITIONAL: dict[str, tuple[str, ...]] = {
    "draw": ("bottle", "amount"),
    "spill": ("bottle", "amount"),
    "lend": ("bottle", "amount"),
    "lend-back": ("bottle", "amount"),
    "open": ("bottle",),
    "make": ("line", "volume"),
    "decant": ("bottle", "amount"),
    "mix": ("first", "second", "amount"),
    "found": ("bottle", "strength"),
    "titrate": ("reaction",),
    "look": ("bottle",),
    "tested": ("bottle",),
    "printed": ("bottle",),
    "move": ("bottle", "place"),
    "count": ("bottle", "amount"),
    "lost": ("bottle",),
    "turned-up": ("bottle",),
    "spoil": ("bottle",),
    "unknown": ("look",),
    "name-unknown": ("bottle",),
    "discard": ("bottle",),
    "put-right": ("entry",),
    "arrive": ("line", "size"),
    "order": ("line", "packs", "size"),
    "order-planned": ("order",),
    "order-put-off": (),
    "order-cancel": (),
    "book": ("recipe",),
    "shift": ("booking",),
    "cancel": ("booking",),
    "cancel-undo": ("booking",),
    "destroyed": ("booking",),
    "destroyed-undo": ("booking",),
}
"""The fields that the words behind a command fill, in their order, by the form's name."""

ENTER = {
    "draw": "enter a draw from {}",
    "spill": "enter a spill of {}",
    "lend": "enter a loan of {}",
    "lend-back": "enter what came back of {}",
    "open": "enter the opening of {}",
    "make": "enter a make of {}",
    "decant": "enter a pouring from {}",
    "mix": "enter what was poured out of {}",
    "found": "enter a strength found of {}",
    "titrate": "work out a titration of {}",
    "look": "enter a look at {}",
    "tested": "enter a test of {}",
    "printed": "settle the printed date of {}",
    "move": "enter a move of {}",
    "count": "enter a count of {}",
    "lost": "enter that {} is not found",
    "turned-up": "enter that {} turned up",
    "spoil": "set {} aside",
    "unknown": "log an unknown bottle",
    "name-unknown": "name {} by evidence",
    "discard": "enter that {} was thrown away",
    "put-right": "put {} right",
    "arrive": "enter an arrival of {}",
    "order": "enter an order of {}",
    "order-planned": "enter that {} was ordered",
    "order-put-off": "put {} off",
    "order-cancel": "cancel {}",
    "book": "book {}",
    "shift": "shift {}",
    "cancel": "cancel {}",
    "cancel-undo": "take the cancelling of {} back",
    "destroyed": "tick what was left of {} as destroyed",
    "destroyed-undo": "take the tick of {} back",
}
"""What a link to each form says, with what it is about in its place."""

PAGES = {
    "plan": ("/term", "the term"),
    "fresh": ("/term", "the term"),
    "past": ("/shelf", "along the shelf"),
    "shelf": ("/shelf", "along the shelf"),
    "usage": ("/use", "use over the term"),
    "buying": ("/buying", "term's buying"),
    "on-order": ("/buying", "term's buying"),
    "ready": ("/day", "before the day"),
    "day": ("/day", "before the day"),
    "week": ("/week", "this week"),
    "what-if": ("/try", "try it"),
    "changed": ("/changed", "what changed"),
    "label": ("/paper/label", "labels"),
    "why": ("/why", "why"),
    "diary": ("/shelf", "the bottle's own page"),
    "rule": ("/rules", "the house rules"),
    "add": ("/rules", "the house rules"),
    "change": ("/rules", "the house rules"),
    "bring-in": ("/bring-in", "bring in"),
}
"""The page that shows what a command shows, and what a link to it says."""

ABOUT_ONE = {
    "diary": ("/bottle/{}", "the page of {}"),
    "why": ("/why?ref={}", "why {}"),
    "day": ("/day/{}", "before {}"),
    "ready": ("/day/{}", "before {}"),
    "shelf": ("/shelf?what={}", "{} along the shelf"),
    "rule": ("/rules?line={}", "the rules of {}"),
    "add": ("/rules/add/{}", "add to {}"),
    "label": ("/paper/label?what={}", "the label of {}"),
}
"""The same where the command names one thing."""

LABELS = {
    "by": "Initials",
    "why": "Why",
    "on": "Happened on",
    "tare": "Empty it weighs",
}
"""What the field of an option is called where no form is at hand."""

FLAGS = frozenset(
    "--good --bad --passed --failed --undo --back --sure --keep --keep-closed --afresh --enter"
    " --spare --use --exact".split()
)
"""Options that no value follows."""
