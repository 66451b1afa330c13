"""`python -m calcgen`."""

from calcgen.cli import main

if __name__ == "__main__":
    main()
