"""Every kind of sheet, by name."""

from fleetcare.tui.sheets.lash import LASH_SHEET

SHEETS = {kind.name: kind for kind in (LASH_SHEET,)}
