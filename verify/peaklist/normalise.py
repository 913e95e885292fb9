"""One character in, one character out: typographic variants of reported text written in one plain way.

Every offset of the plain text is an offset of the text as typed, so that spans stay exact.
"""

from __future__ import annotations

import re

_DASHES = "\u2010\u2011\u2012\u2013\u2014\u2015\u2212\ufe63\uff0d\u00ad\u2500\u30fc"
_SPACES = "\u00a0\u1680\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f\u205f\u3000\u200b\ufeff\t\r\n\v\f"
_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹₀₁₂₃₄₅₆₇₈₉", "01234567890123456789")
_PLAIN = {
    **dict.fromkeys(_DASHES, "-"), **dict.fromkeys(_SPACES, " "), "×": "x", "✕": "x", "⨯": "x", "∙": "·", "•": "·",
    "（": "(", "）": ")", "，": ",", "；": ";", "：": ":", "＝": "=", "．": ".", "‚": ",", "′": "'", "’": "'", "‘": "'", "ʹ": "'",
    "″": '"', "“": '"', "”": '"', "∼": "~", "〜": "~", "≈": "~", "Н": "H", "С": "C", "с": "c", "М": "M", "м": "m", "Ｊ": "J",
    "𝐽": "J", "ϐ": "β", "∂": "δ", "𝛿": "δ", "ð": "δ", "б": "δ", "[": "(", "]": ")", "{": "(", "}": ")",
}  # fmt: skip
_TABLE = {ord(typed): plain for typed, plain in _PLAIN.items()} | _SUPERSCRIPTS

_TAG = re.compile(r"</?(?:sub|sup|i|b|em|strong|span|p|br)\b[^<>]{0,40}>", re.IGNORECASE)
_ENTITY = re.compile(r"&(?:nbsp|thinsp|ndash|mdash|minus|delta|times|prime|#\d{1,5});", re.IGNORECASE)
_ENTITY_WORDS = {"ndash": "-", "mdash": "-", "minus": "-", "delta": "δ", "times": "x", "prime": "'"}
_COMMAND = re.compile(r"\\(?:delta|mathrm|textit|mathit|textrm|text|rm|it|times|,|;|!|~)|\$|\\\(|\\\)")
_COMMAND_WORDS = {"\\delta": "δ", "\\times": "x"}
# Letters read for digits by character recognition, only where digits stand around them.
_LETTER_FOR_DIGIT = re.compile(r"(?<=\d[.,])([lIO|])(?=\d)|(?<=\d[.,]\d)([lIO|])(?=\s*[(,;])|(?<![A-Za-z\d.])([lI|])(?=[.,]\d\d)")
_DIGIT = {"l": "1", "I": "1", "|": "1", "O": "0"}


def _blank(found: re.Match[str]) -> str:
    return " " * len(found.group())


def _entity(found: re.Match[str]) -> str:
    word = found.group()[1:-1].lower()
    return _ENTITY_WORDS.get(word, " ").ljust(len(found.group()))


def _command(found: re.Match[str]) -> str:
    return _COMMAND_WORDS.get(found.group(), " ").ljust(len(found.group()))


def plain(text: str) -> str:
    """The text with dashes, spaces, primes, brackets, markup and misread digits in their plain form; same length."""
    found = text.translate(_TABLE)
    if "<" in found:
        found = _TAG.sub(_blank, found)
    if "&" in found:
        found = _ENTITY.sub(_entity, found)
    if "\\" in found or "$" in found:
        found = _COMMAND.sub(_command, found)
    return _LETTER_FOR_DIGIT.sub(lambda m: _DIGIT[m.group()], found)
