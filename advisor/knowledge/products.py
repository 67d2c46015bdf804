"""The shelf: products as their sheets state them."""

from collections.abc import Mapping as Map
from contextlib import suppress
from dataclasses import replace

from advisor.conditions import Domain, Value
from advisor.documents import Mapping, Problem, Scalar
from advisor.formulas import FORMULAS
from advisor.formulas.formula import OutOfRange
from advisor.knowledge.model import Product, Property
from advisor.knowledge.reading import list_in
from advisor.knowledge.values import Mistyped, Scope, value

_WORDS = ("item", "title", "note")


def items_of(shelf: Mapping | None) -> dict[str, str]:
    """Item codes with what people read for them."""
    nodes = [node for node in list_in(shelf, "products") if isinstance(node, Mapping) and "item" in node]
    return {str(node["item"]): f"{node['item']} {node.get('title', '')}".strip() for node in nodes}


def read_products(
    shelf: Mapping | None, stored: Map[str, Domain], properties: Map[str, Property], ground: Scope
) -> tuple[Product, ...]:
    """Every product of a shelf; its sheet states the stored properties."""
    derived = dict.fromkeys(set(properties) - set(stored), "it is computed or looked up, not stated")
    scope = replace(ground.over(stored, what="property stored on a sheet"), hints=derived)
    found: dict[str, Product] = {}
    for node in list_in(shelf, "products"):
        if not isinstance(node, Mapping) or not isinstance(node.get("item"), Scalar):
            scope.at("products").problem(node.mark, "a product needs an item code", "{item: GR-101, ...}")
            continue
        product = _product(node, scope.at("products", f"'{node['item']}'"))
        if product.item in found:
            message = f"item '{product.item}' stands on the shelf already, in line {found[product.item].mark.line}"
            scope.problem(product.mark, message, "give each product its own item code")
        found.setdefault(product.item, product)
    return tuple(found.values())


def _product(node: Mapping, scope: Scope) -> Product:
    values: dict[str, Value] = {}
    for name, child in node.items():
        if name in _WORDS:
            if not isinstance(child, Scalar):
                scope.problem(child.mark, f"the {name} of a product is text", f"{name}: ...")
            continue
        with suppress(Mistyped):
            values[name] = value(child, scope.domain(name, node.key_marks[name]), scope.at(name))
    _viscosities(node, values, scope)
    return Product(str(node["item"]), str(node.get("title", node["item"])), values, node.mark)


def _viscosities(node: Mapping, values: Map[str, Value], scope: Scope) -> None:
    """Tell viscosities that no oil has together."""
    grade, at_40, at_100 = (values.get(each) for each in ("vg", "viscosity_40", "viscosity_100"))
    if not isinstance(at_40, float | int):
        return
    if isinstance(at_100, float | int) and at_100 >= at_40:
        message = f"an oil is thinner at 100 °C than at 40 °C, and here it has {at_100:g} and {at_40:g} mm²/s"
        scope.problem(node["viscosity_100"].mark, message, "check the decimal points")
    if isinstance(grade, float | int):
        with suppress(OutOfRange):
            low, high = (float(FORMULAS[f"grade_{end}_limit"].function(grade)) for end in ("lower", "upper"))
            if not low <= at_40 <= high:
                message = f"ISO VG {grade:g} goes from {low:g} to {high:g} mm²/s at 40 °C, and here it has {at_40:g}"
                hint = "check the two figures; a grade that the sheet does not state is left out"
                mark = node["viscosity_40"].mark
                scope.problems.add(Problem.at(mark, message, hint, scope.trail, "finding"))
