"""`python -m certgen`: the command line."""

import sys

from certgen.cli import main

if __name__ == "__main__":
    sys.exit(main())
