"""`python -m logbook` is the same as the command `logbook`."""

import sys

from logbook.command_line.main import main

sys.exit(main())
