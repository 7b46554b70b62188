"""The sheet of one loan: formulas that follow the contract, words that say how."""

from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings

import strategies
from reports.samples import every_kind, extra, note, result_of
from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Repayment,
    UnpaidInterest,
)
from tenorbook.reports.loan_sheet import loan_sheet
from tenorbook.reports.loan_table import loan_table
from tenorbook.tables.sheet import Blocks, Lines, Sheet
from tenorbook.tables.table import Table, Tone
from tenorbook.terms.loan import Loan, RateChange


def table_of(loan: Loan) -> Table:
    schedule = result_of(loan).schedule
    assert schedule is not None
    made = loan_table(schedule)
    assert made.unexplained == ()
    return made.table


def formula(table: Table, key: str, row: int) -> str | None:
    column = table.column(key)
    return column.exceptions.get(row, column.formula)


def sheet_of(loan: Loan) -> Sheet:
    return loan_sheet(result_of(loan), "EQ-101", "Summary", "book.xlsx")


@pytest.mark.parametrize(
    ("terms", "key", "row", "expected"),
    [
        ({}, "interest", 1, "ROUND([opening]*[rate]*30/360,2)"),
        ({}, "principal", 1, "ROUND(level_payment-[interest],2)"),
        ({}, "payment", 1, "ROUND([interest]+[principal],2)"),
        ({}, "closing", 1, "ROUND([opening]-[principal],2)"),
        ({}, "closing", 0, "loan_principal"),
        ({}, "opening", 7, "[closing<]"),
        ({}, "days", 7, "[date]-[date<]"),
        ({}, "principal", 60, "[opening]"),
        ({"day_count": DayCount.ACTUAL_360}, "interest", 1, "ROUND([opening]*[rate]*[days]/360,2)"),
        ({"repayment": Repayment.LEVEL_PRINCIPAL}, "principal", 1, "level_payment"),
        ({"repayment": Repayment.INTEREST_ONLY}, "principal", 1, None),
        ({"currency": "JPY"}, "interest", 1, "ROUND([opening]*[rate]*30/360,0)"),
        ({"extra_each_payment": Decimal(1000)}, "extra", 2, "extra_each_payment"),
        ({"balloon": Decimal(5000)}, "principal", 60, "[opening]"),
    ],
)
def test_formulas_of_plain_rows(terms: dict[str, Any], key: str, row: int, expected: str | None) -> None:
    assert formula(table_of(note(**terms)), key, row) == expected


def test_interest_around_an_extra_payment_names_both_balances() -> None:
    """The whole period less the part before it, each on its own balance: 5 days, then 30 less 5."""
    table = table_of(note(extra_payments=(extra(date(2026, 5, 20), 15000),)))
    assert formula(table, "extra", 17) is None
    assert formula(table, "interest", 18) == "ROUND([closing@16]*[rate]*5/360+[opening]*[rate]*25/360,2)"


def test_interest_around_a_rate_change_names_both_rates() -> None:
    table = table_of(
        note(rate_changes=(RateChange(from_date=date(2025, 3, 20), annual_rate=Decimal("0.07")),))
    )
    assert formula(table, "rate", 3) == "annual_rate"
    assert formula(table, "rate", 4) == "annual_rate_2"
    assert formula(table, "interest", 4) == "ROUND([closing@2]*[rate@3]*5/360+[opening]*[rate]*25/360,2)"
    assert formula(table, "principal", 5) == "ROUND(level_payment_2-[interest],2)"


def test_odd_days_are_an_item_of_their_own() -> None:
    table = table_of(note(first_payment=date(2025, 3, 1), first_period=FirstPeriod.ADD_TO_FIRST))
    odd = "ROUND([opening]*[rate]*16/360,2)"
    assert formula(table, "interest", 1) == f"ROUND(ROUND([opening]*[rate]*30/360,2)+{odd},2)"
    assert formula(table, "principal", 1) == f"ROUND(level_payment+{odd}-[interest],2)"


