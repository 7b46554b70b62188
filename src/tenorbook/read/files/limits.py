"""How much of a file is read before it is refused. A book of 5,000 loans is far below each of these."""

MAX_FILE_BYTES = 256 * 2**20
"""Size of the file itself."""

MAX_UNPACKED_BYTES = 1024 * 2**20
"""Size of all parts of a workbook together, unpacked."""

MAX_SMALL_PART_BYTES = 64 * 2**20
"""Size of a part that is read in one piece (list of sheets, styles)."""

RATIO_FREE_BYTES = 32 * 2**20
"""Unpacked size below which the ratio of packed to unpacked does not matter."""

MAX_RATIO = 400
"""Unpacked size over packed size. Repetitive honest sheets reach about 100, built bombs 1,000."""

MAX_ENTRIES = 20_000
"""Parts in a workbook."""

MAX_STALL_BYTES = 16 * 2**20
"""Bytes of a sheet between the ends of two rows."""

MAX_CELLS = 2_000_000
"""Cells of one sheet that are not blank."""

MAX_STRINGS = 4_000_000
"""Entries in a workbook's table of texts."""

MAX_TEXT = 32_767
"""Characters kept of one text: the most that a spreadsheet cell holds."""

MAX_ROWS = 1_048_576
"""Rows of a sheet."""

MAX_COLUMNS = 16_384
"""Columns of a sheet."""
