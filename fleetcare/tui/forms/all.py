"""Every form, by name."""

from fleetcare.tui.forms.adding import ENGINE, MACHINE, SCHEDULE, SCHEDULE_OUT, TASK
from fleetcare.tui.forms.editing import EDIT, PERSON_NAME, SITE_NAME, TASK_EDIT, TASK_END
from fleetcare.tui.forms.findings import ACCEPT, FOLLOW_UP
from fleetcare.tui.forms.measure import MEASURES
from fleetcare.tui.forms.meters import READING, RESTORE_READING, SWAP, VOID_READING
from fleetcare.tui.forms.standing import FACTOR, LAY_UP, MOVE, RETURN, STAND_DOWN, WITHDRAW
from fleetcare.tui.forms.work import CORRECT, DEFER, LOG, VOID

FORMS = {
    form.name: form
    for form in (
        LOG,
        CORRECT,
        VOID,
        DEFER,
        ACCEPT,
        FOLLOW_UP,
        *MEASURES,
        READING,
        SWAP,
        VOID_READING,
        RESTORE_READING,
        LAY_UP,
        RETURN,
        STAND_DOWN,
        WITHDRAW,
        MOVE,
        FACTOR,
        ENGINE,
        MACHINE,
        EDIT,
        TASK,
        TASK_EDIT,
        TASK_END,
        SCHEDULE,
        SCHEDULE_OUT,
        SITE_NAME,
        PERSON_NAME,
    )
}
