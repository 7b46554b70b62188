"""The dated table of a loan: one row an event, every figure a formula on the cells it comes from."""

from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from itertools import groupby

from tenorbook.basis.conventions import RowKind
from tenorbook.basis.money import to_text
from tenorbook.reports.carried import Carried, carried_interest
from tenorbook.reports.force import Force
from tenorbook.reports.interest_formula import InterestFormulas
from tenorbook.reports.principal_formula import PrincipalFormulas
from tenorbook.reports.words import event_words
from tenorbook.schedule.ledger import Item, Schedule
from tenorbook.tables.table import Column, Role, Subtotal, Table, Tone

TABLE = "schedule"
"""Key of the table."""

FIRST_SERIAL = date(1900, 3, 1)
"""Spreadsheets count days reliably from here; earlier dates are text, and days plain numbers."""

_MONEY_WIDTH = 17.5

_NAMED = {"date": "dates", "principal": "principals", "extra": "extras", "draw": "draws"}
"""Columns that formulas beside the table speak of by name."""


@dataclass(frozen=True, slots=True)
class LoanTable:
    """The table, and what the rest of the sheet needs to know about it.

    Attributes:
        table: the table.
        force: rates and scheduled amounts, whose cells the table names.
        unexplained: rows whose principal follows no rule known here.
    """

    table: Table
    force: Force
    unexplained: tuple[int, ...]


def loan_table(schedule: Schedule) -> LoanTable:
    """The table of a schedule; columns that are empty for the loan are left out."""
    return _Maker(schedule).make()


