"""Parse the text of a formula to a tree through an allow-list; nothing is ever run as code."""

from __future__ import annotations

import ast
import keyword
import re
import sys
import warnings
from fractions import Fraction

from ..problems import Problem, UnusableInput, nearest
from .tree import Apply, Choice, Name, Number, Place, Tree, depth, negate

LONGEST = 100_000
"""Characters a formula may have."""
DEEPEST = 200
"""Levels of brackets, and of operations one in the other, a formula may have."""
# Every reading goes down a tree by recursion, three or four calls a level; Python's usual limit is too near.
sys.setrecursionlimit(max(sys.getrecursionlimit(), 20 * DEEPEST))

LARGEST_EXPONENT = 1000
"""Size up to which a literal exponent is taken."""

FUNCTIONS = {
    **dict.fromkeys(("exp", "log", "sqrt", "erf", "erfc", "sin", "cos", "tan", "sinh", "cosh", "tanh", "abs"), 1),
    "min": 2,
    "max": 2,
    "tang_toennies": 2,
    "where": 3,
}
"""The functions of the language and how many arguments each takes."""
CONSTANTS = ("pi", "kB", "ke")
COMPARISONS = {ast.Lt: "<", ast.LtE: "<=", ast.Gt: ">", ast.GtE: ">="}
LITERAL = re.compile(r"(\d{1,60}(\.\d{0,60})?|\.\d{1,60})([eE][+-]?\d{1,3})?")
FOREIGN = re.compile(r"[^A-Za-z0-9_.+\-*/^()<>=,\s]")
TOKEN = re.compile(r"[A-Za-z_][A-Za-z0-9_]*|(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?|\S")
OPERAND_ENDS = re.compile(r"[A-Za-z0-9_)]")
OPERAND_STARTS = re.compile(r"[A-Za-z0-9_(]|\.\d")
WINDOW = 60


class FormulaError(UnusableInput):
    """A formula that can't be used, with the place in its text.

    Attributes
    ----------
    place : (int, int)
        Start and end of the faulty part, in characters.
    """

    def __init__(self, text: str, place: Place, says: str, remedy: str = "") -> None:
        self.place = place
        self.text = text
        super().__init__([Problem("", says, remedy, excerpt(text, place))])


