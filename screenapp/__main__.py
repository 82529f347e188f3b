"""`python -m screenapp`: the same as the `screenapp` command."""

import sys

from screenapp.cli import main

if __name__ == "__main__":
    sys.exit(main())
