"""What differs in a changed scenario, line by line: of lists only what came and went, of reasons only the rule."""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field

from advisor.comparison.changing import Changed

MOST_ALONE = 5
"""More scenarios than this that change in the same way are told together."""
_NAMED = 3
_ITEMS = 8
_MEMBERS = {"cautions", "referrals", "open_questions", "conflicts"}
_OTHER_WORDS = "its words or sources changed"


@dataclass(frozen=True, slots=True)
class Alike:
    """Scenarios that change in the same way, and the lines of what differs in each."""

    changed: tuple[Changed, ...]
    lines: tuple[str, ...]

    @property
    def names(self) -> str:
        """The first names, and how many there are where these are not all."""
        first = ", ".join(each.name for each in self.changed[:_NAMED])
        return first if len(self.changed) <= _NAMED else f"{len(self.changed)} scenarios, such as {first}"


def alike(changed: Iterable[Changed]) -> list[Alike]:
    """The scenarios of a group, those together that many share one change; in the order of the first of each."""
    found: dict[object, list[Changed]] = {}
    for each in changed:
        found.setdefault((each.meaning, frozenset(each.differences.items())), []).append(each)
    result: list[Alike] = []
    for same in found.values():
        lines = tuple(difference_lines(same[0].differences))
        sets = [tuple(same)] if len(same) > MOST_ALONE else [(each,) for each in same]
        result += [Alike(each, lines) for each in sets]
    return result


@dataclass(slots=True)
class _List:
    """The members of a list that went and came."""

    gone: list[str] = field(default_factory=list)
    come: list[str] = field(default_factory=list)

    def say(self) -> str:
        words = [
            f"{verb}: {_joined(members)}" for verb, members in (("no longer", self.gone), ("new", self.come)) if members
        ]
        return "; ".join(words)


def _joined(members: Iterable[str]) -> str:
    members = list(dict.fromkeys(members))
    return (" and " if any(", " in each for each in members) else ", ").join(members)


Differences = Mapping[tuple[str, ...], tuple[str, str]]


def difference_lines(differences: Differences) -> list[str]:
    """The lines, each once: the variants of a case often differ in the same."""
    lists: dict[str, _List] = {}
    verdicts: dict[str, dict[str, None]] = {}
    plain: dict[str, None] = {}
    for part, (was, now) in differences.items():
        if part[0] == "demanded" and _comes_or_goes(part[1], differences):
            continue
        heading, gone, come = _members(part, was, now)
        if set(gone) != set(come):
            if heading not in lists:
                plain[heading] = None
            own = lists.setdefault(heading, _List())
            own.gone += [each for each in gone if each not in come]
            own.come += [each for each in come if each not in gone]
        elif part[0] == "products" and was and now:
            heading = f"products {was} -> {now}".replace("_", " ")
            plain[heading] = None
            verdicts.setdefault(heading, {})[part[1]] = None
        else:
            plain[_line(part, was, now)] = None
    said = {heading: each.say() for heading, each in lists.items()}
    said |= {heading: _some(list(items)) for heading, items in verdicts.items()}
    return [f"{each}: {said[each]}" if each in said else each for each in plain]


def _some(items: list[str]) -> str:
    more = f" and {len(items) - _ITEMS} more" if len(items) > _ITEMS else ""
    return ", ".join(items[:_ITEMS]) + more


def _comes_or_goes(rule: str, differences: Differences) -> bool:
    """Whether the rule is told already, as one that fires now or no longer."""
    return any(part[:2] == ("fired", rule) and not (was and now) for part, (was, now) in differences.items())


def _members(part: tuple[str, ...], was: str, now: str) -> tuple[str, list[str], list[str]]:
    """The heading of a list, and its members on either side; no members where this is no list."""
    key = part[0]
    gone, come = ([each] if each else [] for each in (was, now))
    if key in _MEMBERS:
        return key, gone, come
    if key in {"must", "should"}:
        return f"{key} {part[1]}", gone, come
    if key == "demanded":
        return f"rule {part[1]} asks of {part[2]}", gone, come
    if key == "barred":
        return f"barred {part[1]} {part[2]}", gone, come
    if key == "products" and len(part) > 2 and (was or now).endswith(f" by {part[2]}"):
        return f"products {part[1]}", gone, come
    if key == "cautioned" and was and now:
        return f"caution {part[1]}", *_cautioned(was, now)
    gone, come = _split(was), _split(now)
    return (" ".join(part[:2]), gone, come) if gone and come and set(gone) != set(come) else ("", [], [])


def _split(text: str) -> list[str]:
    return text[1:-1].split(", ") if text.startswith("[") else []


def _cautioned(was: str, now: str) -> tuple[list[str], list[str]]:
    """The rules that draw a caution, and whom it concerns."""
    sides = []
    for each in (was, now):
        rules, _, concerns = each.partition(": ")
        sides.append(
            [f"by {rule}" for rule in rules.split(", ")] + [f"for {item}" for item in concerns.split(", ") if item]
        )
    return sides[0], sides[1]


def _line(part: tuple[str, ...], was: str, now: str) -> str:
    if part[0] == "fired":
        if was and now:
            return f"rule {part[1]}: {_OTHER_WORDS}"
        return f"rule {part[1]} {'no longer fires' if was else 'fires now'}"
    if part[0] == "words" and was and now:
        return f"caution {part[1]}: {_OTHER_WORDS}"
    name = " ".join(part[:2])
    if part[0] == "order" and was and now:
        return _moved(name, was.split(", "), now.split(", "))
    return f"{name}: {was or 'nothing'} -> {now or 'nothing'}"


def alike_at_the_ends(was: Sequence[str], now: Sequence[str]) -> tuple[int, int]:
    """How many members two lists have alike at their beginning, and how many more at their end.

    >>> alike_at_the_ends(["a", "b", "c"], ["a", "x", "y", "c"])
    (1, 1)
    """
    least = min(len(was), len(now))
    head = next((place for place in range(least) if was[place] != now[place]), least)
    return head, next((place for place in range(least - head) if was[-1 - place] != now[-1 - place]), least - head)


def _moved(name: str, was: list[str], now: list[str]) -> str:
    """Two orders without what stands alike at their beginning and their end."""
    head, tail = alike_at_the_ends(was, now)
    gone, come = (", ".join(each[head : len(each) - tail]) or "nothing" for each in (was, now))
    return f"{name} from place {head + 1}: {gone} -> {come}"
