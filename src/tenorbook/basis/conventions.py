"""Every convention a loan can name, each a documented enum member.

The value of a member is the canonical word of the loan book. Other spellings live in data, next to
the reader; nothing here is parsed leniently.
"""

from enum import StrEnum

from tenorbook.basis.documented import Doc, Documented

ISDA = "ISDA 2006 Definitions, section 4.16"


class DayCount(Documented):
    """How a span of days becomes a fraction of a year. The first day counts, the last does not."""

    THIRTY_360 = (
        "30/360",
        Doc(
            rule="A year of twelve 30-day months: a regular period between two unrolled due dates is "
            "exactly its number of months x 30/360, whatever the day of the month; anything else is "
            "counted by dates as in `30/360 by dates`.",
            numerator="30 days a month of the period",
            denominator="360",
            also=("twelve 30-day months",),
            source="common practice; by dates: " + ISDA + "(f)",
            example="31 Jan to 28 Feb, a regular month: 30/360. 10 Jan to 15 Feb: 35/360.",
        ),
    )
    THIRTY_360_BY_DATES = (
        "30/360 by dates",
        Doc(
            rule="Day 31 at the start becomes 30; day 31 at the end becomes 30 if the start is then "
            "on the 30th; no rule for February.",
            numerator="360 x years + 30 x months + days between the adjusted dates",
            denominator="360",
            also=("bond basis", "360/360"),
            source=ISDA + "(f)",
            example="31 Jan to 28 Feb 2023: 28/360. 28 Feb to 31 Mar 2023: 33/360.",
        ),
    )
    THIRTY_360_US_EOM = (
        "30/360 US EOM",
        Doc(
            rule="As `30/360 by dates`, and before it: when both dates are the last day of February "
            "the end becomes 30; when the start is the last day of February it becomes 30.",
            numerator="360 x years + 30 x months + days between the adjusted dates",
            denominator="360",
            also=("30U/360",),
            source="common practice of US bond markets; FIX tag 1950",
            example="28 Feb to 31 Mar 2023: 30/360. 31 Jan to 28 Feb 2023: 28/360.",
        ),
    )
    THIRTY_E_360 = (
        "30E/360",
        Doc(
            rule="Day 31 becomes 30 at either end; no rule for February.",
            numerator="360 x years + 30 x months + days between the adjusted dates",
            denominator="360",
            also=("Eurobond basis",),
            source=ISDA + "(g)",
            example="29 May to 31 Aug 2023: 91/360.",
        ),
    )
    THIRTY_E_360_ISDA = (
        "30E/360 ISDA",
        Doc(
            rule="The last day of a month becomes 30 at either end, except that a maturity date on "
            "the last day of February stays as it is.",
            numerator="360 x years + 30 x months + days between the adjusted dates",
            denominator="360",
            source=ISDA + "(h)",
            example="31 Jan to 28 Feb 2023: 30/360, or 28/360 if the loan matures that day.",
        ),
    )
    ACTUAL_360 = (
        "Actual/360",
        Doc(
            rule="Every calendar day is a 360th of a year.",
            numerator="actual days",
            denominator="360",
            also=("365/360 interest", "money market basis"),
            source=ISDA + "(e)",
            example="15 Jan to 15 Feb: 31/360.",
        ),
    )
    ACTUAL_365_FIXED = (
        "Actual/365 Fixed",
        Doc(
            rule="Every calendar day is a 365th of a year, leap years included.",
            numerator="actual days",
            denominator="365",
            source=ISDA + "(d)",
            example="15 Jan to 15 Feb: 31/365.",
        ),
    )
    ACTUAL_365_25 = (
        "Actual/365.25",
        Doc(
            rule="Every calendar day is one part in 365.25 of a year.",
            numerator="actual days",
            denominator="365.25",
            example="15 Jan to 15 Feb: 31/365.25 = 124/1461.",
        ),
    )
    ACTUAL_365_LEAP = (
        "Actual/365 Leap",
        Doc(
            rule="The year has 366 days if the period's end date falls in a leap year (payments not "
            "yearly) or the period holds a 29 February after its first day and up to its end "
            "(payments yearly); else 365.",
            numerator="actual days",
            denominator="365 or 366",
            also=("Actual/365L",),
            source=ISDA + "(i)",
            example="15 Dec 2023 to 15 Jan 2024, monthly: 31/366.",
        ),
    )
    ACTUAL_ACTUAL_ISDA = (
        "Actual/Actual ISDA",
        Doc(
            rule="Days in leap years over 366 plus days in other years over 365.",
            numerator="actual days, by kind of year",
            denominator="365 and 366",
            source=ISDA + "(b)",
            example="28 Dec 2011 to 28 Feb 2012: 4/365 + 58/366.",
        ),
    )
    ACTUAL_ACTUAL_ICMA = (
        "Actual/Actual ICMA",
        Doc(
            rule="Days over the days of the regular period times the periods a year; an odd period "
            "is split into notional regular periods, each counted by itself.",
            numerator="actual days",
            denominator="days in the regular period x periods a year",
            source="ICMA Rule 251; " + ISDA + "(c)",
            example="A regular quarter: 1/4. 10 days into a 31-day monthly period: 10/(31 x 12).",
        ),
    )
    NL_365 = (
        "NL/365",
        Doc(
            rule="Actual days, leaving out every 29 February after the start and up to the end.",
            numerator="actual days less the 29 Februaries",
            denominator="365",
            also=("no-leap",),
            example="15 Feb to 15 Mar 2024: 28/365.",
        ),
    )
    EQUAL_PERIODS = (
        "Equal periods",
        Doc(
            rule="Every regular period is exactly one over the periods a year, whatever its days; odd "
            "days by the odd-day count (Actual/365 Fixed unless the loan names one).",
            numerator="1",
            denominator="periods a year",
            example="Every 2 weeks: 1/26 a period.",
        ),
    )


