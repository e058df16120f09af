"""Every form, by name."""

from fleetcare.tui.forms.adding import ENGINE, SCHEDULE, TASK
from fleetcare.tui.forms.meters import READING, SWAP
from fleetcare.tui.forms.standing import LAY_UP, MOVE, RETURN, STAND_DOWN, WITHDRAW
from fleetcare.tui.forms.work import CORRECT, DEFER, LOG, VOID

FORMS = {
    form.name: form
    for form in (
        LOG,
        CORRECT,
        VOID,
        DEFER,
        READING,
        SWAP,
        LAY_UP,
        RETURN,
        STAND_DOWN,
        WITHDRAW,
        MOVE,
        ENGINE,
        TASK,
        SCHEDULE,
    )
}
