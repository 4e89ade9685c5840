"""How well a strength is known: the budget of a result, by the rules of the GUM.

A result comes from inputs, each with its value and its doubts: how far off it may
be, and how likely the distances are. `budget` carries them through any formula;
`quotient` does it for products and quotients, which most strengths are, without
loading a library. Which doubts a weighing or a flask brings is in `made.py`.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from enum import StrEnum
from typing import TYPE_CHECKING, Any

from stockroom.chemistry.figures import positive
from stockroom.errors import BadAmount
from stockroom.measure.formats import format_number, unit_mark

if TYPE_CHECKING:
    from uncertainties import UFloat

COVERAGE = 2.0
"""The k of an expanded uncertainty: about 95 % of results lie within. Source: GUM 6.2."""

# the smallest share of a standard uncertainty that is worth telling
_DUST = 1e-12


class Shape(StrEnum):
    """How the possible values lie about the one that is used."""

    NORMAL = "normal"
    RECTANGULAR = "rectangular"
    TRIANGULAR = "triangular"


_DIVISOR = {Shape.NORMAL: 1.0, Shape.RECTANGULAR: math.sqrt(3), Shape.TRIANGULAR: math.sqrt(6)}


@dataclass(frozen=True, slots=True)
class Doubt:
    """One reason for an input to be off: `spread` either way, in the input's own unit.

    For a normal shape `spread` is one standard uncertainty, for the other two the
    limits: anywhere between them is as likely (rectangular), or the middle is the
    likeliest (triangular: a flask was made to its nominal volume). `times` is how
    often it comes in: 2 for a difference of two readings.
    Source: GUM (JCGM 100:2008) 4.3; EURACHEM/CITAC QUAM:2012 appendix E.
    """

    source: str
    spread: float
    shape: Shape = Shape.NORMAL
    times: int = 1

    @property
    def standard(self) -> float:
        """The standard uncertainty it comes to."""
        return self.spread / _DIVISOR[self.shape] * math.sqrt(self.times)


@dataclass(frozen=True, slots=True)
class Input:
    """A quantity that a result is worked out from, with its doubts."""

    name: str
    value: float
    doubts: tuple[Doubt, ...] = ()

    @property
    def standard(self) -> float:
        """The standard uncertainty of its doubts together."""
        return math.hypot(*(doubt.standard for doubt in self.doubts))


@dataclass(frozen=True, slots=True)
class Budget:
    """A result, its standard uncertainty, and what each doubt adds to it.

    `components` are (name, contribution) with the largest first; contributions are
    standard uncertainties of the result, in its unit, and add up as squares. A name
    is the input's, with the doubt's after a colon: "volume: flask".
    """

    value: float
    standard: float
    components: tuple[tuple[str, float], ...] = ()

    @property
    def relative(self) -> float:
        """The standard uncertainty as a fraction of the value."""
        return self.standard / abs(self.value)

    def expanded(self, k: float = COVERAGE) -> float:
        """The half-width of the interval that holds about 95 % of results, for k = 2."""
        return k * self.standard

    def together(self, name: str) -> float:
        """What all the doubts of one input add: "volume" for flask, filling and temperature."""
        of_it = [u for each, u in self.components if each == name or each.startswith(f"{name}: ")]
        return math.hypot(*of_it)

    def as_input(self, name: str) -> Input:
        """This result as an input of the next one; its doubts keep their names."""
        return Input(name, self.value, tuple(Doubt(each, u) for each, u in self.components))


def normal(source: str, standard: float) -> Doubt:
    """A doubt known as a standard deviation, or a quarter of a 95 % interval's width."""
    return Doubt(source, standard)


def rectangular(source: str, limit: float, *, times: int = 1) -> Doubt:
    """A doubt known by its limits only: an assay of 99.9 ± 0.1 %, a display's last figure."""
    return Doubt(source, limit, Shape.RECTANGULAR, times)


def triangular(source: str, limit: float) -> Doubt:
    """A doubt with limits whose middle is likeliest: the tolerance of glassware."""
    return Doubt(source, limit, Shape.TRIANGULAR)


def repeatability(source: str, results: Sequence[float]) -> Doubt:
    """The doubt of a mean of repeated results: their standard deviation over √n.

    Raises: BadAmount for fewer than two results.
    Source: GUM 4.2.3.
    """
    count = len(results)
    if count < 2:
        raise BadAmount(f"{count} results have no spread.", "Give two or more.")
    mean = math.fsum(results) / count
    squares = math.fsum((each - mean) ** 2 for each in results)
    return Doubt(source, math.sqrt(squares / (count - 1) / count))


def budget(model: Callable[..., Any], inputs: Sequence[Input]) -> Budget:
    """The result of `model` for the inputs, in their order, with its budget.

    To the first order of the GUM (its law of propagation, inputs independent), by
    the `uncertainties` library. The model is arithmetic, or may call `math`.
    Raises: BadAmount for a figure that is not finite, a spread below 0, two inputs
    of one name, and a model that cannot be worked out.

    >>> mass = Input("mass", 0.3888, (rectangular("linearity", 0.00015, times=2),))
    >>> found = budget(lambda m: m / 204.2212, [mass])
    >>> f"{found.value:.6f} ± {found.standard:.1e}"
    '0.001904 ± 6.0e-07'
    """
    _check(inputs)
    result = _propagated(model, [_variable(each) for each in inputs])
    if isinstance(result, int | float):
        return Budget(_finite(float(result)), 0.0)
    parts = {str(tag.tag): u for tag, u in result.error_components().items() if u}
    return _budget(_finite(result.nominal_value), parts)


