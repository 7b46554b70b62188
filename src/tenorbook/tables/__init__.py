"""The plain tables between reports and writers: columns with a role, labelled values, sheets."""
