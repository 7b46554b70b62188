"""Flat tables to Parquet, where pyarrow is installed; amounts stay exact decimals."""

from collections.abc import Iterable, Iterator
from decimal import Decimal
from itertools import islice
from pathlib import Path
from typing import Any

from tenorbook.tables.stream import Field, Kind, Stream

_BATCH = 50_000
_RATE_DIGITS = 18
"""Digits after the point of decimals that are not amounts."""

RATES = ("annual_rate", "apr", "effective_annual_rate")


def parquet_available() -> bool:
    """Whether Parquet files can be written: pyarrow, an optional part, is installed."""
    from importlib.util import find_spec

    return find_spec("pyarrow") is not None


def write_parquet(path: Path, stream: Stream) -> None:
    """Writes a flat table.

    Args:
        path: the file to write.
        stream: the table; consumed.

    Raises:
        ImportError: pyarrow is not installed.
    """
    import pyarrow as pa
    import pyarrow.parquet as pq

    schema = pa.schema([(field.header, _type(pa, field, stream.digits)) for field in stream.fields])
    with pq.ParquetWriter(path, schema) as writer:
        for rows in _batches(stream.rows):
            columns = [
                pa.array(_exact(values, field, stream.digits), type=schema.field(index).type)
                for index, (field, values) in enumerate(
                    zip(stream.fields, zip(*rows, strict=True), strict=True)
                )
            ]
            writer.write_batch(pa.record_batch(columns, schema=schema))


def _batches(rows: Iterable[tuple[Any, ...]]) -> Iterator[list[tuple[Any, ...]]]:
    remaining = iter(rows)
    while batch := list(islice(remaining, _BATCH)):
        yield batch


def _type(pa: Any, field: Field, digits: int) -> Any:
    match field.kind:
        case Kind.TEXT:
            return pa.string()
        case Kind.INTEGER:
            return pa.int64()
        case Kind.DATE:
            return pa.date32()
        case _:
            return pa.decimal128(38, _places(field, digits))


def _places(field: Field, digits: int) -> int:
    return _RATE_DIGITS if field.header in RATES else digits


def _exact(values: tuple[Any, ...], field: Field, digits: int) -> list[Any]:
    """Decimals brought to the one scale of their column, which has room for all of them."""
    if field.kind is not Kind.DECIMAL:
        return list(values)
    unit = Decimal(1).scaleb(-_places(field, digits))
    return [None if value is None else value.quantize(unit) for value in values]
