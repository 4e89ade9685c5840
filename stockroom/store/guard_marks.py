"""The triggers of a store in the newest layout, each by a short mark of its words.

Written down, because a store is judged by those who load no migration. A test makes a
fresh store and says which lines are to be changed when a migration adds or rewords one.
"""

from __future__ import annotations

from hashlib import sha256


def mark(text: str) -> str:
    """A short mark of a trigger's words; the spaces in them do not count."""
    return sha256(" ".join(text.split()).encode()).hexdigest()[:12]


# name: its table, the mark of its text in SQLite, the mark of its kind and function on a server
GUARDS: dict[str, tuple[str, str, str]] = {
    "backup_made_no_delete": ("backup_made", "9e8da0aa6624", "aa8fbb379fae"),
    "backup_made_no_delete_at_once": ("backup_made", "", "09e6bd22138c"),
    "backup_made_no_overwrite": ("backup_made", "0d782345a418", "4138cf0552a2"),
    "backup_made_no_update": ("backup_made", "6afc078b0c2d", "0e189f18c113"),
    "booking_change_no_delete": ("booking_change", "98621d5718b4", "6d8f2320d9b8"),
    "booking_change_no_delete_at_once": ("booking_change", "", "c98c29c5027d"),
    "booking_change_no_overwrite": ("booking_change", "eb769f67a897", "d683a957d69a"),
    "booking_change_no_update": ("booking_change", "cf99d0cde5bd", "e107974f67dd"),
    "bottle_no_delete": ("bottle", "3ee31c2af195", "f79b1863bb62"),
    "bottle_no_delete_at_once": ("bottle", "", "62158b2fed73"),
    "entry_keeps_balance": ("entry", "2e2eca7bbbdf", "98bfb5ec8821"),
    "entry_no_delete": ("entry", "cbba7e2290bc", "966b0a8c18d6"),
    "entry_no_delete_at_once": ("entry", "", "4dfe2ba91417"),
    "entry_no_overwrite": ("entry", "7acaf714cc63", "835243cda4ea"),
    "entry_no_update": ("entry", "ce94c6306d23", "204b83f3244c"),
    "entry_not_below_nothing": ("entry", "4433b89b34e5", "65bdeaaf0e5b"),
    "entry_put_right_once": ("entry", "4a3fdd71b25b", "c62a50ca693b"),
    "hazard_text_no_delete": ("hazard_text", "d36b7dad4114", "599ae9e81684"),
    "hazard_text_no_delete_at_once": ("hazard_text", "", "e30df13fa763"),
    "hazard_text_no_overwrite": ("hazard_text", "fa2d77a4317b", "8502c446973c"),
    "hazard_text_no_update": ("hazard_text", "8b14da2287d7", "525e4f40433e"),
    "placed_came_no_delete": ("placed_came", "2045c59d2fa2", "8da0dbc8efb8"),
    "placed_came_no_delete_at_once": ("placed_came", "", "2bf30a5048b1"),
    "placed_came_no_overwrite": ("placed_came", "811406a16ef1", "e72235c8d146"),
    "placed_came_no_update": ("placed_came", "63b435d35252", "7984223f9050"),
    "placed_change_no_delete": ("placed_change", "3d2ec21fb874", "5d2f7204f541"),
    "placed_change_no_delete_at_once": ("placed_change", "", "ec7959d7567b"),
    "placed_change_no_overwrite": ("placed_change", "c53e318037c1", "5efe0d6e24f4"),
    "placed_change_no_update": ("placed_change", "618cc2699d91", "42ad0ef3bcd1"),
    "placed_no_delete": ("placed", "ebf4bb8dc28a", "b0ac4a5aa127"),
    "placed_no_delete_at_once": ("placed", "", "a1391870bb24"),
    "placed_no_overwrite": ("placed", "ef64fd96d9a7", "6acb6c0b0970"),
    "placed_no_update": ("placed", "04bde14a4617", "d1e03b3bd498"),
    "placed_share_no_delete": ("placed_share", "69b96549292b", "8383b2a0c0c8"),
    "placed_share_no_delete_at_once": ("placed_share", "", "e91bbfa0ce17"),
    "placed_share_no_overwrite": ("placed_share", "22e4a9ecba42", "358042ee4f08"),
    "placed_share_no_update": ("placed_share", "ac02aaeeba63", "a7f8b8a72b96"),
    "printed_copy_no_delete": ("printed_copy", "629e5abb4a53", "fbe8b36ae21c"),
    "printed_copy_no_delete_at_once": ("printed_copy", "", "4880a01b32f2"),
    "printed_copy_no_overwrite": ("printed_copy", "5676cc7d7cd9", "4a263ff45c60"),
    "printed_copy_no_update": ("printed_copy", "dbcc282191a6", "c62bce2f7bee"),
    "printed_plan_no_delete": ("printed_plan", "f7595fcb84a6", "31b74ed97fc2"),
    "printed_plan_no_delete_at_once": ("printed_plan", "", "3d10dc81a127"),
    "printed_plan_no_overwrite": ("printed_plan", "58436b68decb", "69c4a39957ba"),
    "printed_plan_no_update": ("printed_plan", "9dfa5d937027", "2ebd9abb479e"),
    "reading_no_delete": ("reading", "818c67cbc8cc", "4b16d710c29c"),
    "reading_no_delete_at_once": ("reading", "", "5c77f4c87d1b"),
    "reading_no_overwrite": ("reading", "78a9e2c8f771", "fb7245626772"),
    "reading_no_update": ("reading", "be10ac613139", "e5c1393238d6"),
    "reading_taken_back_no_delete": ("reading_taken_back", "fb1ab03892cf", "8cc3419d5f4d"),
    "reading_taken_back_no_delete_at_once": ("reading_taken_back", "", "cda3bc7ed5b9"),
    "reading_taken_back_no_update": ("reading_taken_back", "24896873af54", "635566c3a82b"),
    "row_change_no_delete": ("row_change", "cc009ce93be2", "b2de7d74ba4f"),
    "row_change_no_delete_at_once": ("row_change", "", "e8747073a701"),
    "row_change_no_overwrite": ("row_change", "267bfab79c2d", "91275fcb2b68"),
    "row_change_no_update": ("row_change", "847049411459", "9c539fbe2e48"),
    "submission_no_delete": ("submission", "d75046fd143c", "e71719f91983"),
    "submission_no_delete_at_once": ("submission", "", "79cbe305eee0"),
    "submission_no_overwrite": ("submission", "3487283fcf81", "5ca2045c7387"),
    "submission_no_update": ("submission", "a4bb73b99091", "109c371c45d2"),
    "walk_end_no_delete": ("walk_end", "3c933557a033", "cf62690f23f9"),
    "walk_end_no_delete_at_once": ("walk_end", "", "a284a2d7000c"),
    "walk_end_no_overwrite": ("walk_end", "240456157b52", "cd7a3e52a96a"),
    "walk_end_no_update": ("walk_end", "19215d54941e", "bb2dc47c420a"),
    "walk_no_delete": ("walk", "86da26805af5", "e4f46abbfffa"),
    "walk_no_delete_at_once": ("walk", "", "6bbab6592ee5"),
    "walk_no_overwrite": ("walk", "4ab891070bbb", "e0e487d8dad3"),
    "walk_no_update": ("walk", "c7931298dd7e", "c70a4d3bd6b0"),
}
"""Every trigger there must be, and no other."""
