"""QuantLib, imported past the deprecation warnings that its generated bindings raise on newer Pythons.

Warnings are errors in this test run, and these are not ours.
"""

import warnings

with warnings.catch_warnings():
    warnings.simplefilter("ignore", DeprecationWarning)
    import QuantLib

__all__ = ["QuantLib"]
