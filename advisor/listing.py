"""Lists of facts and rules for people and for machines."""

from collections.abc import Sequence
from typing import Any

from advisor.knowledge import Citation, Declaration, Knowledge, Rule


def fact_rows(knowledge: Knowledge, words: Sequence[str] = ()) -> list[dict[str, Any]]:
    """All facts that contain every word, in the order of asking; then the computed ones."""
    rows = [_fact_row(each) for each in knowledge.facts.values()]
    for computation in knowledge.computations.values():
        domain = computation.domain
        rows.append(
            {
                "id": computation.fact,
                "title": computation.title,
                "kind": domain.kind,
                "unit": domain.unit,
                "origin": "computed",
                "step": computation.step,
            }
        )
    return [row for row in rows if _has(row, words)]


def _fact_row(fact: Declaration) -> dict[str, Any]:
    domain = fact.domain
    origin = "asked" if fact.question else "concluded" if fact.concluded else "tunable"
    row: dict[str, Any] = {
        "id": fact.name,
        "title": fact.title,
        "kind": domain.kind,
        "unit": domain.unit,
        "origin": origin,
    }
    if domain.choices and domain.kind != "item":
        row["choices"] = dict(domain.choices)
    if fact.question:
        row |= {"ask": fact.question.ask, "section": fact.question.section, "decides": fact.question.decides}
    if fact.assume:
        row["dont_know"] = {
            "value": fact.assume.value,
            "because": fact.assume.because,
            "keeps_open": fact.assume.keeps_open,
        }
    if fact.tunable:
        row["value"] = fact.tunable.value
    return row


def rule_rows(knowledge: Knowledge, words: Sequence[str] = ()) -> list[dict[str, Any]]:
    """All rules that contain every word, step by step, each with its sources and how surely they were read."""
    order = [step.id for step in knowledge.steps]
    rules = sorted(knowledge.rules.values(), key=lambda rule: order.index(rule.step))
    return [row for row in (_rule_row(rule, knowledge) for rule in rules) if _has(row, words)]


def _rule_row(rule: Rule, knowledge: Knowledge) -> dict[str, Any]:
    rows = [each.id for each in knowledge.instances.get(rule.step, ()) if each.rule.id == rule.id]
    return {
        "id": rule.id,
        "title": rule.title,
        "status": rule.status,
        "step": rule.step,
        "because": rule.because,
        "limits": rule.limits,
        "table": rule.table,
        "rows": len(rows) if rule.table else 0,
        "source": [_source(each, knowledge) for each in rule.source],
        "file": f"{rule.mark.file}:{rule.mark.line}",
    }


def _source(citation: Citation, knowledge: Knowledge) -> dict[str, str]:
    source = knowledge.sources.get(citation.id)
    title = source.title if source else citation.id
    return {"id": citation.id, "title": title, "where": citation.where, "checked": citation.checked}


def _has(row: dict[str, Any], words: Sequence[str]) -> bool:
    text = str(row).casefold()
    return all(word.casefold() in text for word in words)


def facts_text(rows: Sequence[dict[str, Any]]) -> str:
    """Facts as lines."""
    lines = []
    for row in rows:
        kind = f"{row['kind']} {row['unit']}".strip()
        lines.append(f"{row['id']:<30} {row['origin']:<10} {kind:<16} {row['title']}")
        if "choices" in row:
            lines.append(f"    {', '.join(_choice(*each) for each in row['choices'].items())}")
    return "\n".join(lines) if lines else "No fact contains these words."


def _choice(name: str, title: str) -> str:
    return name if name.replace("_", " ") == title else f"{name} ({title})"


def rules_text(rows: Sequence[dict[str, Any]]) -> str:
    """Rules as lines under their steps, with a count of how surely they stand."""
    lines: list[str] = []
    step = ""
    for row in rows:
        if row["step"] != step:
            step = row["step"]
            lines += ["", step.upper()]
        many = f" (each row of {row['table']}: {row['rows']})" if row["table"] else ""
        lines.append(f"  {row['id']:<36} {row['status']:<8} {row['title']}{many}")
        lines += [
            f"      {each['title']}{', ' + each['where'] if each['where'] else ''} [{each['checked']}]"
            for each in row["source"]
        ]
    if not rows:
        return "No rule contains these words."
    return "\n".join([*lines, "", *_standing(rows)]).lstrip("\n")


def _standing(rows: Sequence[dict[str, Any]]) -> list[str]:
    """How surely the rules stand; one that cites both kinds counts as resting on a read source only in part."""
    wholly = partly = memory = practice = 0
    for row in rows:
        marks = {each["checked"] for each in row["source"]}
        wholly += marks == {"yes"}
        partly += "yes" in marks and marks != {"yes"}
        memory += "yes" not in marks and "from memory" in marks
        practice += marks == {"no source"}
    return [
        f"{len(rows)} rules: {wholly} rest wholly on sources that were read, {partly} in part (the rest of them on",
        f"memory or common practice), {memory} on sources remembered, {practice} on common practice without a source.",
    ]