class _Maker:
    """Puts one table together, column by column."""

    def __init__(self, schedule: Schedule) -> None:
        self.schedule = schedule
        self.force = Force(schedule)
        self.interest = InterestFormulas(schedule)
        self.carried: Carried | None = carried_interest(schedule, self.interest, self.force)
        self.principal = PrincipalFormulas(schedule, self.force, self.carried)
        self.draws = any(schedule.draw[1:])
        self.shown = schedule.terms.currency_digits

    def make(self) -> LoanTable:
        """The whole table."""
        schedule = self.schedule
        principal = self._principal_formulas()
        words = event_words(schedule, self.principal.beside.reduced)
        columns = [
            *self._what_and_when([word.text for word in words]),
            *self._balance_before(),
            *self._interest_columns(),
        ]
        columns.append(self._amount("principal", "Principal", schedule.principal, principal))
        if any(schedule.extra):
            formulas = {row: self.principal.extra(row) for row in range(len(schedule))}
            columns.append(self._amount("extra", "Extra principal", schedule.extra, formulas))
        if self.principal.beside.ahead:
            beside = self.principal.beside
            columns.append(self._running("ahead", "Paid ahead", beside.ahead, beside.ahead_formulas))
        if any(schedule.charges):
            columns.append(self._amount("charges", "Charges", schedule.charges, {}))
        columns += self._payment_and_balance([column.key for column in columns])
        table = Table(
            key=TABLE,
            columns=tuple(columns),
            tones=dict.fromkeys((row for row, word in enumerate(words) if word.marked), Tone.SPECIAL),
            subtotals=_years(schedule.date),
            total_label="Total",
            label_column="date",
            frozen=True,
            names=_names([column.key for column in columns]),
        )
        return LoanTable(table, self.force, tuple(self.principal.unexplained))

    def _what_and_when(self, words: list[str]) -> list[Column]:
        schedule = self.schedule
        live_days = schedule.date[0] >= FIRST_SERIAL
        names = self._rate_names()
        return [
            Column(key="number", header="No.", role=Role.INTEGER, values=_numbers(schedule), width=6.5),
            Column(key="date", header="Date", role=Role.DATE, values=schedule.date, width=13.5),
            Column(key="event", header="Event", role=Role.TEXT, values=words, width=25),
            Column(
                key="days",
                header="Days",
                role=Role.INTEGER,
                values=schedule.days,
                width=8,
                formula="[date]-[date<]" if live_days else None,
                exceptions={0: None},
            ),
            Column(
                key="rate",
                header="Annual rate",
                role=Role.RATE,
                values=schedule.annual_rate,
                width=11,
                formula=self.force.rates[0].name,
                exceptions=names,
            ),
        ]

    def _rate_names(self) -> dict[int, str | None]:
        """Rows that show a later rate -> the name of its cell.

        On the day of a change the payment still shows the rate of the days before it.
        """
        names: dict[int, str | None] = {}
        rates = self.schedule.annual_rate
        if len(self.force.rates) == 1 and rates.count(self.force.rates[0].rate) == len(rates):
            return names
        reached = 0
        for row, (kind, rate) in enumerate(zip(self.schedule.kind, self.schedule.annual_rate, strict=True)):
            candidates = self.force.rates[reached::-1]
            name = next((each.name for each in candidates if each.rate == rate), None)
            if name != self.force.rates[0].name:
                names[row] = name
            reached += kind is RowKind.RATE and reached + 1 < len(self.force.rates)
        return names

    def _balance_before(self) -> list[Column]:
        schedule = self.schedule
        columns = [
            self._column(
                "opening", "Opening balance", schedule.opening, "[closing<]", {0: None}, Role.BALANCE, False
            )
        ]
        if self.draws:
            columns.append(self._amount("draw", "Advanced", schedule.draw, {0: "loan_principal"}))
        return columns

    def _interest_columns(self) -> list[Column]:
        schedule = self.schedule
        if self.carried is None:
            formulas = self._interest_formulas()
            return [self._amount("interest", "Interest", schedule.interest, formulas)]
        carried, digits = self.carried, schedule.digits
        left = dict.fromkeys(range(1, len(schedule)), f"ROUND([carried<]+[accrued]-[interest],{digits})")
        return [
            self._amount("accrued", "Interest accrued", carried.accrued, carried.accrued_formulas),
            self._amount("interest", "Interest paid", schedule.interest, carried.interest_formulas),
            self._running("carried", "Interest unpaid", carried.left, left),
        ]

    def _interest_formulas(self) -> dict[int, str | None]:
        schedule = self.schedule
        formulas: dict[int, str | None] = dict(self.interest.of_regular_rows())
        extras = (row for row, kind in enumerate(schedule.kind) if kind is RowKind.EXTRA)
        for row in {*schedule.irregular, *schedule.paid_before, *extras}:
            formulas[row] = self._interest_formula(row)
        return formulas

    def _interest_formula(self, row: int) -> str | None:
        """Interest of a row that is not plain: less what was posted before, at most what was paid."""
        schedule = self.schedule
        text, amount = self.interest.of_items(row)
        earlier = dict.fromkeys(schedule.paid_before.get(row, ()))
        amount -= sum(schedule.interest[other] for other in earlier)
        if earlier:
            text = f"ROUND({text}{''.join(f'-[interest@{other}]' for other in earlier)},{schedule.digits})"
        posted = schedule.interest[row]
        if schedule.kind[row] is RowKind.EXTRA and 0 < posted < amount:
            return f"MIN({to_text(posted, schedule.digits)},{text})"
        if posted != amount:
            self.principal.unexplained.append(row)
            return f"ROUND({text or 0}+{to_text(posted - amount, schedule.digits)},{schedule.digits})"
        return text or None

    def _principal_formulas(self) -> dict[int, str | None]:
        schedule = self.schedule
        odd_rows = {
            row
            for row, parts in schedule.irregular.items()
            if any(part.item is Item.ODD_DAYS for part in parts)
        }
        formulas: dict[int, str | None] = dict(self.principal.of_plain_rows(odd_rows))
        for row in (row for row in range(len(schedule)) if row not in formulas):
            odd = self.interest.of_items(row, Item.ODD_DAYS) if row in odd_rows else ("", 0)
            formulas[row] = self.principal.principal(row, odd)
        return formulas

    def _payment_and_balance(self, keys: Sequence[str]) -> list[Column]:
        schedule, digits = self.schedule, self.schedule.digits
        paid = "+".join(f"[{key}]" for key in ("interest", "principal", "extra", "charges") if key in keys)
        repaid = "".join(f"-[{key}]" for key in ("principal", "extra") if key in keys)
        advanced = "+[draw]" if self.draws else ""
        first = f"ROUND([opening]{advanced}{repaid},{digits})" if self.draws else "loan_principal"
        payment = self._amount("payment", "Payment", schedule.payment, f"ROUND({paid},{digits})")
        closing = self._column(
            "closing",
            "Closing balance",
            schedule.closing,
            f"ROUND([opening]{advanced}{repaid},{digits})",
            {0: first},
            Role.BALANCE,
            False,
        )
        return [payment, closing]

    def _amount(
        self, key: str, header: str, values: Sequence[int], formulas: Mapping[int, str | None] | str
    ) -> Column:
        if isinstance(formulas, str):
            return self._column(key, header, values, formulas, {}, Role.AMOUNT, True)
        common = _commonest(formulas)
        rows = range(len(values))
        exceptions = {
            row: its for row, its in zip(rows, map(formulas.get, rows), strict=True) if its != common
        }
        return self._column(key, header, values, common, exceptions, Role.AMOUNT, True)

    def _running(
        self, key: str, header: str, values: Sequence[int], formulas: Mapping[int, str | None]
    ) -> Column:
        rows = {row: formulas.get(row) for row in range(len(values))}
        return self._column(key, header, values, None, rows, Role.AMOUNT, False)

    def _column(
        self,
        key: str,
        header: str,
        values: Sequence[int],
        formula: str | None,
        exceptions: dict[int, str | None],
        role: Role,
        totalled: bool,
    ) -> Column:
        return Column(
            key=key,
            header=header,
            role=role,
            values=values,
            width=_money_width(values, self.schedule.digits, self.shown),
            digits=self.schedule.digits,
            shown_digits=self.shown,
            formula=formula,
            exceptions=exceptions,
            totalled=totalled,
            last_in_subtotal=key == "closing",
        )


