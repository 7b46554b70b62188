"""`python -m tenorbook` is the command `tenorbook`."""

from tenorbook.cli.main import main

if __name__ == "__main__":
    main()