def test_what_an_interest_first_payment_took_is_not_posted_again() -> None:
    payment = extra(date(2026, 5, 20), 100, applies_to=AppliesTo.INTEREST_FIRST)
    table = table_of(note(extra_payments=(payment,)))
    assert formula(table, "interest", 17) == "MIN(100.00,ROUND([opening]*[rate]*5/360,2))"
    assert str(formula(table, "interest", 18)).endswith("-[interest@17],2)")


def test_columns_beside_the_ordinary_ones_only_where_a_loan_needs_them() -> None:
    plain = [
        "number",
        "date",
        "event",
        "days",
        "rate",
        "opening",
        "interest",
        "principal",
        "payment",
        "closing",
    ]
    assert [column.key for column in table_of(note()).columns] == plain
    carried = table_of(note(payment=Decimal(1200), unpaid_interest=UnpaidInterest.CARRY))
    assert {"accrued", "carried"} <= {column.key for column in carried.columns}
    ahead = table_of(note(extra_payments=(extra(date(2026, 5, 20), 9000, effect=ExtraEffect.PAY_AHEAD),)))
    assert {"extra", "ahead"} <= {column.key for column in ahead.columns}


def test_special_rows_have_a_word_and_a_mark() -> None:
    table = table_of(note(extra_payments=(extra(date(2026, 5, 20), 15000),)))
    events = table.column("event").values
    assert (events[0], events[1], events[17]) == ("Funding", "Payment", "\u25c6 Extra payment")
    assert events[-1] == "\u25c6 Last payment"
    marked = {row for row, words in enumerate(events) if words.startswith("\u25c6")}
    assert marked == set(table.tones)
    assert set(table.tones.values()) == {Tone.SPECIAL}


def test_a_subtotal_a_year_covers_every_row() -> None:
    table = table_of(note())
    assert [run.label for run in table.subtotals] == [f"Total {year}" for year in range(2025, 2031)]
    rows = [row for run in table.subtotals for row in range(run.first, run.last + 1)]
    assert rows == list(range(len(table)))


def test_conventions_in_words() -> None:
    loan = note(first_payment=date(2025, 2, 27), day_count=DayCount.ACTUAL_360)
    (lines,) = [part for part in sheet_of(loan).parts if isinstance(part, Lines)]
    assert lines.texts == (
        "Level payments, interest first, monthly, in arrears. Interest on actual days over 360. "
        "A long first period of 43 days: interest accrued for all of them. "
        "Interest is rounded to the nearest 0.01, halves away from zero, each time it is posted; "
        "the last payment takes the rest. "
        "The payment is solved on the periods as they accrue and rounded to the nearest 0.01.",
    )


def test_names_that_formulas_use_stand_on_the_sheet() -> None:
    for loan in every_kind():
        sheet = sheet_of(loan)
        blocks = [block for part in sheet.parts if isinstance(part, Blocks) for block in part.blocks]
        names = [entry.name for block in blocks for entry in block.entries if entry.name]
        assert len(names) == len(set(names))
        (table,) = [part for part in sheet.parts if isinstance(part, Table)]
        for column in table.columns:
            for text in {column.formula, *column.exceptions.values()} - {None}:
                assert used_names(str(text)) <= set(names), loan.loan_id


def used_names(text: str) -> set[str]:
    words = "".join(char if char.isalnum() or char in "_[]" else " " for char in text).split()
    return {word for word in words if word.islower() and "[" not in word and "_" in word}


@settings(max_examples=60, deadline=None, derandomize=True, suppress_health_check=[HealthCheck.too_slow])
@given(strategies.loans())
def test_every_figure_of_any_loan_follows_a_rule(loan: Loan) -> None:
    result = result_of(replace(loan, loan_id="any"))
    if result.schedule is not None:
        assert loan_table(result.schedule).unexplained == ()
