"""Texts that cannot be read, one fault each: the marked place, the words, the mend.

The place that the complaint must mark stands between « and », which are not part of the text.
"""

from __future__ import annotations

from typing import NamedTuple


class Wrong(NamedTuple):
    """A text with its marked place, and pieces of the message and of the hint."""

    marked: str
    message: str
    hint: str

    @property
    def text(self) -> str:
        """The text without the marks."""
        return self.marked.replace("«", "").replace("»", "")

    @property
    def place(self) -> tuple[int, int]:
        """Where the marked place starts and ends."""
        return self.marked.index("«"), self.marked.index("»") - 1


UNITS = [
    Wrong(
        "w = 45 «khz»",
        "`khz` came after a number on its line, where a unit was expected",
        "did you mean `kHz`?",
    ),
    Wrong("w = 45 «micron»", "no unit is called so", "did you mean `um`?"),
    Wrong("T = 3 «kelvins»", "no unit is called so", "did you mean `K`?"),
    Wrong("m = 84 «amu»", "no unit is called so", "did you mean `u`?"),
    Wrong("a = 3 J.m2/«Wx»", "`Wx` came after a number", "did you mean `W`"),
    Wrong("a = 2 «x»", "`x` came after a number on its line", "write `*x` if it is a name"),
    Wrong("a = 5 W/«x»", "`x` came after a number on its line", "write ` / x` if it is a name"),
    Wrong("a = 2 «x_1»", "`x_1` came after a number on its line", "write `*x_1`"),
    Wrong("a = 3 «find» T_c for g", "`find` came after a number", "begin a new line before `find`"),
    Wrong("T = 20 «degC»", "there is no degree Celsius", "in K, mK, uK or nK"),
    Wrong("T = 20 «°C»", "there is no degree Celsius", "in K, mK, uK or nK"),
    Wrong("a = 45 «°»", "an angle has the unit `deg`", "write `45 deg`"),
    Wrong("w = «45um»", "between a number and its unit a space is expected", "write `45 um`"),
    Wrong("w = 45\n«um»\nb = 2", "a unit is expected on the line of its number", "join the two lines"),
    Wrong("a = 45 «m²»", "the exponent of a unit is written in plain digits", "write `m2`"),
    Wrong("g = «9.8 m/s^2»", "`^` came after the unit of `9.8 m/s`", "write `9.8 m/s2` for the unit"),
    Wrong("a = 1 «m100»", "no unit is called so", "write `*m100`"),
    Wrong("a = 1 «m-100»", "a unit with the exponent -100", "exponents reach to 99"),
    Wrong("a = 1 «m99.Mm99»", "beyond the range of numbers", "lower its exponents"),
    Wrong("a = 1 «T» = 4 nK", "where it is read as a unit, and then `=` came", "begin a new line before it"),
    Wrong(
        "a = 2 «m»(x)", "where it is read as a unit, and then `(` came", "write `*` before it for a product"
    ),
]

NUMBERS = [
    Wrong("a = «2x»", "a number ends before `x`", "write `2*x`"),
    Wrong("a = «1_000»", "the digits of a number are not grouped", "write `1000`"),
    Wrong("w = 1«,5» um", "a number has a decimal point", "write `1.5`"),
    Wrong("a = 1.2«.3»", "a second decimal point", "write one point"),
    Wrong("a = 1 «000»", "`000` came straight after `1`", "write `*` before `000`"),
    Wrong("a = «1e400»", "beyond the largest number", "write a smaller number"),
    Wrong("a = «1e300 Tm»", "beyond the largest number", "another prefix"),
    Wrong("a = «1e-400»", "below the least number", "write `0`"),
    Wrong("a = «1e5(2)»", "the uncertainty belongs to the digits, before the exponent", "write `1(2)e5`"),
    Wrong("a = 1.5«(0.2)»", "its uncertainty counts in its last digits", "write `1.50(5)`"),
    Wrong("a = 1.5 «±» 0.2", "an uncertainty stands in brackets after the digits", "write `1.50(5)`"),
    Wrong("a = «" + "1" * 1001 + "»", "a number of 1001 characters", "round it"),
    Wrong("a = 5 «%»", "a share is written as a number", "write `0.05` for 5 %"),
]

