"""`python -m recheck` does what the command `recheck` does."""

import sys

from recheck.cli import main

sys.exit(main())
