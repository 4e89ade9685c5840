"""What a row of a list may say of a bottle, and the headings each of it is known by."""

from __future__ import annotations

FIELDS: dict[str, str] = {
    "name": "name; chemical; chemical name; substance; reagent; material; item; product;"
    " description; what; compound; contents; solution; item name; name of chemical; chemicals",
    "amount": "amount; left; remaining; quantity; qty; mass; weight; volume; vol; amount left;"
    " quantity left; on hand; how much; how much left; qty left; quantity remaining;"
    " qty remaining; stock left; current amount; in stock; in hand; content",
    "unit": "unit; units; uom; measure; unit of measure",
    "size": "size; pack; pack size; bottle size; container size; capacity; original amount;"
    " size of bottle; full",
    "count": "count; bottles; containers; number of bottles; no of bottles; no. of bottles;"
    " how many; how many bottles; no; no.; nr; number; #",
    "opened": "opened; date opened; opened on; open; open date; opening date; first opened;"
    " opened date",
    "received": "received; date received; received on; received date; arrived; delivered;"
    " delivery date; bought; purchased; purchase date; date in; date of purchase; acquired",
    "made": "made; made on; date made; prepared; date prepared; prepared on; made up;"
    " date of preparation; prep date",
    "printed": "exp; expiry; expires; expiry date; exp date; exp. date; expiration;"
    " expiration date; use by; use by date; use before; best before; printed; printed date;"
    " good until; bbe; shelf life end",
    "strength": "strength; conc; conc.; concentration; molarity; concn; conc'n; strong",
    "assay": "assay; purity",
    "place": "place; where; location; loc; shelf; cupboard; cabinet; stored; stored in; kept;"
    " storage; storage location; room; position; where kept; where is it; store",
    "formula": "formula; formulae; molecular formula; chemical formula",
    "cas": "cas; cas no; cas no.; cas number; cas rn; registry number; cas #",
    "lot": "lot; batch; lot no; lot no.; batch no; batch no.; lot number; batch number; lot/batch",
    "note": "note; notes; comment; comments; remark; remarks; other; memo",
}
"""What a row may say, and the headings each is known by, in small letters.

Source: what lists of schools call them; common practice, no source.
"""

LEFT_OUT = "leave-out"
DATES = ("opened", "received", "made", "printed")
NUMBERS = ("amount", "size", "assay")
MEASURED = ("amount", "size")