def quotient(over: Sequence[Input], under: Sequence[Input] = (), *, scale: float = 1.0) -> Budget:
    """The product of `over`, divided by that of `under`, times `scale`, with its budget.

    What `budget` gives for the same, by the GUM's rule for products: relative
    uncertainties add as squares. Raises: BadAmount as `budget`, and for a value of 0.
    Source: GUM 5.1.6.
    """
    _check([*over, *under])
    for each in (*over, *under):
        positive(each.value, each.name)
    value = scale * math.prod(each.value for each in over)
    value /= math.prod(each.value for each in under)
    parts = {
        _label(each, doubt): value * doubt.standard / each.value
        for each in (*over, *under)
        for doubt in each.doubts
        if doubt.standard
    }
    return _budget(_finite(value), parts)


def exact_enough(
    value: float, standard: float, closeness: float, *, how: str = "", unit: str = ""
) -> str:
    """Nothing where `value` is known to within `closeness`; else the words that say it is not.

    `standard` is its standard uncertainty, in its unit; twice that is held against
    `closeness`, a fraction (0.005 for an exact line). `how` ends the sentence.
    Raises: BadAmount for a value or closeness not above 0, or a spread below 0.

    >>> exact_enough(0.1, 0.0003, 0.005, how="with a measuring cylinder")
    '0.1000 ± 0.0006: not exact enough with a measuring cylinder'
    """
    allowed = positive(value, "strength") * positive(closeness, "closeness")
    known = COVERAGE * _not_below_0(standard, "uncertainty")
    # what equals the allowance but for a float's last bits is within it
    if known <= allowed * (1 + 1e-9):
        return ""
    return f"{with_spread(value, known, unit=unit)}: not exact enough {how}".rstrip()


def with_spread(value: float, spread: float, *, unit: str = "") -> str:
    """A value with its expanded uncertainty, both to the figures that mean something.

    One figure of the spread, two where it begins with 1; the value to the same place.
    Source: GUM 7.2.6 (at most two figures).

    >>> with_spread(0.1021362, 0.000201, unit="mol/dm3")
    '0.1021 ± 0.0002 mol/dm³'
    """
    if not _not_below_0(spread, "uncertainty"):
        return f"{format_number(value)} {unit_mark(unit)}".rstrip()
    # the digit that counts is the one that is printed: 0.0198 is 0.02, and 0.0142 is 0.014
    two = f"{spread:.1e}"
    places = -int(two.partition("e")[2]) + (two[0] == "1")
    shown, width = round(value, places), round(spread, places)
    decimals = max(places, 0)
    text = f"{_grouped(shown, decimals)} ± {_grouped(width, decimals)} {unit_mark(unit)}"
    return text.rstrip()


def _grouped(number: float, decimals: int) -> str:
    # as `format_number` sets thousands apart, but with every zero that the spread asks for
    return f"{number:,.{decimals}f}".replace(",", " ")


def _check(inputs: Sequence[Input]) -> None:
    names = [_label(each, doubt) for each in inputs for doubt in each.doubts]
    twice = sorted({name for name in names if names.count(name) > 1})
    if twice:
        raise BadAmount(f'"{twice[0]}" stands twice in the budget.', "Give each doubt its name.")
    for each in inputs:
        _finite(each.value, each.name)
        for doubt in each.doubts:
            _not_below_0(doubt.spread, _label(each, doubt))


def _label(each: Input, doubt: Doubt) -> str:
    # a stock's doubts are named already, and the first word of them says which step's
    return f"{each.name}: {doubt.source}" if doubt.source else each.name


def _variable(each: Input) -> UFloat | float:
    from uncertainties import ufloat

    # one variable for each doubt, so that the library tells their shares apart
    doubts = [
        ufloat(0.0, doubt.standard, tag=_label(each, doubt))  # type: ignore[no-untyped-call]
        for doubt in each.doubts
        if doubt.standard
    ]
    total: UFloat | float = sum(doubts, each.value)
    return total


def _propagated(model: Callable[..., Any], values: list[Any]) -> Any:
    try:
        return _worked_out(model, values)
    except (ArithmeticError, ValueError) as fault:
        raise BadAmount(
            f"These figures give no result: {fault}.", "Check for a figure of 0."
        ) from None


def _worked_out(model: Callable[..., Any], values: list[Any]) -> Any:
    from uncertainties import wrap

    try:
        return model(*values)
    except TypeError:
        # the functions of `math` take plain numbers: the library then finds the slopes itself
        return wrap(model)(*values)  # type: ignore[no-untyped-call]


def _budget(value: float, parts: dict[str, float]) -> Budget:
    standard = math.hypot(*parts.values())
    told = [(name, abs(u)) for name, u in parts.items() if abs(u) > standard * _DUST]
    return Budget(value, standard, tuple(sorted(told, key=lambda part: (-part[1], part[0]))))


def _finite(value: float, name: str = "The result") -> float:
    if not math.isfinite(value):
        raise BadAmount(f"{name} {value}: it must be a plain number.", "Check the figures.")
    return value


def _not_below_0(spread: float, name: str) -> float:
    if not math.isfinite(spread) or spread < 0:
        raise BadAmount(f"{name} {spread}: it cannot be below 0.", f"Check the {name}.")
    return spread
