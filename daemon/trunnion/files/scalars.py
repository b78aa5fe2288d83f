"""Plain YAML scalars as values, by the core schema of YAML 1.2 (YAML 1.2.2, section 10.3.2).

Under the older rules `no` is false, `12:30` is 750 and `010` is eight: in a station file every one
of these is a trap. Here they are the text that they look like, or the decimal number.
"""

import re
from math import isfinite

_WORDS: dict[str, bool | None] = {
    **dict.fromkeys(("", "~", "null", "Null", "NULL"), None),
    **dict.fromkeys(("true", "True", "TRUE"), True),
    **dict.fromkeys(("false", "False", "FALSE"), False),
}
_WHOLE = re.compile(r"[-+]?[0-9]{1,18}")
_OCTAL_OR_HEX = re.compile(r"0o[0-7]{1,20}|0x[0-9a-fA-F]{1,15}")
_DECIMAL = re.compile(r"[-+]?(\.[0-9]+|[0-9]+(\.[0-9]*)?)([eE][-+]?[0-9]+)?")
_NOT_FINITE = re.compile(r"[-+]?\.(inf|Inf|INF)|\.(nan|NaN|NAN)")


def scalar_value(text: str) -> bool | int | float | str | None:
    """Return the value of an unquoted scalar; raises ValueError for a number that is not finite."""
    if text in _WORDS:
        return _WORDS[text]
    if _WHOLE.fullmatch(text):
        return int(text)
    if _OCTAL_OR_HEX.fullmatch(text):
        return int(text, 0)
    if _NOT_FINITE.fullmatch(text):
        raise ValueError(f"expected a finite number, got {text}")
    if _DECIMAL.fullmatch(text):
        return _finite(text)
    return text


def _finite(text: str) -> float:
    value = float(text)
    if not isfinite(value):
        raise ValueError(f"expected a finite number, got {text[:20]}")
    return value
