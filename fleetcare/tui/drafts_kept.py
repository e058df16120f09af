"""Half-typed forms, each in a small file of its own: there again after Esc, a closed terminal and a kill."""

import json
import os
from collections.abc import Container, Mapping
from contextlib import suppress
from hashlib import sha256
from pathlib import Path
from typing import NamedTuple

from fleetcare.errors import Refused

IMPORT_KEY = "import_key"
"""The name under which a draft keeps the key its entry is stored with, beside what is typed."""


class DraftKey(NamedTuple):
    """Whose half-typed form it is: the database, the form, and what the form is about."""

    database: str
    form: str
    subject: str


class KeptDrafts:
    """Drafts in a folder, made when the first one is kept. Nothing here is ever stored in the database by itself."""

    def __init__(self, folder: Path) -> None:
        self.folder = folder

    def keep(self, key: DraftKey, values: Mapping[str, str]) -> None:
        """Put what is typed in the place of what was kept before; a kill leaves the one or the other whole.

        Raises Refused where it cannot be written.
        """
        path = self._path(key)
        text = json.dumps({**key._asdict(), "values": dict(values)}, ensure_ascii=False, indent=1)
        new = path.with_suffix(".new")
        try:
            self.folder.mkdir(parents=True, exist_ok=True)
            with os.fdopen(os.open(new, os.O_WRONLY | os.O_CREAT | os.O_TRUNC, 0o600), "w", encoding="utf-8") as file:
                file.write(text)
                file.flush()
                os.fsync(file.fileno())
            new.replace(path)
        except OSError as error:
            raise Refused(
                f"what is typed cannot be kept in {self.folder}: {error.strerror}", "store it before you leave"
            ) from error

    def find(self, key: DraftKey) -> dict[str, str]:
        """Give what was kept, nothing where there is nothing.

        Raises Refused for a file that cannot be read; it is set aside, so that nothing is written over it.
        """
        path = self._path(key)
        try:
            kept = json.loads(path.read_text(encoding="utf-8"))["values"]
            return {str(name): str(value) for name, value in kept.items()}
        except FileNotFoundError:
            return {}
        except (OSError, ValueError, KeyError, TypeError, AttributeError) as error:
            aside = path.with_suffix(".unreadable")
            with suppress(OSError):  # what cannot be moved stays where it is; the message names the new place or this
                path.replace(aside)
            place = aside if aside.exists() else path
            raise Refused("what was half typed here cannot be read any more", f"it is in {place}") from error

    def of(self, database: str) -> dict[DraftKey, str]:
        """Give what is kept for a database, each with the import key of its entry, empty for one that has none.

        A file that cannot be read is left to whoever opens its form.
        """
        keys = {}
        for path in sorted(self.folder.glob("*.json")):
            with suppress(OSError, ValueError, KeyError, TypeError, AttributeError):  # said when its form is opened
                kept = json.loads(path.read_text(encoding="utf-8"))
                key = DraftKey(str(kept["database"]), str(kept["form"]), str(kept["subject"]))
                keys[key] = str(kept["values"].get(IMPORT_KEY, ""))
        return {key: import_key for key, import_key in keys.items() if key.database == database}

    def drop(self, key: DraftKey) -> None:
        """Keep nothing any more: it was stored or thrown away."""
        with suppress(OSError):  # a leftover is offered once more, and said to be one
            self._path(key).unlink(missing_ok=True)

    def drop_stored(self, database: str, import_keys: Container[str]) -> None:
        """Drop what is kept for a database under import keys that are stored."""
        for key, import_key in self.of(database).items():
            if import_key in import_keys:
                self.drop(key)

    def _path(self, key: DraftKey) -> Path:
        return self.folder / f"{sha256(json.dumps(key).encode()).hexdigest()[:32]}.json"
