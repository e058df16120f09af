"""Answers to findings, and the shop's rules, as somebody states them."""

from typing import Self

from pydantic import model_validator

from fleetcare.drafts.fields import Day, Text
from fleetcare.drafts.reading_in import Draft
from fleetcare.errors import Misread


class AnswerDraft(Draft):
    """What somebody decides about a finding, by its id: to accept it, or to raise a follow-up."""

    finding: Text
    accept: bool = False
    follow_up: bool = False
    why: Text
    by: Text
    on: Day

    @model_validator(mode="after")
    def _check_one(self) -> Self:
        if self.accept is self.follow_up:
            raise Misread("a finding is accepted, or followed up", "give one of --accept and --follow-up")
        return self


class RulesDraft(Draft):
    """Who puts rules of the shop in force, or drops them, and why."""

    why: Text
    by: Text
    on: Day
