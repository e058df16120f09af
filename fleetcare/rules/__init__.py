"""Pure rules: facts and a day in, lines and dates out. No database, no screen, no clock."""
