"""The method nobody types: for a single solute it follows from what the house keeps."""

from __future__ import annotations

from dataclasses import replace

from stockroom.planning.facts import Facts, Form, Ingredient, Line


def with_derived(facts: Facts) -> Facts:
    """The same facts, each method without ingredients given the solute it must be made from.

    First choice a stronger solution of the same substance while a bottle of it
    is held, then the solids, then the liquids of that substance, each by key. A
    line without a strength, or with nothing to come from, keeps its method empty.
    """
    derived = {
        key: replace(method, ingredients=_solute(facts, facts.lines[key]))
        for key, method in facts.methods.items()
        if not method.ingredients
    }
    usable = {key: method for key, method in derived.items() if method.ingredients}
    empty = derived.keys() - usable.keys()
    kept = {key: method for key, method in facts.methods.items() if key not in empty}
    return replace(facts, methods={**kept, **usable}) if derived else facts


def _solute(facts: Facts, product: Line) -> tuple[Ingredient, ...]:
    if product.strength is None:
        return ()
    same = [line for _, line in sorted(facts.lines.items()) if line.substance == product.substance]
    # diluting needs more strength than the product; equal strength is the product itself
    stronger = [line for line in same if _stronger(line, product)]
    solutions = [line.key for line in stronger if line.form is Form.SOLUTION]
    solids = [line.key for line in same if line.form is Form.SOLID]
    liquids = [line.key for line in stronger if line.form is Form.LIQUID]
    choices = (*solutions, *solids, *liquids)
    # with no solid and no liquid the stronger solution may itself have to be made
    held_only = frozenset(solutions if solids or liquids else ())
    return (Ingredient(choices, only_if_held=held_only),) if choices else ()


def _stronger(line: Line, product: Line) -> bool:
    return bool(line.strength and product.strength and line.unit == product.unit) and (
        (line.strength or 0) > (product.strength or 0)
    )
