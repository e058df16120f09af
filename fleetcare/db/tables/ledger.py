"""The append-only record under everything that decides anything."""

from sqlmodel import Field

from fleetcare.db.columns import Stored


class LedgerEntry(Stored, table=True):
    """One row as it was stored or changed. `kind` is its table; `hash` seals the entry and the one before it."""

    __tablename__ = "ledger"

    seq: int = Field(primary_key=True)
    kind: str
    row_uid: str
    payload_version: int
    payload: str
    previous_hash: str
    hash: str
