"""Read a formula tree as MathML Core, for the page."""

from __future__ import annotations

from html import escape

from ..formula import parse
from ..formula.text import write
from ..formula.tree import Apply, Choice, Constant, Name, Number, Tree
from ..problems import UnusableInput

SPELLED = "alpha beta gamma delta epsilon zeta eta theta kappa lambda mu nu xi pi rho sigma tau phi chi psi omega"
GREEK = dict(zip(SPELLED.split(), "αβγδεζηθκλμνξπρστφχψω", strict=True))
CONSTANTS = {"kB": ("k", "B"), "ke": ("k", "e")}
RELATIONS = {"<": "&lt;", "<=": "≤", ">": "&gt;", ">=": "≥"}
SUM, PRODUCT, ATOM = range(3)


def formula_markup(formula: str) -> str:
    """Return a formula as a ``math`` element, U(r) = …; as plain text if it can't be parsed."""
    try:
        tree = parse(formula)
    except UnusableInput:
        return f"<code>{escape(formula)}</code>"
    left = "<mi>U</mi><mo>(</mo><mi>r</mi><mo>)</mo><mo>=</mo>"
    return f'<math displaystyle="true"><mrow>{left}{markup(tree)}</mrow></math>'


def markup(tree: Tree) -> str:
    """Return a tree as presentation MathML, without the ``math`` element around it."""
    match tree:
        case Number() | Constant():
            return _number(write(tree))
        case Name():
            return name_markup(tree.name)
        case Choice():
            return _choice(tree)
        case Apply(function="+"):
            return _row(_sum(tree))
        case Apply(function="*"):
            return _row(_product(tree))
        case Apply(function="/"):
            over, under = tree.arguments
            return _fraction(over, under)
        case Apply(function="negate"):
            return _row(f"<mo>−</mo>{_held(tree.arguments[0], PRODUCT)}")
        case Apply(function="^"):
            base, exponent = tree.arguments
            return f"<msup>{_base(base)}{_raised(exponent)}</msup>"
        case Apply():
            return _function(tree)


def _row(content: str) -> str:
    return f"<mrow>{content}</mrow>"


def _brackets(content: str) -> str:
    return _row(f"<mo>(</mo>{content}<mo>)</mo>")


def _number(text: str) -> str:
    mantissa, _, power = text.replace("/", "∕").partition("e")
    sign, digits = ("<mo>−</mo>", mantissa[1:]) if mantissa.startswith("-") else ("", mantissa)
    number = f"{sign}<mn>{digits}</mn>"
    if power:
        number += f"<mo>⋅</mo><msup><mn>10</mn>{_number(power)}</msup>"
    return _row(number) if sign or power else number


def name_markup(name: str) -> str:
    """Return a name, Greek where it is spelled so, with what follows as a subscript."""
    stem, index = CONSTANTS.get(name) or _split(name)
    base = f"<mi>{GREEK.get(stem, escape(stem))}</mi>"
    return f"<msub>{base}<mi>{GREEK.get(index, escape(index))}</mi></msub>" if index else base


def _split(name: str) -> tuple[str, str]:
    if "_" in name.strip("_"):
        stem, _, index = name.partition("_")
        return stem, index.replace("_", " ")
    stem = name.rstrip("0123456789")
    return (stem, name[len(stem) :]) if stem else (name, "")


def _tightness(tree: Tree) -> int:
    match tree:
        case Apply(function="+" | "negate"):
            return SUM
        case Number() if tree.value < 0:
            return SUM
        case Apply(function="*"):
            return PRODUCT
        case _:
            return ATOM


def _held(tree: Tree, tightness: int) -> str:
    content = markup(tree)
    return content if _tightness(tree) >= tightness else _brackets(content)


def _base(tree: Tree) -> str:
    simple = isinstance(tree, Name | Number) and _tightness(tree) == ATOM
    return markup(tree) if simple else _brackets(markup(tree))


def _fraction(over: Tree, under: Tree) -> str:
    if isinstance(over, Apply) and over.function == "negate":
        return _row(f"<mo>−</mo>{_fraction(over.arguments[0], under)}")
    return f"<mfrac>{markup(over)}{markup(under)}</mfrac>"


def _raised(tree: Tree) -> str:
    """Return an exponent, a fraction in it on one line, since a stacked one gets too small."""
    if isinstance(tree, Apply) and tree.function == "negate":
        return _row(f"<mo>−</mo>{_raised(tree.arguments[0])}")
    if isinstance(tree, Apply) and tree.function == "/":
        over, under = tree.arguments
        if isinstance(over, Apply) and over.function == "negate":
            return _row(f"<mo>−</mo>{_raised(Apply('/', (over.arguments[0], under)))}")
        return _row(f"{_held(over, PRODUCT)}<mo>/</mo>{_held(under, ATOM)}")
    return markup(tree)


def _sum(tree: Apply) -> str:
    content = _held(tree.arguments[0], PRODUCT)
    for term in tree.arguments[1:]:
        if isinstance(term, Apply) and term.function == "negate":
            content += f"<mo>−</mo>{_held(term.arguments[0], PRODUCT)}"
        else:
            content += f"<mo>+</mo>{_held(term, PRODUCT)}"
    return content


def _product(tree: Apply) -> str:
    factors = [_held(part, PRODUCT) for part in tree.arguments]
    pieces = [factors[0]]
    for before, after, factor in zip(tree.arguments, tree.arguments[1:], factors[1:], strict=False):
        digits = isinstance(before, Number) and isinstance(after, Number)
        pieces += ["<mo>⋅</mo>" if digits else '<mspace width="0.17em"></mspace>', factor]
    return "".join(pieces)


def _function(tree: Apply) -> str:
    arguments = [markup(argument) for argument in tree.arguments]
    match tree.function:
        case "exp":
            return f"<msup><mi>e</mi>{_raised(tree.arguments[0])}</msup>"
        case "sqrt":
            return f"<msqrt>{arguments[0]}</msqrt>"
        case "abs":
            return _row(f"<mo>|</mo>{arguments[0]}<mo>|</mo>")
        case "tang_toennies":
            return _row(f"<msub><mi>f</mi>{arguments[0]}</msub>{_brackets(arguments[1])}")
        case name:
            shown = "ln" if name == "log" else name
            return _row(f"<mi>{escape(shown)}</mi>{_brackets('<mo>,</mo>'.join(arguments))}")


def _choice(tree: Choice) -> str:
    condition = f"{markup(tree.left)}<mo>{RELATIONS[tree.comparison]}</mo>{markup(tree.right)}"
    cases = ((tree.then, f"<mtext>if </mtext>{condition}"), (tree.otherwise, "<mtext>otherwise</mtext>"))
    rows = "".join(f"<mtr><mtd>{markup(value)}</mtd><mtd>{_row(when)}</mtd></mtr>" for value, when in cases)
    return _row(f"<mo>{{</mo><mtable>{rows}</mtable>")
