"""Where things meet: light and worldlines, worldlines with one another."""

from tauline.meetings.crossings import Meeting, meetings
from tauline.meetings.light import (
    LightMeeting,
    emissions,
    receptions,
    why_no_emission,
    why_no_reception,
)
from tauline.meetings.reckoning import Reckoning, comoving, horizon, radar

__all__ = [
    "LightMeeting",
    "Meeting",
    "Reckoning",
    "comoving",
    "emissions",
    "horizon",
    "meetings",
    "radar",
    "receptions",
    "why_no_emission",
    "why_no_reception",
]