class Frequency(Documented):
    """How often a payment falls due."""

    WEEKLY = "weekly", Doc("Every 7 days from the first payment.")
    EVERY_2_WEEKS = "every 2 weeks", Doc("Every 14 days from the first payment.", also=("biweekly",))
    EVERY_4_WEEKS = "every 4 weeks", Doc("Every 28 days from the first payment.")
    TWICE_A_MONTH = (
        "twice a month",
        Doc(
            "On a day and the day 15 later or earlier, every month.",
            also=("semi-monthly",),
            example="First payment on the 5th: 5th and 20th. On the 20th: 5th and 20th.",
        ),
    )
    MONTHLY = "monthly", Doc("Every month from the first payment.")
    EVERY_2_MONTHS = "every 2 months", Doc("Every 2 months from the first payment.")
    QUARTERLY = "quarterly", Doc("Every 3 months from the first payment.")
    EVERY_4_MONTHS = "every 4 months", Doc("Every 4 months from the first payment.")
    TWICE_A_YEAR = "twice a year", Doc("Every 6 months from the first payment.", also=("half-yearly",))
    YEARLY = "yearly", Doc("Every 12 months from the first payment.", also=("annual",))
    AT_MATURITY = "at maturity", Doc("Once, on the maturity date.", also=("bullet",))

    @property
    def per_year(self) -> int:
        """Periods a year: 52, 26, 13, 24, 12, 6, 4, 3, 2, 1; at maturity counts as 1."""
        return _PER_YEAR[self]

    @property
    def months(self) -> int:
        """Months a period; 0 when a period is not a whole number of months."""
        return _MONTHS.get(self, 0)

    @property
    def days(self) -> int:
        """Days a period; 0 when a period is made of months."""
        return _DAYS.get(self, 0)


