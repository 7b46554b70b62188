"""What is owed on a date."""