EXPRESSIONS = [
    Wrong(
        "a = x «y»\nb = 3",
        "`y` came straight after `x`; a sign or a new line was expected",
        "write `*` before `y`",
    ),
    Wrong("a = (b)«(»c)", "`(` came straight after `)`", "write `*` before `(`"),
    Wrong("a = 2 «(»b + 1)", "`(` came straight after `2`", "write `*` before `(`"),
    Wrong("a = sin «x»", "`x` came straight after `sin`", "write `sin(x)`"),
    Wrong("a = x «**» 2", "a power is written with `^`", "write `x^2`"),
    Wrong("a = «x²»", "`²` came in the name `x²`", "write `x^2`"),
    Wrong("a = x «×» y", "a product is written with `*`", "write `*`"),
    Wrong("a = «−»3", "only looks like a minus sign", "write `-`"),
    Wrong("a = «+»3", "`+` came where a value", "leave the `+` out"),
    Wrong("a = 1 + «*» 3", "`*` came where a value", "write the value after `+`"),
    Wrong(
        "a = 1 «+»\nb = 3",
        "the line ends with `+`, and a value was expected after it",
        "or take the sign out",
    ),
    Wrong("a = «|»x|", "an absolute value is a function", "write `abs(x)`"),
    Wrong("a = «[»1, 2]", "`[` came where a value", "a list stands only in a grid"),
    Wrong("a = b «{»1}", "`{` came where", "round brackets only"),
    Wrong("a = x «<» 3", "`<` came where a value was expected", "choose by `if(a < b, value, other)`"),
    Wrong("a = if(x«,» 1, 2)", "a condition was expected: two values", "write `if(a < b, value, other)`"),
    Wrong("a = if «x» < 2", "`x` came where `(` was expected", "write `if(condition, a, b)`"),
    Wrong("V(x) = 2 where 0 < x «<» 3", "`<` came after another comparison", "write `a < x and x < b`"),
    Wrong("V(x) = 2 where x «==» 3", "conditions know `<`, `<=`, `>`, `>=` only", "write `=` or `<=`"),
    Wrong("V(x) = 2 where x «!=» 3", "conditions know `<`, `<=`, `>`, `>=` only", "a < b or a > b"),
    Wrong("V(x) = 2 where x < 3 «&&» x > 1", "conditions are joined by `and`", "write `and`"),
    Wrong("V(x) = 2 where x «=<» 3", "the sign is `<=`", "write `<=`"),
    Wrong("«а» = 3", "cyrillic small letter a", "looks like it on your keyboard"),
    Wrong(
        "a = «" + "(" * 201 + "1" + ")" * 201 + "»",
        "more than 200 levels",
        "names of their own",
    ),
    Wrong("a = «" + "+".join("x" * 202) + "»", "more than 200 levels", "names of their own"),
]

ENTRIES = [
    Wrong("a «==» 3", "`=` gives a name its value", "write `=`"),
    Wrong("a «:=» 3", "a name and its value are joined by `=`", "write `name = value`"),
    Wrong("a = 3«;»", "a line needs no sign at its end", "a line of its own"),
    Wrong("a = b «=» c", "`=` came where an operator", "give one name one value"),
    Wrong('a = «"»x"', "only the path after `use` stands in quotes", "leave the quotes out"),
    Wrong("«//» a box", "a comment starts with `#`", "write `# comment`"),
    Wrong("«2» + 3", "`2` came where the next entry was expected", "begin a line with the name it defines"),
    Wrong("«a»", "the end of the text came where `=` or `(` was expected", "write `NAME = value`"),
    Wrong(
        "«def» f(x): return x", "`def` came, which is no word of Tarn", "write `NAME(arguments) = expression`"
    ),
    Wrong("«import» optics", "`import` came", 'write `use "path.tarn"` or `use NAME`'),
    Wrong("«let» x = 3", "`let` came", "write `NAME = value` alone"),
    Wrong("«print»(T_c)", "`print` came", "ask by `find QUANTITIES for GAS in PLACE`"),
    Wrong("«gass» sr { m = 3 u }", "`gass` came", "did you mean `gas`?"),
    Wrong(
        "«for» = 3",
        "`for` came where a name was expected, but it is a word of the language",
        "such as `for_1`",
    ),
    Wrong("«trap» = 3", "`trap` came where a name was expected", "such as `trap_1`"),
    Wrong("f«()» = 3", "a function has arguments", "leave `()` out"),
    Wrong("a = 3 «where x < 1»", "`where` came after `a = ...`", "if(condition, a, b)"),
    Wrong("use «optics.tarn»", "a path stands in double quotes", 'write `use "optics.tarn"`'),
    Wrong("use «'optics.tarn'»", "a path stands in double quotes", 'write `use "optics.tarn"`'),
]

