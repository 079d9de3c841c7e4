"""``python -m tauline``."""

import sys

from tauline.cli import main

sys.exit(main())
