"""What `import tenorbook` offers, pinned; and that it costs nothing before it is used."""

import doctest
import subprocess
import sys
from datetime import date
from decimal import Decimal

import pytest

import tenorbook

LOAN = tenorbook.Loan(
    loan_id="N-1",
    principal=Decimal(1000),
    annual_rate=Decimal("0.06"),
    funding_date=date(2026, 1, 1),
    term=tenorbook.Length(3),
)


def test_the_public_names() -> None:
    assert tenorbook.__all__ == [
        "Book",
        "BookError",
        "ExtraPayment",
        "Length",
        "Loan",
        "Problem",
        "RateChange",
        "Schedule",
        "Settings",
        "TenorbookError",
        "TermsError",
        "build_schedule",
        "read_book",
    ]
    assert all(getattr(tenorbook, name).__doc__ for name in tenorbook.__all__)
    with pytest.raises(AttributeError, match="no attribute 'nothing'"):
        _ = tenorbook.nothing


def test_importing_it_imports_nothing_else() -> None:
    code = "import sys, tenorbook; print([name for name in sys.modules if name.startswith('tenorbook.')])"
    done = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, timeout=60, check=True
    )
    assert done.stdout == "[]\n"


def test_the_example() -> None:
    assert doctest.testmod(tenorbook).failed == 0


def test_a_frame() -> None:
    frame = tenorbook.build_schedule(LOAN).frame()
    assert list(frame.columns) == [
        "row", "kind", "date", "days", "annual_rate", "opening_balance", "interest", "principal",
        "extra_principal", "charges", "payment", "closing_balance", "due_date", "draw",
    ]  # fmt: skip
    amounts = frame.loc[:, "opening_balance":"closing_balance"]
    assert {str(dtype) for dtype in amounts.dtypes} == {"float64"}
    assert str(frame["date"].dtype).startswith("datetime64")
    assert list(frame["closing_balance"]) == [1000.0, 668.33, 335.0, 0.0]


def test_an_exact_frame() -> None:
    frame = tenorbook.build_schedule(LOAN).frame(exact=True)
    assert list(frame["closing_balance"]) == [
        Decimal(each) for each in ("1000.00", "668.33", "335.00", "0.00")
    ]
    assert frame["annual_rate"][1] == Decimal("0.06")


def test_terms_that_cannot_be_say_everything() -> None:
    with pytest.raises(tenorbook.TermsError) as refused:
        tenorbook.build_schedule(tenorbook.Loan(loan_id="N-2", principal=Decimal(0), annual_rate=Decimal(20)))
    problems = [problem.problem for problem in refused.value.problems]
    assert len(problems) == 3
    assert refused.value.remedy


def test_problems_of_the_terms_come_with_the_schedule() -> None:
    doubtful = tenorbook.build_schedule(
        tenorbook.Loan(
            loan_id="N-3",
            principal=Decimal(1000),
            annual_rate=Decimal("0.40"),
            funding_date=date(2026, 1, 1),
            term=tenorbook.Length(3),
        )
    )
    assert [problem.problem for problem in doubtful.problems] == ["an annual rate of 40 % is unusual"]
