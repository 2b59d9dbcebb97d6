"""python -m igu."""

import sys

from igu.terminal.main import main

if __name__ == "__main__":
    sys.exit(main())
