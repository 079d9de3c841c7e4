"""Text stands out from its ground in light and in dark."""

from __future__ import annotations

import pytest
from PySide6.QtGui import QGuiApplication, QPalette

from tauline.figure.style import Colour, contrast
from tauline_app.main import prepare_application
from tauline_app.theme import Scheme, apply_scheme

Role = QPalette.ColorRole
PAIRS = [
    (Role.WindowText, Role.Window),
    (Role.Text, Role.Base),
    (Role.Text, Role.AlternateBase),
    (Role.ButtonText, Role.Button),
    (Role.HighlightedText, Role.Highlight),
    (Role.ToolTipText, Role.ToolTipBase),
    (Role.PlaceholderText, Role.Base),
    (Role.BrightText, Role.Window),
    (Role.BrightText, Role.Base),
    (Role.Link, Role.Base),
]


def colour(role: Role) -> Colour:
    found = QGuiApplication.palette().color(role)
    return found.red(), found.green(), found.blue()


@pytest.mark.usefixtures("qapp")
@pytest.mark.parametrize("scheme", [Scheme.DARK, Scheme.LIGHT])
@pytest.mark.parametrize("pair", PAIRS, ids=lambda pair: f"{pair[0].name}-{pair[1].name}")
def test_text_stands_out(scheme: Scheme, pair: tuple[Role, Role]) -> None:
    prepare_application()
    apply_scheme(scheme)
    # WCAG 2.2, success criterion 1.4.3
    assert contrast(colour(pair[0]), colour(pair[1])) >= 4.5


@pytest.mark.usefixtures("qapp")
@pytest.mark.parametrize("scheme", [Scheme.DARK, Scheme.LIGHT])
def test_the_canvas_goes_with_the_window(scheme: Scheme) -> None:
    prepare_application()
    style = apply_scheme(scheme)
    assert style.ground == colour(Role.Base)