BLOCKS = [
    Wrong("gas «{»\n m = 3 u\n}", "`{` came where a name was expected", "write `gas NAME { ... }`"),
    Wrong("gas sr\n «m» = 3 u\n}", "`m` came where `{` was expected", "write `gas sr { ... }`"),
    Wrong(
        "trap a «{»\n b = 1\nfind T_c for g",
        "the `{` of `trap a` is not closed where `find` came in line 3",
        "by `}`",
    ),
    Wrong(
        "gas a «{»\n m = 1 u\n", "the `{` of `gas a` is not closed where the end of the text came", "by `}`"
    ),
    Wrong("gas a { dispersion b «{» c = 1", "the `{` of `dispersion b` is not closed", "by `}`"),
    Wrong("a = 3 «}»", "`}` came, but no `{` is open", "take it out"),
    Wrong("a = 3«)»", "`)` came, but no `(` is open", "take it out"),
    Wrong("a = «(»1 + 2\nb = 3", "the `(` is not closed where `b` came in line 2", "close it by `)`"),
    Wrong("trap t {\n b = f«(»1, 2\n}", "the `(` is not closed where `}` came in line 3", "close it by `)`"),
    Wrong("V«(»x = 3", "the `(` is not closed where `=` came", "close it by `)`"),
    Wrong("find T for g over a = [1, 2«)»", "`)` came where `[` is open", "close by `]` first"),
    Wrong("trap a {\n «at» = 3\n}", "`at` came where a name was expected", "such as `at_1`"),
    Wrong(
        "trap t { «isotope Sr-84» }",
        "`isotope` came in a `trap` block; it belongs into `gas",
        "move this line",
    ),
    Wrong(
        "gas g { isotope «84Sr» }",
        "a nuclide was expected: symbol, `-`, mass number",
        "write `isotope Sr-84`",
    ),
    Wrong("gas g { isotope «Sr84» }", "a nuclide was expected", "write `isotope Sr-84`"),
    Wrong("gas g { isotope «strontium» }", "a nuclide was expected", "write `isotope Sr-84`"),
    Wrong(
        "gas g { dispersion d { a = 3«,» b = 2 } }", "`,` came where", "a line of its own, without a comma"
    ),
    Wrong(
        "states s { anchor «N» = 3 at T = 1 nK }",
        "`N` came in an anchor where `N_c` was expected",
        "write `anchor",
    ),
]

QUESTIONS = [
    Wrong(
        "fin«d»",
        "the end of the text came where a name was expected",
        "write `find QUANTITIES for GAS in PLACE`",
    ),
    Wrong("find T_c «in» bowl", "`find` does not say yet for which gas", "write `find ... for GAS`"),
    Wrong("find T_c «f_0» for g", "a comma or `for` was expected", "write `find T_c, f_0 for GAS`"),
    Wrong(
        "find T_c for g «inside» bowl",
        "`in`, `from`, `with`, `over` or a new line was expected",
        "by `with NAME",
    ),
    Wrong("find T_c for g with N «2e5»", "`2e5` came where `=` was expected after `N`", "write `N = value`"),
    Wrong("find T_c for g with N = 1 «with T = 3 nK»", "a second `with`", "with a comma between"),
    Wrong(
        "find T_c for g with N = 1 «in bowl»",
        "`in` came after `with`",
        "the order is `find ... for GAS in PLACE",
    ),
    Wrong("find T_c for g over P = «1 W» to 5 W", "a span of values was expected", "`even(a, b, points)`"),
    Wrong(
        "find T_c for g over P = «range»(1, 2, 3)", "a span of values was expected", "`even(a, b, points)`"
    ),
    Wrong("find T_c for g over P = «even(1, 2)»", "`even` takes 3 values", "write `even(a, b, points)`"),
    Wrong("find T_c for g over P = «[]»", "a grid needs at least one value", "`[a, b, ...]`"),
    Wrong("derive T_c for g «over N = [1]»", "which knows `in` and `with` only", "ask with `find`"),
    Wrong("derive T_c for g «from a»", "which knows `in` and `with` only", "ask with `find`"),
]

SIGNS = [
    Wrong("a =«\u00a0»3", "a blank came that is not a plain space", "write a space"),
    Wrong("a = «$»3", "a sign that Tarn does not know", "leave it out"),
]

# Texts that are refused before anything in them is read.
UNREADABLE = [
    Wrong("a = «\0»3", "the character U+0000 came", "plain text in UTF-8"),
    Wrong("a = «\ud800»", "the character U+D800 came", "plain text in UTF-8"),
    Wrong("«#»" + " " * 1_000_000, "a text of 1000001 characters came", 'join them by `use "path.tarn"`'),
    Wrong(
        "«f»ind" + " x" * 100_000, "a text of 100001 words and signs came", 'join them by `use "path.tarn"`'
    ),
]

WRONG = [*UNITS, *NUMBERS, *EXPRESSIONS, *ENTRIES, *BLOCKS, *QUESTIONS, *SIGNS, *UNREADABLE]
