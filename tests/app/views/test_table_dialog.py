from __future__ import annotations

import pytest
from PySide6.QtCore import Qt, QTimer
from PySide6.QtWidgets import QApplication, QRadioButton

from app.state.stated import UNITS, Stated
from app.views import dialogs
from app.views.table_dialog import RATE, UNIT, TableDialog
from core import TableIncomplete
from tests.app.drawing.readback import drawn_on, words


@pytest.fixture
def ask(qtbot, light):
    def make(*missing, name="ward-3.csv") -> TableDialog:
        made = TableDialog(None, name, missing)
        qtbot.addWidget(made)
        made.show()
        qtbot.waitExposed(made)
        return made

    return make


def unit_button(dialog, unit) -> QRadioButton:
    (found,) = (one for one in dialog.units.buttons() if one.text() == unit)
    return found


def test_it_says_which_file_and_asks_for_what_is_missing_alone(ask):
    for missing in (("unit",), ("rate",), ("unit", "rate")):
        said = words(drawn_on(ask(*missing)))
        assert "ward-3.csv" in said
        assert (UNIT in said) == ("unit" in missing)
        assert (RATE in said) == ("rate" in missing)
        assert ("100 to 8000" in said) == ("rate" in missing)


def test_nothing_is_chosen_to_begin_with(ask):
    dialog = ask("unit", "rate")
    assert [one.text() for one in dialog.units.buttons()] == list(UNITS)
    assert dialog.stated() == Stated(None, None)
    assert not dialog.read.isEnabled()


@pytest.mark.parametrize("unit", UNITS)
def test_a_unit_is_chosen_by_a_click(ask, qtbot, unit):
    dialog = ask("unit")
    qtbot.mouseClick(unit_button(dialog, unit), Qt.MouseButton.LeftButton)
    assert dialog.stated().unit == unit
    assert dialog.read.isEnabled()


def test_both_must_be_answered_where_both_are_asked(ask, qtbot):
    dialog = ask("unit", "rate")
    qtbot.keyClicks(dialog.rate, "250")
    assert not dialog.read.isEnabled()
    unit_button(dialog, "µV").click()
    assert dialog.read.isEnabled()
    assert dialog.stated() == Stated("µV", 250.0)


@pytest.mark.parametrize("typed", ["50", "9000", "fast"])
def test_an_impossible_rate_cannot_be_given(ask, qtbot, typed):
    dialog = ask("rate")
    qtbot.keyClicks(dialog.rate, typed)
    assert not dialog.read.isEnabled()
    qtbot.keyClick(dialog.rate, Qt.Key.Key_Return)
    assert dialog.isVisible()


def test_a_rate_is_given_by_the_return_key(ask, qtbot):
    dialog = ask("rate")
    qtbot.keyClicks(dialog.rate, "500")
    with qtbot.waitSignal(dialog.accepted):
        qtbot.keyClick(dialog.rate, Qt.Key.Key_Return)


@pytest.mark.parametrize("name", ["n" * 200 + "-day-30.csv", "<b>1</b> & 2.csv"])
def test_no_name_is_clipped_or_taken_for_markup(ask, name):
    dialog = ask("unit", "rate", name=name)
    drawn = drawn_on(dialog)
    assert drawn[0].text[-7:] == name[-7:]
    assert all(piece.left >= 0 and piece.right <= dialog.width() for piece in drawn)


@pytest.mark.parametrize(
    ("leave", "given"),
    [(TableDialog.accept, Stated("V", 1000.0)), (TableDialog.reject, None)],
    ids=["read", "cancelled"],
)
def test_a_dialog_that_is_cancelled_answers_nothing(bench, tmp_path, leave, given):
    def fill_and_leave() -> None:
        dialog = QApplication.activeModalWidget()
        unit_button(dialog, "V").click()
        dialog.rate.setText("1000")
        leave(dialog)

    QTimer.singleShot(0, fill_and_leave)
    error = TableIncomplete(tmp_path / "a.csv", ("unit", "rate"), "says nothing", "mend it")
    assert dialogs.ask_unstated(bench, error) == given
