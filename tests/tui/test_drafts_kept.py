"""What is half typed lies in a file of its own, whole or not at all, until it is stored or thrown away."""

import os
import stat
from pathlib import Path

import pytest

from fleetcare.errors import Refused
from fleetcare.tui.drafts_kept import DraftKey, KeptDrafts

KEY = DraftKey("/shop/yard.db", "log", "PS-1")
TYPED = {"at": "30", "note": "belt \u201csqueals\u201d [/b]\x1b"}


def test_what_was_kept_is_found_again_by_another_program(tmp_path: Path) -> None:
    KeptDrafts(tmp_path / "drafts").keep(KEY, TYPED)
    assert KeptDrafts(tmp_path / "drafts").find(KEY) == TYPED


def test_what_is_kept_anew_takes_the_place_of_the_old(tmp_path: Path) -> None:
    drafts = KeptDrafts(tmp_path)
    drafts.keep(KEY, TYPED)
    drafts.keep(KEY, {"at": "31"})
    assert drafts.find(KEY) == {"at": "31"}
    assert len(list(tmp_path.iterdir())) == 1


@pytest.mark.parametrize(
    "other", [KEY._replace(database="/shop/other.db"), KEY._replace(form="reading"), KEY._replace(subject="PS-2")]
)
def test_each_database_form_and_subject_has_a_draft_of_its_own(tmp_path: Path, other: DraftKey) -> None:
    drafts = KeptDrafts(tmp_path)
    drafts.keep(KEY, TYPED)
    assert drafts.find(other) == {}


def test_a_dropped_draft_is_gone_and_dropping_nothing_does_nothing(tmp_path: Path) -> None:
    drafts = KeptDrafts(tmp_path)
    drafts.drop(KEY)
    drafts.keep(KEY, TYPED)
    drafts.drop(KEY)
    assert drafts.find(KEY) == {}
    assert list(tmp_path.iterdir()) == []


def test_a_kill_while_a_draft_is_written_leaves_the_one_before(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    drafts = KeptDrafts(tmp_path)
    drafts.keep(KEY, TYPED)

    def killed(number: int) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(os, "fsync", killed)
    with pytest.raises(KeyboardInterrupt):
        drafts.keep(KEY, {"at": "31"})
    assert drafts.find(KEY) == TYPED


def test_a_damaged_draft_is_said_once_and_set_aside(tmp_path: Path) -> None:
    drafts = KeptDrafts(tmp_path)
    drafts.keep(KEY, TYPED)
    (path,) = tmp_path.iterdir()
    path.write_text('{"values": ["at"]}', encoding="utf-8")
    with pytest.raises(Refused, match=r"cannot be read any more; it is in .*\.unreadable"):
        drafts.find(KEY)
    assert drafts.find(KEY) == {}
    assert [path.suffix for path in tmp_path.iterdir()] == [".unreadable"]


def test_a_folder_that_cannot_be_written_is_said_with_what_to_do(tmp_path: Path) -> None:
    (tmp_path / "drafts").write_text("a file where the folder should be", encoding="utf-8")
    with pytest.raises(Refused, match=r"cannot be kept in .*; store it before you leave"):
        KeptDrafts(tmp_path / "drafts").keep(KEY, TYPED)


def test_only_whoever_typed_it_can_read_it(tmp_path: Path) -> None:
    KeptDrafts(tmp_path).keep(KEY, TYPED)
    (path,) = tmp_path.iterdir()
    assert stat.S_IMODE(path.stat().st_mode) == 0o600


def test_what_is_kept_for_a_database_is_listed_and_damaged_files_are_passed_over(tmp_path: Path) -> None:
    drafts = KeptDrafts(tmp_path)
    drafts.keep(KEY, TYPED)
    drafts.keep(KEY._replace(database="/shop/other.db"), TYPED)
    (tmp_path / "x.json").write_text("[1]")
    assert drafts.of("/shop/yard.db") == {KEY: ""}
