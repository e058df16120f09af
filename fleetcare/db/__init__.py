"""Storage: tables, the one way in and out of the file, the ledger, migrations."""
