"""Every kind of sheet, by name."""

from fleetcare.tui.sheets.lash import LASH_SHEET
from fleetcare.tui.sheets.measured import MEASURED_SHEETS

SHEETS = {kind.name: kind for kind in (LASH_SHEET, *MEASURED_SHEETS)}
