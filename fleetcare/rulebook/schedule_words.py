"""Tasks of a schedule in words, from their options as written."""

from collections.abc import Mapping


def say_every(task: Mapping[str, object]) -> str:
    """Say how often a task is done: "250h or 12mo, first 50h"."""
    if task.get("on_condition"):
        return "on condition"
    words = " or ".join(_texts(task, "every"))
    if task.get("once_each"):
        words = " or ".join(filter(None, (words, f"once each {task['once_each']}")))
    first = " or ".join(_texts(task, "first"))
    return f"{words}, first {first}" if first else words


def say_rest(task: Mapping[str, object]) -> str:
    """Say what else a task is: law, sheet, what it covers, and every option that is given as plain text."""
    words = [mark.replace("_", " ") for mark, value in task.items() if value is True and mark != "on_condition"]
    if task.get("needs_sheet"):
        words.append(f"closes with its {task['needs_sheet']} sheet")
    for field in ("ahead", "grace", "anchor", "combine", "not_later_than", "window", "deferrable", "labour", "part"):
        if texts := _texts(task, field):
            words.append(f"{field.replace('_', ' ')} {', '.join(texts)}")
    if covers := _texts(task, "covers"):
        words.append(f"covers {', '.join(covers)}")
    return "; ".join(words)


def _texts(task: Mapping[str, object], field: str) -> list[str]:
    value = task.get(field, [])
    return [str(text) for text in value] if isinstance(value, list) else [str(value)]
