"""`python -m pulseprop` is the command line."""

from pulseprop.cli import main

if __name__ == "__main__":
    main()