def _names(keys: Sequence[str]) -> dict[str, str]:
    """The names of the columns that formulas beside the table speak of."""
    return {name: f"[{key}:all]" for key, name in _NAMED.items() if key in keys}


def _commonest(formulas: Mapping[int, str | None]) -> str | None:
    """The formula that most rows have; it becomes the template of the column."""
    counts = Counter(formulas.values())
    del counts[None]
    return counts.most_common(1)[0][0] if counts else None


def _money_width(values: Sequence[int], digits: int, shown: int) -> float:
    """Wide enough for the sum of a column in bold: its digits, marks and some air."""
    largest = sum(map(abs, values)) if len(values) < 2 else max(max(values), -min(values), 1)
    whole = len(str(largest * len(values) // 10**digits)) if digits else len(str(largest * len(values)))
    return max(_MONEY_WIDTH, whole + whole // 3 + shown + 3.0)


def _numbers(schedule: Schedule) -> list[int | None]:
    """The number of each scheduled payment; nothing in other rows."""
    numbers: list[int | None] = []
    count = 0
    for kind in schedule.kind:
        count += kind is RowKind.PAYMENT
        numbers.append(count if kind is RowKind.PAYMENT else None)
    return numbers


def _years(dates: Sequence[date]) -> tuple[Subtotal, ...]:
    """A subtotal a calendar year; none where there is but one year."""
    runs = []
    for year, group in groupby(enumerate(dates), key=lambda pair: pair[1].year):
        rows = [row for row, _ in group]
        runs.append(Subtotal(rows[0], rows[-1], f"Total {year}"))
    return tuple(runs) if len(runs) > 1 else ()
