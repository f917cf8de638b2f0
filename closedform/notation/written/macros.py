"""The commands of LaTeX that formulas are written with, by what they do."""

from __future__ import annotations

__all__ = [
    "ACCENTS",
    "BARS",
    "BIGS",
    "BOLD",
    "CALLIGRAPHIC",
    "DOTS",
    "DROPPED",
    "FONTS",
    "FRACTIONS",
    "FUNCTION_WORDS",
    "MATRICES",
    "RELATION_SIGNS",
    "SEPARATING",
    "SIGNS",
    "SPACES",
    "SWITCHES",
    "SYSTEMS",
    "TEXTS",
    "VERBATIM",
]


def _words(text: str) -> frozenset[str]:
    return frozenset(text.split())


TEXTS = _words(
    "text textrm textnormal textit textbf textsf texttt textup textsl mbox hbox intertext "
    "shortintertext"
)
"""Commands whose argument is text."""

VERBATIM = {
    **dict.fromkeys(sorted(TEXTS), 1),
    **dict.fromkeys(("hspace", "vspace", "mspace", "label", "tag", "ref", "eqref", "cite"), 1),
    **dict.fromkeys(("num", "ang", "si", "unit", "phantom", "hphantom", "vphantom"), 1),
    **dict.fromkeys(("SI", "qty"), 2),
    **dict.fromkeys(("color", "textcolor", "cline"), 1),
}
"""Commands whose arguments are no formulas, and how many they are."""

DROPPED = _words(
    "displaystyle textstyle scriptstyle scriptscriptstyle limits nolimits nonumber notag "
    "hline toprule midrule bottomrule strut mathstrut allowbreak nobreak relax "
    "noindent centering protect allowdisplaybreaks null mathop mathrel mathbin mathord mathopen "
    "checkmark mathclose mathpunct mathinner ensuremath smash boxed mathlarger"
)
"""Commands that change only how a formula looks; of those with an argument it stays."""

SPACES = {
    **dict.fromkeys((",", "!", "thinspace", "negthinspace", "negmedspace", "negthickspace"), 0),
    **dict.fromkeys(
        (":", ">", ";", " ", "medspace", "thickspace", "enspace", "enskip", "space", "/"), 1
    ),
    **dict.fromkeys(("quad", "qquad", "hfill", "hfil", "eqno", "leqno"), 2),
}
"""Spaces and how wide they are: 2 parts statements."""

FONTS = _words(
    "mathrm mathit mathsf mathtt mathnormal mathup operatorname operatornamewithlimits "
    "symup symit symsf symrm mathsfit"
)
"""Fonts in which several letters are one name."""
BOLD = _words(
    "mathbf boldsymbol bm pmb symbf mathbfit symbfit vec underline underbar "
    "bold mathbfup symbfup overrightarrow"
)
"""Ways to set a vector or a matrix."""
CALLIGRAPHIC = _words("mathcal mathscr mathfrak mathbb mathds mathbbm")
"""Fonts of single letters."""
SWITCHES = {
    **dict.fromkeys(
        ("rm", "sf", "tt", "it", "sl", "normalfont", "rmfamily", "cal", "mit"), "mathrm"
    ),
    **dict.fromkeys(("bf", "bfseries", "boldmath"), "mathbf"),
    "cal": "mathcal",
    "it": "mathit",
    "mit": "mathit",
}
"""Fonts that hold to the end of the group."""

ACCENTS = {
    **{name: name for name in ("hat", "bar", "tilde", "check", "breve", "acute", "grave")},
    "overline": "bar",
    "widehat": "hat",
    "widetilde": "tilde",
    "widecheck": "check",
    "mathring": "ring",
}
"""Accents and what they add to a flattened name."""
DOTS = {"dot": 1, "ddot": 2, "dddot": 3, "ddddot": 4}
"""Accents that are derivatives by the time."""

FRACTIONS = _words("frac tfrac dfrac cfrac nicefrac sfrac flatfrac")

