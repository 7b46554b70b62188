"""The effective annual rate: what the nominal rate comes to over a year of compounding."""

from decimal import Context, Decimal, localcontext

from tenorbook.basis.conventions import DayCount
from tenorbook.terms.terms import Terms

PLACES = Decimal(1).scaleb(-10)
_PRECISION = Context(prec=50)


def effective_annual_rate(terms: Terms) -> Decimal:
    """(1 + r/m)^m - 1, with m payments a year, as a fraction to 10 decimals (half even).

    On Actual/360 the rate counts as r x 365/360, since a year of 365 days bears that much. A loan
    paid at maturity compounds once a year at most: m is 1.

    Args:
        terms: of the loan; the rate is the one at funding.
    """
    with localcontext(_PRECISION):
        rate = terms.rate
        if terms.day_count is DayCount.ACTUAL_360:
            rate = rate * 365 / 360
        per_year = 1 if terms.one_payment else terms.frequency.per_year
        effective = (1 + rate / per_year) ** per_year - 1
        return effective.quantize(PLACES) + 0
