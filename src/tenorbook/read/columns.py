"""Which parser reads which column, and which attribute of the terms it fills. Names only, no logic."""

from collections.abc import Mapping
from dataclasses import dataclass

from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    MonthEnd,
    PaymentBasis,
    Repayment,
    Side,
    Timing,
    UnpaidInterest,
)
from tenorbook.read.values.dates import day
from tenorbook.read.values.lengths import length
from tenorbook.read.values.numbers import at_least_zero, count, more_than_zero
from tenorbook.read.values.reading import Parser
from tenorbook.read.values.until import until
from tenorbook.read.values.words import currency, free_text, payment_change, payment_step, word

LOAN_ID = "Loan ID"
RATE = "Annual rate"
"""Read for a whole column at once; see `values.rates`."""


@dataclass(frozen=True, slots=True)
class Field:
    """An attribute of the terms and the parser of its cells."""

    attribute: str
    parse: Parser


LOANS: Mapping[str, Field] = {
    "Counterparty": Field("counterparty", free_text),
    "Description": Field("description", free_text),
    "Side": Field("side", word(Side, "Side")),
    "Currency": Field("currency", currency),
    "Principal": Field("principal", more_than_zero("enter the amount advanced as a positive number")),
    "Funding date": Field("funding_date", day),
    "First payment": Field("first_payment", day),
    "Term": Field("term", length),
    "Maturity": Field("maturity", day),
    "Frequency": Field("frequency", word(Frequency, "Frequency")),
    "Timing": Field("timing", word(Timing, "Timing")),
    "Repayment": Field("repayment", word(Repayment, "Repayment")),
    "Payment": Field("payment", more_than_zero("enter the payment, or leave it blank to have it solved")),
    "Balloon": Field("balloon", at_least_zero),
    "Amortized over": Field("amortized_over", length),
    "Interest-only payments": Field("interest_only_payments", count),
    "Day count": Field("day_count", word(DayCount, "Day count")),
    "Odd-day count": Field("odd_day_count", word(DayCount, "Day count")),
    "First period": Field("first_period", word(FirstPeriod, "First period")),
    "Long first period": Field("long_first_period", word(LongFirst, "Long first period")),
    "Payment basis": Field("payment_basis", word(PaymentBasis, "Payment basis")),
    "Payment rounding": Field("payment_rounding", payment_step),
    "Interest rounding": Field("interest_rounding", word(InterestRounding, "Interest rounding")),
    "Month-end": Field("month_end", word(MonthEnd, "Month-end")),
    "Unpaid interest": Field("unpaid_interest", word(UnpaidInterest, "Unpaid interest")),
    "Extra each payment": Field("extra_each_payment", at_least_zero),
    "Extra from": Field("extra_from", day),
    "Extra until": Field("extra_until", day),
}
"""Header of `Loans` -> field of `terms.Loan`, but for the Loan ID and the rate."""

EXTRA_PAYMENTS: Mapping[str, Field] = {
    "Date": Field("date", day),
    "Amount": Field("amount", more_than_zero("enter the amount paid as a positive number")),
    "Every": Field("every", word(Frequency, "Frequency")),
    "Until": Field("until", until),
    "Effect": Field("effect", word(ExtraEffect, "Effect")),
    "Applies to": Field("applies_to", word(AppliesTo, "Applies to")),
    "Note": Field("note", free_text),
}

RATE_CHANGES: Mapping[str, Field] = {
    "From": Field("from_date", day),
    "Payment": Field("payment", payment_change),
}

REQUIRED: Mapping[str, tuple[tuple[str, ...], ...]] = {
    "Loans": ((LOAN_ID,), ("Principal",), (RATE,), ("Funding date", "First payment")),
    "Extra payments": ((LOAN_ID,), ("Date",), ("Amount",)),
    "Rate changes": ((LOAN_ID,), ("From",), (RATE,)),
    "Payment changes": ((LOAN_ID,),),
    "Draws": ((LOAN_ID,),),
    "Fees": ((LOAN_ID,),),
}
"""Columns a sheet must have; of those named together, one."""
