"""The fields of the selected object, or of the scenario, as text to be changed."""

from __future__ import annotations

from PySide6.QtCore import QEvent, Qt
from PySide6.QtGui import QKeyEvent, QKeySequence, QPalette
from PySide6.QtWidgets import QFormLayout, QLabel, QLineEdit, QScrollArea, QWidget

from tauline.resolve.relations import owner_of
from tauline.scenario.edit import Field, fields_of
from tauline.scenario.objects import Broken, kind_of
from tauline_app.actions.edits import change_field, change_parameter
from tauline_app.panels.text import plain
from tauline_app.session import Session

StandardKey = QKeySequence.StandardKey


class PropertiesPanel(QScrollArea):
    """A form with one line to a field; a change is made when the line is left."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session = session
        self._shown: tuple[str, tuple[str, ...]] | None = None
        self.heading = QLabel()
        self.lines: dict[str, FieldLine] = {}
        self.setWidgetResizable(True)
        self.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.setAccessibleName("Properties")
        session.selection_changed.connect(self.refresh)
        session.document_changed.connect(self.refresh)
        self.refresh()

    def refresh(self) -> None:
        """Show the fields of what is selected; lines that stay keep the cursor."""
        owner = owner_of(self._session.selection[-1]) if self._session.selection else ""
        thing = self._session.scenario.find(owner) if owner else None
        fields = fields_of(thing) if thing is not None else ()
        if thing is None:
            keys = tuple(f"parameters.{p.name}" for p in self._session.scenario.parameters)
        else:
            keys = tuple(field.key for field in fields)
        if (owner, keys) != self._shown:
            self._rebuild(owner, fields)
            self._shown = (owner, keys)
        self._fill(owner, fields)

    def _rebuild(self, owner: str, fields: tuple[Field, ...]) -> None:
        self.lines = {}
        page = QWidget()
        form = QFormLayout(page)
        form.setContentsMargins(8, 8, 8, 8)
        form.setVerticalSpacing(5)
        form.setFieldGrowthPolicy(QFormLayout.FieldGrowthPolicy.AllNonFixedFieldsGrow)
        form.setLabelAlignment(Qt.AlignmentFlag.AlignRight)
        self.heading = QLabel()
        self.heading.setWordWrap(True)
        self.heading.setTextFormat(Qt.TextFormat.RichText)
        form.addRow(self.heading)
        if owner:
            for field in fields:
                self._add(form, owner, field.key, _hint(field))
        else:
            for parameter in self._session.scenario.parameters:
                self._add(form, "", parameter.name, "a value such as 0.6 c")
        old = self.takeWidget()
        if old is not None:
            old.deleteLater()
        self.setWidget(page)

    def _head(self, owner: str) -> str:
        scenario = self._session.scenario
        thing = scenario.find(owner) if owner else None
        if thing is None:
            text = f"<b>{plain(scenario.title) or 'Untitled scenario'}</b>"
            if scenario.description:
                text += f"<br>{plain(scenario.description)}"
            text += "<br><br>Parameters" if scenario.parameters else ""
        else:
            text = f"<b>{plain(thing.label or thing.id)}</b>, {kind_of(thing)}"
            if isinstance(thing, Broken):
                faults = "<br>".join(plain(str(fault)) for fault in thing.faults)
                text += f"<br><br>It cannot be read as it stands; mend it in the file:<br>{faults}"
        return text

    def _add(self, form: QFormLayout, owner: str, key: str, hint: str) -> None:
        line = FieldLine(self._session, owner, key, hint)
        name = QLabel(key)
        name.setBuddy(line)
        form.addRow(name, line)
        form.addRow("", line.fault)
        self.lines[key] = line

    def _fill(self, owner: str, fields: tuple[Field, ...]) -> None:
        self.heading.setText(self._head(owner))
        faults: dict[str, str] = {}
        for diagnosis in self._session.resolved.faults:
            if diagnosis.object == owner:
                key = diagnosis.key if owner else diagnosis.key.partition(".")[2]
                hint = f" – {diagnosis.hint}" if diagnosis.hint else ""
                faults.setdefault(key, diagnosis.message + hint)
        if owner:
            values = {field.key: shown(field.value) for field in fields}
        else:
            values = {p.name: shown(p.value) for p in self._session.scenario.parameters}
        for key, line in self.lines.items():
            line.show_value(values.get(key, ""), faults.get(key, ""))


class FieldLine(QLineEdit):
    """One field; Enter or leaving it makes the change, Esc takes it back."""

    def __init__(self, session: Session, owner: str, key: str, hint: str) -> None:
        super().__init__()
        self._session = session
        self._owner = owner
        self._key = key
        self._value = ""
        self._document_fault = ""
        self.fault = QLabel()
        self.fault.setWordWrap(True)
        self.fault.setTextFormat(Qt.TextFormat.PlainText)
        self.fault.setVisible(False)
        self.setPlaceholderText(hint)
        self.setAccessibleName(f"{key} of {owner}" if owner else f"parameter {key}")
        self.editingFinished.connect(self.commit)

    def show_value(self, value: str, fault: str) -> None:
        """Show the document's value, unless something is being typed."""
        if value != self._value or not self.isModified():
            self.setText(value)
            self.setCursorPosition(0)
            self._value = value
        self._document_fault = fault
        self._show_fault(fault)

    def commit(self) -> None:
        """Make the change; where it cannot be made, say why and keep what was typed."""
        text = self.text().strip()
        if text == self._value:
            return
        if self._owner:
            fault = change_field(self._session, self._owner, self._key, text)
        else:
            fault = change_parameter(self._session, self._key, text)
        if fault:
            self._show_fault(fault)
        else:
            self.setModified(False)

    def event(self, event: QEvent) -> bool:
        """Leave undo and redo to the document while nothing is being typed."""
        if (
            event.type() == QEvent.Type.ShortcutOverride
            and isinstance(event, QKeyEvent)
            and self.text().strip() == self._value
            and any(event.matches(key) for key in (StandardKey.Undo, StandardKey.Redo))
        ):
            event.ignore()
            return False
        return super().event(event)

    def keyPressEvent(self, event: QKeyEvent) -> None:  # noqa: N802 - Qt's
        """Take back what was typed, by Esc."""
        if event.key() == Qt.Key.Key_Escape:
            self.setText(self._value)
            self.setModified(False)
            self._show_fault(self._document_fault)
        else:
            super().keyPressEvent(event)

    def _show_fault(self, fault: str) -> None:
        self.fault.setText(fault)
        self.fault.setVisible(bool(fault))
        palette = self.fault.palette()
        palette.setColor(
            QPalette.ColorRole.WindowText, self.palette().color(QPalette.ColorRole.BrightText)
        )
        self.fault.setPalette(palette)


def shown(value: object) -> str:
    """Write a field's value as it is typed."""
    if value is None:
        return ""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, float):
        return repr(int(value)) if value.is_integer() and abs(value) < 1e15 else repr(value)
    if isinstance(value, tuple):
        return ", ".join(map(str, value))
    return str(value)


def _hint(field: Field) -> str:
    if field.choices:
        return " | ".join(field.choices)
    if field.dimension is not None:
        return str(field.dimension)
    if field.refers_to:
        return "id of " + " or ".join(field.refers_to)
    return "" if field.required else "not given"
