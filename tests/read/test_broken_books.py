"""Every broken book of the folder gives exactly the messages beside it."""

from pathlib import Path

import pytest

from broken.make import BOOKS, main
from tenorbook.basis.problem import BookError
from tenorbook.read import read_book

FOLDER = Path(__file__).parent.parent / "broken"


def messages(path: Path) -> str:
    try:
        problems = read_book(path).problems
    except BookError as refused:
        problems = refused.problems
    return "".join(f"{problem}\n" for problem in problems)


@pytest.mark.parametrize("name", BOOKS)
def test_messages(name: str) -> None:
    assert messages(FOLDER / name) == (FOLDER / f"{name}.txt").read_text("utf-8")


def test_every_file_of_the_folder_is_tested() -> None:
    kept = {path.name for path in FOLDER.iterdir() if path.suffix in (".xlsx", ".ods", ".csv", ".txt")}
    assert kept == {*BOOKS, *(f"{name}.txt" for name in BOOKS)}


@pytest.fixture(scope="module")
def made_today(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("broken")
    main(folder)
    return folder


@pytest.mark.parametrize("name", sorted(BOOKS))
def test_the_script_makes_the_books_that_are_kept(name: str, made_today: Path) -> None:
    assert messages(made_today / name) == messages(FOLDER / name)


def test_file_refusals_name_the_file() -> None:
    with pytest.raises(BookError) as refused:
        read_book(FOLDER / "truncated.xlsx")
    assert [problem.place.value for problem in refused.value.problems] == ["truncated.xlsx"]