FUNCTION_WORDS = {
    **{name: name for name in ("exp", "sin", "cos", "tan", "cot", "sec", "csc", "sinh", "cosh")},
    **{name: name for name in ("tanh", "coth", "ln", "min", "max", "arg", "det", "rank", "diag")},
    **{name: name for name in ("asin", "acos", "atan", "atan2", "asinh", "acosh", "atanh", "adj")},
    "arcsin": "asin",
    "arccos": "acos",
    "arctan": "atan",
    "arctan2": "atan2",
    "log": "ln",
    "arsinh": "asinh",
    "arcosh": "acosh",
    "artanh": "atanh",
    **{f"Ar{name}": f"a{name}" for name in ("sinh", "cosh", "tanh")},
    **{f"Arc{name}": f"a{name}" for name in ("sin", "cos", "tan")},
    "arcsinh": "asinh",
    "arccosh": "acosh",
    "arctanh": "atanh",
    "tg": "tan",
    "ctg": "cot",
    "sh": "sinh",
    "ch": "cosh",
    "th": "tanh",
    "cosec": "csc",
    "arctg": "atan",
    "cotg": "cot",
    "Re": "re",
    "Im": "im",
    "Arg": "arg",
    "sgn": "sign",
    "sign": "sign",
    "signum": "sign",
    "tr": "trace",
    "Tr": "trace",
    "trace": "trace",
    "Spur": "trace",
    "spur": "trace",
    "rk": "rank",
    "rang": "rank",
    "Rang": "rank",
    "blkdiag": "diag",
    "blockdiag": "diag",
    "lg": "log10",
    "abs": "abs",
    "conj": "conj",
    "Diag": "diag",
    "inv": "inverse",
    "transpose": "transpose",
    "Adj": "adj",
    "sqrt": "sqrt",
    "Det": "det",
}
"""Functions by the words that people write for them."""

RELATION_SIGNS = {
    **dict.fromkeys(("=", "coloneqq", "eqqcolon", "triangleq", "colonequals", "coloneq"), "="),
    "eqdef": "=",
    **dict.fromkeys(("approx", "simeq", "cong", "approxeq", "thickapprox", "fallingdotseq"), "≈"),
    **dict.fromkeys(("doteq", "sim", "thicksim", "risingdotseq", "doteqdot"), "≈"),
    **dict.fromkeys(("neq", "ne"), "≠"),
    **dict.fromkeys(("<", "lt", "ll"), "<"),
    **dict.fromkeys((">", "gt", "gg"), ">"),
    **dict.fromkeys(("le", "leq", "leqslant", "leqq"), "≤"),
    **dict.fromkeys(("ge", "geq", "geqslant", "geqq"), "≥"),
    **dict.fromkeys(("to", "rightarrow", "longrightarrow", "longmapsto", "mapsto"), "→"),
    "equiv": "≡",
    "propto": "∝",
    "≈": "≈",
    "≠": "≠",
    "≤": "≤",
    "≥": "≥",
    "→": "→",
    "≡": "≡",
    "≃": "≈",
    "≅": "≈",
    "∝": "∝",
}
"""Relations by the sign or the command."""

SEPARATING = _words(
    "Rightarrow implies Longrightarrow iff Leftrightarrow Longleftrightarrow therefore because "
    "impliedby Leftarrow Longleftarrow leadsto land wedge lor vee"
)
"""Commands between two statements."""

SIGNS = {
    **dict.fromkeys(("+",), "PLUS"),
    **dict.fromkeys(("-", "−", "–"), "MINUS"),
    **dict.fromkeys(("pm", "±"), "PLUS_MINUS"),
    **dict.fromkeys(("mp", "∓"), "MINUS_PLUS"),
    **dict.fromkeys(("*", "cdot", "times", "ast", "·", "⋅", "×", "cdotp", "bullet"), "TIMES"),
    **dict.fromkeys(("/", "slash", "div", "÷"), "OVER"),
}
"""Operators by the sign."""

BIGS = {
    **{
        f"{size}{side}": side
        for size in ("big", "Big", "bigg", "Bigg")
        for side in ("", "l", "r", "m")
    },
}
"""Sizes of brackets, and the side they say."""

BARS = {
    **dict.fromkeys(("|", "vert", "mid"), ("BAR", "")),
    "lvert": ("BAR", "l"),
    "rvert": ("BAR", "r"),
    **dict.fromkeys(("\\|", "Vert", "‖"), ("NORM", "")),
    "lVert": ("NORM", "l"),
    "rVert": ("NORM", "r"),
}
"""Bars: absolute value or norm, and the side they say."""

MATRICES = {
    **dict.fromkeys(("matrix", "pmatrix", "bmatrix", "Bmatrix", "smallmatrix", "array"), ""),
    **dict.fromkeys(("psmallmatrix", "bsmallmatrix", "Bsmallmatrix", "tabular"), ""),
    **dict.fromkeys(("vmatrix", "vsmallmatrix"), "det"),
    **dict.fromkeys(("Vmatrix", "Vsmallmatrix"), "norm"),
}
"""Environments of a matrix, and the function of it that its brackets stand for."""

SYSTEMS = _words(
    "aligned align split gather gathered multline multlined eqnarray alignat alignedat flalign "
    "equation displaymath math subequations dmath IEEEeqnarray empheq"
)
"""Environments of statements in lines."""
