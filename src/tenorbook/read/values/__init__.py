"""One cell to one value: amounts, rates, dates, lengths, counts, words. Nothing here knows a loan."""
