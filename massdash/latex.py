"""An outcome as LaTeX tables, one for each stage of the chain; they need no package and any engine."""

import textwrap
import unicodedata
from itertools import groupby

from massdash.provenance import method_line, numbered_methods, provenance
from massdash.quantities import QUANTITIES, STAGES

_ESCAPES = {
    "\\": r"\textbackslash{}", "{": r"\{", "}": r"\}", "$": r"\$", "&": r"\&", "%": r"\%", "#": r"\#", "_": r"\_",
    "^": r"\^{}", "~": r"\~{}", "<": "$<$", ">": "$>$", "|": "$|$", '"': "''",
}  # fmt: skip
_SIGNS = {"–": "--", "—": "---", "−": "$-$", "×": r"$\times$", "·": r"$\cdot$", "≤": r"$\le$", "≥": r"$\ge$"}
_SIGNS |= {"≈": r"$\approx$", "±": r"$\pm$", "°": r"$^{\circ}$", "☉": r"$\odot$", "⊙": r"$\odot$", "’": "'"}
_ACCENTS = {
    "\u0300": r"\`", "\u0301": r"\'", "\u0302": r"\^", "\u0303": r"\~", "\u0304": r"\=", "\u0306": r"\u",
    "\u0307": r"\.", "\u0308": r"\"", "\u030a": r"\r", "\u030b": r"\H", "\u030c": r"\v", "\u0327": r"\c",
}  # fmt: skip
_LETTERS = {"ß": r"\ss{}", "æ": r"\ae{}", "Æ": r"\AE{}", "ø": r"\o{}", "Ø": r"\O{}", "ł": r"\l{}", "Ł": r"\L{}"}
_LETTERS |= {"œ": r"\oe{}", "Œ": r"\OE{}", "ı": r"\i{}"}
_END = r"\tabularnewline"  # a plain \\ would end a line within a ragged cell, not the row
_BOTTOM = [r"\hline", r"\end{tabular}", r"\par}\bigskip"]


def as_latex(outcome):
    r"""Tables to ``\input`` in a paper: quantity, value with its spread, unit, number of the method, and a note; below
    them the methods with their sources.

    Versions, scenario, verdict and warnings stand above the tables as comments.
    """
    methods = numbered_methods(outcome)
    lines = _comments(outcome)
    for stage, names in groupby(outcome.entries, key=lambda name: QUANTITIES[name].stage):
        rows = (_row(name, outcome.entries[name], methods) for name in names)
        lines += ["", *_top(STAGES[stage]), *rows, *_BOTTOM]
    listed = (f"[{index}]~{escape(method_line(pair))}." for pair, index in methods.items())
    return "\n".join([*lines, "", r"{\noindent\scriptsize\raggedright Methods and sources:", *listed, r"\par}"]) + "\n"


def escape(text):
    """Text that LaTeX prints as it stands; what plain LaTeX has no sign for becomes its name in brackets."""
    return "".join(map(_escape_one, text))


def number(value):
    r"""A number to six digits in math mode: ``$1.2\times 10^{54}$``."""
    mantissa, _, exponent = f"{value:.6g}".partition("e")
    return rf"${mantissa}\times 10^{{{int(exponent)}}}$" if exponent else f"${mantissa}$"


def unit(text):
    """An astropy unit string in upright math; nothing for a plain number."""
    from astropy import units as u

    return u.Unit(text).to_string("latex_inline") if text else ""


def _escape_one(sign):
    if sign in _ESCAPES:
        return _ESCAPES[sign]
    if sign.isascii():
        return sign if sign.isprintable() else " "
    return _SIGNS.get(sign) or _LETTERS.get(sign) or _accented(sign) or _by_name(sign)


def _accented(sign):
    base, *marks = unicodedata.normalize("NFD", sign)
    if not (base.isascii() and base.isalpha() and len(marks) == 1 and marks[0] in _ACCENTS):
        return ""
    dotless = f"\\{base}" if base in "ij" else base
    return f"{_ACCENTS[marks[0]]}{{{dotless}}}"


def _by_name(sign):
    """Greek letters and raised or lowered figures as math, anything else as its name."""
    words = unicodedata.name(sign, f"U+{ord(sign):04X}").split()
    greek = {("GREEK", "SMALL", "LETTER"): str.lower, ("GREEK", "CAPITAL", "LETTER"): str.capitalize}
    if (case := greek.get(tuple(words[:3]))) and len(words) == 4 and words[3] in _GREEK:
        return rf"$\{case(words[3])}$" if case is str.lower or words[3] in _CAPITALS else words[3][0]
    shape, _, figure = unicodedata.decomposition(sign).partition(" ")
    if shape in ("<super>", "<sub>"):
        return f"${'^' if shape == '<super>' else '_'}{{{chr(int(figure, 16)).replace('−', '-')}}}$"
    return f"[{' '.join(words).lower()}]"


_CAPITALS = {"GAMMA", "DELTA", "THETA", "XI", "PI", "SIGMA", "PHI", "PSI", "OMEGA"}
_GREEK = _CAPITALS | {"ALPHA", "BETA", "EPSILON", "ZETA", "ETA", "IOTA", "KAPPA", "MU", "NU", "RHO", "TAU", "CHI"}


def _comments(outcome):
    about = provenance(outcome)
    lines = [f"{about['program']}, constants {about['constants']}, data {about['data']}"]
    lines += [f"{name}: {value}" for name, value in about["scenario"].items()]
    lines += [f"birth: {outcome.birth}", f"fate: {outcome.fate}", outcome.headline, *outcome.warnings]
    return [f"% {part}" for line in lines for part in textwrap.wrap(line, 100)]


def _top(title):
    heads = " & ".join([escape(title), "Value", "Unit", "Method", "Note"])
    small = r"{\noindent\scriptsize\setlength{\tabcolsep}{3pt}\raggedright"
    return [
        small,
        r"\begin{tabular}{@{}lp{0.18\linewidth}lcp{0.22\linewidth}@{}}",
        r"\hline",
        rf"{heads} {_END}",
        r"\hline",
    ]


def _row(name, entry, methods):
    index = methods.get((entry.method, entry.source), "") if entry.value is not None else ""
    method = f"[{index}]" if index else ""
    cells = [escape(name), _ragged(_value(entry)), unit(entry.unit), method, _ragged(escape(entry.note))]
    return " & ".join(cells) + rf" {_END}"


def _ragged(text):
    """A cell of several lines without stretched spaces."""
    return rf"\raggedright {text}" if text else ""


def _value(entry):
    if entry.value is None:
        return r"$\ldots$"
    if entry.low is None and entry.high is None:
        return number(entry.value)
    low, high = (number(entry.value if end is None else end) for end in (entry.low, entry.high))
    return f"{number(entry.value)} ({low} to~{high})"
