"""Where things meet: light and worldlines, worldlines with one another."""

from tauline.meetings.crossings import Meeting, meetings
from tauline.meetings.light import (
    LightMeeting,
    emissions,
    receptions,
    why_no_emission,
    why_no_reception,
)

__all__ = [
    "LightMeeting",
    "Meeting",
    "emissions",
    "meetings",
    "receptions",
    "why_no_emission",
    "why_no_reception",
]
