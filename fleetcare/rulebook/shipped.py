"""The shipped rules as files, for whoever must know whether they changed and not what they say."""

import hashlib
from functools import cache
from pathlib import Path

FOLDER = Path(__file__).parent / "rules"


def rule_files() -> list[Path]:
    """Give the files of shipped rules, in the order they are read."""
    return sorted(FOLDER.glob("*.toml"))


@cache
def shipped_digest() -> str:
    """Give the SHA-256 of everything the shipped rules say, as hex digits."""
    return hashlib.sha256(b"\0".join(path.read_bytes() for path in rule_files())).hexdigest()
