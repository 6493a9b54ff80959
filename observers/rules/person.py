"""What a name may be."""

import unicodedata

from observers.rules.problem import Problem

LONGEST_NAME = 80


def person_name_problems(name: str) -> list[Problem]:
    """Judge the name of an account: visible, not too long, no spaces around it."""
    if not name.strip():
        return [Problem("name", "A name is needed.")]
    problems = []
    if name != name.strip():
        problems.append(Problem("name", "A name has no spaces before or after it."))
    if len(name) > LONGEST_NAME:
        problems.append(Problem("name", f"A name has at most {LONGEST_NAME} characters."))
    if any(unicodedata.category(letter).startswith("C") for letter in name):
        problems.append(Problem("name", "A name has only visible characters."))
    return problems
