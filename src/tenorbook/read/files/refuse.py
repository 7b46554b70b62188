"""The one way a whole file is refused: one clear line, with the file's name as the place's value."""

from tenorbook.basis.problem import BookError, Place, error


def refusal(name: str, problem: str, remedy: str) -> BookError:
    """A `BookError` with one problem; the sentence begins with the file's name."""
    return BookError(error("", Place(value=name), f"{name} {problem}", remedy))


def damaged(name: str) -> BookError:
    """A file that claims to be a workbook and cannot be read as one."""
    return refusal(
        name,
        "is damaged or incomplete",
        "open it in a spreadsheet program, save it again as .xlsx and use the new file",
    )


def too_large(name: str, what: str) -> BookError:
    """A file that would take unbounded time or memory."""
    return refusal(name, what, "remove what does not belong to the loans, and save it again")
