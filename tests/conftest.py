"""What holds for every test."""

from __future__ import annotations

from hypothesis import settings

# A deadline would be an assertion about time, which depends on the machine. The rest stays as
# hypothesis chooses for the surroundings (on CI: no database, the same examples each time).
settings.register_profile("untimed", parent=settings.default, deadline=None)
settings.load_profile("untimed")
