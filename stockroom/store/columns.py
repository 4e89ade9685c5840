"""Every table and its columns, for the reading half, which never imports `tables.py`.

A test holds this against the SQLModel classes, column by column.
"""

from __future__ import annotations

COLUMNS: dict[str, tuple[str, ...]] = {
    table: tuple(names.split())
    for table, names in {
        "house": "setting value source",
        "term": "id term starts_on ends_on source",
        "closure": "id starts_on ends_on reason source",
        "place": "id place name temperature_c meant_for source",
        "department": "id department name left_pence source",
        "balance": "id balance step source",
        "balance_away": "id balance_id starts_on ends_on",
        "vessel": "id vessel size source",
        "vessel_away": "id vessel_id starts_on ends_on",
        "glassware": "id glass kind size glass_class step source",
        "glassware_away": "id glassware_id starts_on ends_on",
        "reading": "id place_id at centi",
        "reading_taken_back": "id place_id at centi change_id",
        "substance": "id substance formula molar_mass cas storage_group peroxide_former density"
        " note source",
        "hazard": "id substance_id hazard_class h_code from_percent below_percent basis route ate"
        " m_factor percent_of how source",
        "hazard_text": "id line_id signal_word statements pictograms sheet why by entered_on"
        " entered_at",
        "other_name": "id substance_id name",
        "line": "id key item substance_id form kind strength unit strength_text formula"
        " molar_mass assay density level largest_batch never_kept vented_cap keep_note"
        " ask_first ask_days source",
        "keeping_rule": "id line_id rule lasts_count lasts_unit counted_from purpose safety"
        " decay_order rate at_c factor_per_10c ea_kj_mol named_law above upto colder_than"
        " warmer_than source house in_use",
        "method": "id line_id minutes minutes_guessed finish_minutes stands_hours titrated"
        " smallest_batch steps cautions source",
        "ingredient": "id line_id ingredient_id alternative role per_dm3 only_if_held source",
        "pack": "id line_id size text pence lead supplier source",
        "placed": "id number line_id size pack packs pence supplier ordered_on expected_on"
        " entered_on entered_at by note",
        "placed_share": "id placed_id department_id pence",
        "placed_came": "id placed_id entry_id",
        "placed_change": "id placed_id what before after why happened_on entered_on entered_at by",
        "former_use": "id line_id starts_on ends_on amount groups source",
        "recipe": "id recipe version title never_kept waste handling assessment source",
        "requirement": "id recipe_id number line_id lowest highest strength_text amount per"
        " closeness closeness_guessed tolerance fresh freshest_days spare may_differ"
        " found_within_days note source",
        "bar": "id recipe_id substance_id reason source",
        "swap": "id recipe_id line_id instead_id factor note source",
        "booking": "id number recipe_id on_day minute groups spare department_id firmness room"
        " source",
        "booking_change": "id booking_id entered_on entered_at by what before after",
        "bottle": "id number line_id size received_on made_on printed_text printed_readings cap"
        " remark made_here source lot assay tare decanted_from",
        "parent": "id bottle_id parent_id",
        "row_change": "id table_name row_key column_name before after why by entered_on entered_at",
        "printed_plan": "id number as_at kept_at by cautious digest usual marks decisions",
        "printed_copy": "id number sheet about as_at printed_at by lines",
        "entry": "id bottle_id kind happened_on entered_on entered_at by change strength"
        " strength_text uncertainty peroxide_mg_kg passed place_id reason note booking puts_right"
        " about walk_id",
        "kept_balance": "bottle_id held",
        "walk": "id name places started_on entered_on entered_at by",
        "walk_end": "id walk_id ended_on entered_on entered_at by note",
        "submission": "id token entered_on entered_at by answer",
        "backup_made": "id place entries digest entered_on entered_at by",
    }.items()
}

KEPT_BESIDE = frozenset({"kept_balance"})
"""Tables a trigger fills from others: copied with a store's other rows, they would count twice."""
