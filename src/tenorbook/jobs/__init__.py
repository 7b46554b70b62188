"""One job a verb of the command line, readable from top to bottom; nothing here prints or reads a clock."""