def excerpt(text: str, place: Place) -> str:
    """Return the part of a text around a place, with a line of carets under it."""
    start = min(max(place[0], 0), len(text))
    left = max(0, start - WINDOW // 2)
    shown = re.sub(r"\s", " ", text[left : left + WINDOW])
    before, after = "… " if left else "", " …" if left + WINDOW < len(text) else ""
    width = max(1, min(place[1], left + len(shown)) - start)
    return f"{before}{shown}{after}\n{' ' * (len(before) + start - left)}{'^' * width}"


def parse(text: str) -> Tree:
    """Parse a formula.

    Parameters
    ----------
    text : str
        A formula such as ``"4*epsilon*((sigma/r)^12 - (sigma/r)^6)"``.

    Returns
    -------
    Tree

    Raises
    ------
    FormulaError
        With the place and what was expected there.
    """
    _refuse_outsize(text)
    python, origin = _as_python(text)
    return _Parser(text, origin).expression(_syntax(text, python, origin))


def _refuse_outsize(text: str) -> None:
    if len(text) > LONGEST:
        says = f"The formula has {len(text):,} characters; at most {LONGEST:,} are taken."
        raise FormulaError(text[:WINDOW], (0, 1), says, "Give computed points instead of so long a formula.")
    if not text.strip():
        raise FormulaError(text, (0, 1), "The formula is empty.", "Write the energy as a formula in r.")
    if found := FOREIGN.search(text):
        says = f"The character {found.group()!r} has no meaning in a formula."
        raise FormulaError(text, found.span(), says, "Use + - * / ^ ( ) , < > numbers and names.")
    _refuse_brackets(text)
    _refuse_neighbours(text)


def _refuse_brackets(text: str) -> None:
    opened: list[int] = []
    for position, character in enumerate(text):
        if character == "(":
            opened.append(position)
        elif character == ")":
            if not opened:
                says = "This bracket closes nothing."
                raise FormulaError(text, (position, position + 1), says, "Take it away, or open one before.")
            opened.pop()
        if len(opened) > DEEPEST:
            says = f"Brackets are nested deeper than {DEEPEST} levels."
            raise FormulaError(text, (position, position + 1), says, "Split the formula into terms.")
    if opened:
        says = "This bracket is never closed."
        raise FormulaError(text, (opened[-1], opened[-1] + 1), says, "Close it.")


def _refuse_neighbours(text: str) -> None:
    """Refuse two operands without an operator between them, and words that Python keeps for itself."""
    before = ""
    for found in TOKEN.finditer(text):
        token = found.group()
        if keyword.iskeyword(token):
            says = f'"{token}" is a reserved word and can\'t be used in a formula.'
            raise FormulaError(text, found.span(), says, f"Take another name, such as {token}_0.")
        called = token == "(" and before[:1].isidentifier()
        if OPERAND_ENDS.match(before[-1:]) and OPERAND_STARTS.match(token) and not called:
            says = "An operator is missing before this."
            raise FormulaError(text, found.span(), says, "Write every product with *.")
        before = token


def _as_python(text: str) -> tuple[str, list[int]]:
    """Write ``^`` as ``**`` and every blank as a space; map each new character to its old place."""
    characters: list[str] = []
    origin: list[int] = []
    for position, character in enumerate(text):
        if not characters and character.isspace():
            continue
        piece = "**" if character == "^" else " " if character.isspace() else character
        characters.append(piece)
        origin.extend([position] * len(piece))
    return "".join(characters), [*origin, len(text)]


def _syntax(text: str, python: str, origin: list[int]) -> ast.expr:
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore", SyntaxWarning)
            return ast.parse(python, mode="eval").body
    except SyntaxError as error:
        # Python gives no place where the text ends too early.
        position = origin[min((error.offset or len(origin)) - 1, len(origin) - 1)]
        says = "The formula can't be read from here on: an operator, a number, a name or a bracket is missing."
        raise FormulaError(
            text, (position, position + 1), says, "Write every product with *, close every bracket."
        ) from None
    except (RecursionError, MemoryError, ValueError):
        raise FormulaError(
            text, (0, 1), "The formula is nested too deeply to be read.", "Split the formula into terms."
        ) from None


class _Parser:
    """Turn Python's syntax tree into ours; holds the text only to point into it."""

    def __init__(self, text: str, origin: list[int]) -> None:
        self.text = text
        self.origin = origin

    def place(self, node: ast.AST) -> Place:
        start = self.origin[node.col_offset]  # type: ignore[attr-defined]
        return start, self.origin[node.end_col_offset - 1] + 1  # type: ignore[attr-defined]

    def refuse(self, node: ast.AST, says: str, remedy: str) -> FormulaError:
        return FormulaError(self.text, self.place(node), says, remedy)

    def expression(self, root: ast.expr) -> Tree:
        try:
            tree = self.read(root)
            fits = depth(tree) <= 3 * DEEPEST
        except RecursionError:
            fits = False
        if not fits:
            says = f"The formula is nested deeper than {DEEPEST} levels."
            raise FormulaError(self.text, (0, 1), says, "Split the formula into terms.")
        return tree

    def read(self, node: ast.expr) -> Tree:
        match node:
            case ast.Constant():
                return self.number(node)
            case ast.Name():
                return self.name(node)
            case ast.UnaryOp(op=ast.USub()):
                return negate(self.read(node.operand))
            case ast.UnaryOp(op=ast.UAdd()):
                return self.read(node.operand)
            case ast.BinOp(op=ast.Add() | ast.Sub()):
                return self.sum(node)
            case ast.BinOp(op=ast.Mult()):
                return self.product(node)
            case ast.BinOp(op=ast.Div()):
                return self.binary("/", node, self.read(node.right))
            case ast.BinOp(op=ast.Pow()):
                return self.power(node)
            case ast.Call(func=ast.Name()):
                return self.call(node)
            case ast.Compare():
                raise self.refuse(
                    node,
                    "A comparison stands only inside where(…).",
                    "Write where(a < b, value if so, else).",
                )
            case _:
                raise self.refuse(
                    node,
                    "This is no part of the formula language.",
                    "Use numbers, names, + - * / ^ and functions.",
                )

    def operator(self, node: ast.BinOp) -> Place:
        """The place of the operator sign between two operands."""
        start, end = self.place(node.left)[1], self.place(node.right)[0]
        between = self.text[start:end]
        sign = re.search(r"\*\*|[-+*/^]", between)
        return (start + sign.start(), start + sign.end()) if sign else (start, max(end, start + 1))

    def number(self, node: ast.Constant) -> Tree:
        start, end = self.place(node)
        literal = self.text[start:end]
        if not LITERAL.fullmatch(literal):
            raise self.refuse(node, "This is not a number of the formula language.", "Write it like 12, 0.5 or 1.5e-3.")
        return Number(Fraction(literal), (start, end))

    def name(self, node: ast.Name) -> Tree:
        if node.id in FUNCTIONS:
            raise self.refuse(
                node, f"{node.id} is a function and needs its arguments in brackets.", f"Write {node.id}(…)."
            )
        return Name(node.id, self.place(node))

    def binary(self, function: str, node: ast.BinOp, right: Tree) -> Tree:
        return Apply(function, (self.read(node.left), right), self.place(node), (self.operator(node),))

    def sum(self, node: ast.BinOp) -> Tree:
        return self.chain(node, "+", (ast.Add, ast.Sub))

    def product(self, node: ast.BinOp) -> Tree:
        return self.chain(node, "*", (ast.Mult,))

    def chain(self, node: ast.BinOp, function: str, operators: tuple[type[ast.operator], ...]) -> Tree:
        """Read a whole chain of + and -, or of *, as one flat node, so that long sums stay shallow."""
        terms: list[Tree] = []
        signs: list[Place] = []
        current: ast.expr = node
        while isinstance(current, ast.BinOp) and isinstance(current.op, operators):
            term = self.read(current.right)
            terms.append(negate(term) if isinstance(current.op, ast.Sub) else term)
            signs.append(self.operator(current))
            current = current.left
        terms.append(self.read(current))
        return Apply(function, tuple(reversed(terms)), self.place(node), tuple(reversed(signs)))

    def power(self, node: ast.BinOp) -> Tree:
        exponent = self.read(node.right)
        if isinstance(exponent, Number) and abs(exponent.value) > LARGEST_EXPONENT:
            raise self.refuse(
                node.right,
                f"The exponent is larger than {LARGEST_EXPONENT}.",
                "Use a smaller power or exp(…).",
            )
        return self.binary("^", node, exponent)

    def call(self, node: ast.Call) -> Tree:
        assert isinstance(node.func, ast.Name)
        name = node.func.id
        if name not in FUNCTIONS:
            raise self.refuse(node.func, f'There is no function "{name}".', nearest(name, FUNCTIONS))
        wanted, given = FUNCTIONS[name], len(node.args)
        if node.keywords:
            raise self.refuse(node.keywords[0], "An argument has no name here.", f"Write {name}(…) with values.")
        if given != wanted:
            says = f"{name} takes {wanted} argument{'s' if wanted > 1 else ''}, not {given}."
            raise self.refuse(node, says, f"Mend {name}(…).")
        if name == "where":
            return self.choice(node)
        arguments = tuple(self.read(argument) for argument in node.args)
        if name == "tang_toennies":
            self.check_order(node.args[0], arguments[0])
        return Apply(name, arguments, self.place(node))

    def check_order(self, node: ast.expr, order: Tree) -> None:
        if not (isinstance(order, Number) and order.value.denominator == 1 and 0 <= order.value <= 60):
            raise self.refuse(
                node,
                "The order of tang_toennies must be a whole number from 0 to 60.",
                "Write tang_toennies(6, b*r).",
            )

    def choice(self, node: ast.Call) -> Tree:
        condition = node.args[0]
        if not isinstance(condition, ast.Compare) or len(condition.ops) != 1:
            raise self.refuse(condition, "where needs one comparison first.", "Write where(a < b, x, y).")
        comparison = COMPARISONS.get(type(condition.ops[0]))
        if comparison is None:
            raise self.refuse(condition, "Only < <= > >= compare.", "Write where(a < b, x, y).")
        left, right = self.read(condition.left), self.read(condition.comparators[0])
        return Choice(comparison, left, right, self.read(node.args[1]), self.read(node.args[2]), self.place(node))