_DAYS = {Frequency.WEEKLY: 7, Frequency.EVERY_2_WEEKS: 14, Frequency.EVERY_4_WEEKS: 28}
_MONTHS = {
    Frequency.MONTHLY: 1,
    Frequency.EVERY_2_MONTHS: 2,
    Frequency.QUARTERLY: 3,
    Frequency.EVERY_4_MONTHS: 4,
    Frequency.TWICE_A_YEAR: 6,
    Frequency.YEARLY: 12,
}
_PER_YEAR = {
    Frequency.WEEKLY: 52,
    Frequency.EVERY_2_WEEKS: 26,
    Frequency.EVERY_4_WEEKS: 13,
    Frequency.TWICE_A_MONTH: 24,
    Frequency.AT_MATURITY: 1,
    **{frequency: 12 // months for frequency, months in _MONTHS.items()},
}


class Side(Documented):
    """Which side of the paper the book's owner is on."""

    PAYABLE = "payable", Doc("We owe.")
    RECEIVABLE = "receivable", Doc("We are owed.")


class Timing(Documented):
    """When in its period a payment falls."""

    ARREARS = "arrears", Doc("At the end of each period.", also=("ordinary annuity",))
    ADVANCE = "advance", Doc("At the start of each period, from the funding date.", also=("annuity due",))


class Repayment(Documented):
    """The shape of repayment."""

    LEVEL_PAYMENT = (
        "level payment",
        Doc(
            "Every payment is the same; interest first, the rest is principal. With a payment given, "
            "the note's amount is followed instead of solved.",
            also=("annuity", "blended payment"),
        ),
    )
    LEVEL_PRINCIPAL = (
        "level principal",
        Doc("Every payment brings the same principal, and interest on top.", also=("straight-line",)),
    )
    INTEREST_ONLY = "interest only", Doc("Interest each period, all principal at the end.")
    AT_MATURITY = (
        "at maturity",
        Doc("Principal and all interest in one payment on the maturity date.", also=("bullet",)),
    )


class FirstPeriod(Documented):
    """What becomes of the interest for the odd days of a first period that is not regular."""

    ACCRUE = (
        "accrue",
        Doc(
            "Interest runs for the actual first period, and the level payment is sized on it, so that "
            "every payment is the same."
        ),
    )
    ADD_TO_FIRST = (
        "add to first payment",
        Doc(
            "The payment is sized as if the first period were regular; the odd-day interest is paid "
            "on top with the first payment (a short first period lowers it)."
        ),
    )
    PAY_AT_FUNDING = (
        "pay at funding",
        Doc("The odd-day interest is paid on the funding date; then the schedule is regular."),
    )
    CAPITALIZE = (
        "capitalize",
        Doc("The odd-day interest is added to principal one regular period before the first payment."),
    )
    WAIVE = "waive", Doc("The odd-day interest is not charged.")


class LongFirst(Documented):
    """How interest runs in a first period longer than a regular one."""

    SIMPLE = "simple", Doc("On the principal alone, for the whole periods and the odd days.")
    COMPOUND = (
        "compound",
        Doc(
            "Whole periods compound, odd days are simple: (1+i)^k (1+odd) - 1.",
            source="common practice; the law of this program, section 4",
        ),
    )


class PaymentBasis(Documented):
    """The period fractions on which a level payment is sized."""

    AS_ACCRUED = "as accrued", Doc("The accrual factors of the dated schedule.")
    EQUAL_PERIODS = (
        "equal periods",
        Doc(
            "One over the periods a year for every period, though interest accrues by the day count; "
            "the last payment takes the difference. Usual in Actual/360 commercial notes."
        ),
    )


class PaymentRounding(Documented):
    """Which way a solved payment is rounded to its step."""

    NEAREST = "nearest", Doc("To the nearest step, half up.")
    UP = "up", Doc("Up to the next step.")
    DOWN = "down", Doc("Down to the step below.")


class InterestRounding(Documented):
    """How interest is rounded when it is posted."""

    HALF_UP = "half up", Doc("To the nearest minor unit, half away from zero.")
    HALF_EVEN = "half even", Doc("To the nearest minor unit, half to the even one.")
    DOWN = "down", Doc("Toward zero.")
    UP = "up", Doc("Away from zero.")
    NONE = "none", Doc("Carried to a millionth of a minor unit.")


class MonthEnd(Documented):
    """Whether due dates stick to the end of the month."""

    AUTO = "auto", Doc("Month-ends when the first payment falls on the last day of its month.")
    YES = "yes", Doc("Every due date is the last day of its month.")
    NO = "no", Doc("The first payment's day number, where the month has it.")


class UnpaidInterest(Documented):
    """What becomes of interest that a payment does not cover."""

    ADD = "add to balance", Doc("Added to principal; bears interest.", also=("negative amortization",))
    CARRY = "carry", Doc("Kept apart without interest until paid.", also=("United States Rule",))


class ExtraEffect(Documented):
    """What an extra payment changes in the payments after it."""

    SHORTEN = "shorten term", Doc("Nothing: the payment stays, and the loan (to its balloon) ends sooner.")
    LOWER = (
        "lower payment",
        Doc("The payment is re-amortized over the remaining due dates.", also=("recast",)),
    )
    PAY_AHEAD = (
        "pay ahead",
        Doc(
            "Principal falls at once, and the principal of the next instalments is reduced until the "
            "amount is used up; interest goes on being paid."
        ),
    )


class AppliesTo(Documented):
    """What an extra payment pays first."""

    PRINCIPAL = "principal", Doc("Principal, all of it.")
    INTEREST_FIRST = "interest first", Doc("Interest accrued to its date, then principal.", source="US Rule")


class PaymentChange(Documented):
    """What a rate change does to the payment."""

    REAMORTIZE = (
        "re-amortize",
        Doc("Sized anew from the first due date whose whole period runs at the new rate."),
    )
    KEEP = "keep", Doc("Unchanged; the last payment takes the difference.")


class RowKind(StrEnum):
    """What a row of a schedule is, as written in `schedules.csv`."""

    FUNDING = "funding"
    """The loan is advanced: row 0."""
    PAYMENT = "payment"
    """A scheduled due date."""
    EXTRA = "extra"
    """An extra payment between due dates."""
    DRAW = "draw"
    """Money advanced later."""
    RATE = "rate"
    """The rate changes; no money moves."""
    SKIP = "skip"
    """A due date without a payment."""
    BALLOON = "balloon"
    """What is left, one period after the last payment in advance."""
    CAPITALIZE = "capitalize"
    """Interest is added to principal."""
    CHARGE = "charge"
    """A fee or charge."""
