"""The fast runs against plain division, and runs of periods against period-by-period walking."""

from decimal import Decimal
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from engine.profile import examples
from engine.support import built, columns, schedule_of
from strategies import loans
from tenorbook.basis.conventions import InterestRounding, PaymentRounding, RowKind
from tenorbook.basis.problem import TermsError
from tenorbook.basis.rounding import divide, round_fraction, round_payment
from tenorbook.schedule import plain
from tenorbook.schedule.kernel import level_payment_run, level_principal_run
from tenorbook.schedule.ledger import Part, Schedule
from tenorbook.terms.loan import Length, Loan

ROUNDINGS = list(InterestRounding)


def rounded(value: Fraction, rounding: InterestRounding) -> int:
    """The rounding rules in words: toward zero, away from it, or to the nearest."""
    size = abs(value)
    whole = size.numerator // size.denominator
    rest = size - whole
    carries = {
        InterestRounding.DOWN: False,
        InterestRounding.UP: rest > 0,
        InterestRounding.HALF_UP: rest >= Fraction(1, 2),
        InterestRounding.NONE: rest >= Fraction(1, 2),
        InterestRounding.HALF_EVEN: rest > Fraction(1, 2) or (rest == Fraction(1, 2) and whole % 2 == 1),
    }[rounding]
    return (whole + carries) * (-1 if value < 0 else 1)


@examples(300)
@given(
    st.integers(-(10**20), 10**20),
    st.one_of(st.integers(1, 20), st.integers(1, 10**12)),
    st.sampled_from(ROUNDINGS),
)
def test_division_rounds_as_said(numerator: int, denominator: int, rounding: InterestRounding) -> None:
    expected = rounded(Fraction(numerator, denominator), rounding)
    assert divide(numerator, denominator, rounding) == expected
    assert round_fraction(Fraction(numerator, denominator), rounding) == expected


@pytest.mark.parametrize(
    ("numerator", "expected"),
    # half up, half even, down, up, none (which rounds half up in its own smaller unit)
    [
        (5, [3, 2, 2, 3, 3]),
        (-5, [-3, -2, -2, -3, -3]),
        (7, [4, 4, 3, 4, 4]),
        (4, [2, 2, 2, 2, 2]),
        (0, [0] * 5),
    ],
)
def test_halves(numerator: int, expected: list[int]) -> None:
    assert [divide(numerator, 2, rounding) for rounding in ROUNDINGS] == expected


RUNS = st.tuples(
    st.integers(-(10**6), 10**16),
    st.integers(-(10**4), 10**15),
    st.lists(st.one_of(st.integers(0, 40), st.integers(-(10**9), 10**12)), min_size=1, max_size=12),
    st.one_of(st.integers(1, 9), st.integers(1, 10**13)),
    st.sampled_from(ROUNDINGS),
)
"""Balance, payment, factors over a denominator, the denominator, and a rounding."""


@examples(300)
@given(RUNS)
def test_level_payment_run(run: tuple[int, int, list[int], int, InterestRounding]) -> None:
    balance, payment, numerators, denominator, rounding = run
    found = level_payment_run(
        balance, payment, [denominator + number for number in numerators], denominator, rounding
    )
    for row, numerator in enumerate(numerators):
        interest = rounded(Fraction(balance * numerator, denominator), rounding)
        assert found.opening[row] == balance
        assert found.interest[row] == interest
        assert found.principal[row] == payment - interest
        assert found.payment[row] == payment
        balance += interest - payment
        assert found.closing[row] == balance
    assert {len(column) for column in found} == {len(numerators)}


@examples(300)
@given(RUNS)
def test_level_principal_run(run: tuple[int, int, list[int], int, InterestRounding]) -> None:
    balance, principal, numerators, denominator, rounding = run
    found = level_principal_run(
        balance, principal, [denominator + number for number in numerators], denominator, rounding
    )
    for row, numerator in enumerate(numerators):
        interest = rounded(Fraction(balance * numerator, denominator), rounding)
        assert found.opening[row] == balance
        assert found.interest[row] == interest
        assert found.principal[row] == principal
        assert found.payment[row] == principal + interest
        balance -= principal
        assert found.closing[row] == balance


@pytest.mark.parametrize("rounding", ROUNDINGS)
@pytest.mark.parametrize("half", [1, 3, 5, 101])
def test_a_run_meets_exact_halves(rounding: InterestRounding, half: int) -> None:
    # a balance of `half` at one half a period: interest ends in .5 before it is rounded
    run = level_payment_run(half, 0, [3], 2, rounding)
    assert run.interest == [rounded(Fraction(half, 2), rounding)]


def test_a_run_can_be_cut() -> None:
    run = level_payment_run(1000, 100, [11, 11, 11], 10, InterestRounding.HALF_UP)
    assert run.first(1) == ([100], [0], [100], [1000], [1000])


def attempt(loan: Loan) -> Schedule | str:
    """The schedule, or why there is none."""
    try:
        return schedule_of(loan)
    except TermsError as refusal:
        return str(refusal)


def bearing_parts(schedule: Schedule) -> list[list[Part]]:
    """The stretches behind each row; at a rate of zero a run has stretches where walking has none."""
    return [[part for part in schedule.parts(row) if part.factor] for row in range(len(schedule))]


@examples(200)
@given(loans())
def test_runs_equal_period_by_period_walking(loan: Loan) -> None:
    fast = attempt(loan)
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(plain, "_SHORTEST_RUN", 10**9)
        slow = attempt(loan)
    if isinstance(fast, str) or isinstance(slow, str):
        assert fast == slow
        return
    assert columns(fast) == columns(slow)
    assert bearing_parts(fast) == bearing_parts(slow)
    assert fast.problems == slow.problems
    assert fast.carried == slow.carried
    assert fast.instalments == slow.instalments


def test_runs_are_really_taken(monkeypatch: pytest.MonkeyPatch) -> None:
    taken: list[int] = []
    usable = plain._usable

    def watched(*args: object) -> int:
        taken.append(usable(*args))  # type: ignore[arg-type]  # passed on as they come
        return taken[-1]

    monkeypatch.setattr(plain, "_usable", watched)
    schedule = built(term=Length(60))
    assert len([kind for kind in schedule.kind if kind is RowKind.PAYMENT]) == 60
    assert sum(taken) == 59  # all but the last


@pytest.mark.parametrize(
    ("amount", "rounding", "step", "expected"),
    [
        ("100.4", PaymentRounding.NEAREST, 1, 100),
        ("100.5", PaymentRounding.NEAREST, 1, 101),
        ("100.1", PaymentRounding.UP, 1, 101),
        ("100.9", PaymentRounding.DOWN, 1, 100),
        ("101", PaymentRounding.UP, 100, 200),
        ("199", PaymentRounding.DOWN, 100, 100),
        ("150", PaymentRounding.NEAREST, 100, 200),
        # noise past 30 digits is not a payment of more than 100
        ("100.00000000000000000000000000000000000001", PaymentRounding.UP, 1, 100),
        ("99.99999999999999999999999999999999999999", PaymentRounding.DOWN, 1, 100),
    ],
)
def test_payment_rounding(amount: str, rounding: PaymentRounding, step: int, expected: int) -> None:
    assert round_payment(Decimal(amount), rounding, step) == expected
