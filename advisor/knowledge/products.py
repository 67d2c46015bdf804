"""The shelf: products as their sheets state them."""

from collections.abc import Mapping as Map
from contextlib import suppress
from dataclasses import replace

from advisor.conditions import Domain, Value
from advisor.documents import Mapping, Scalar
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
    return Product(str(node["item"]), str(node.get("title", node["item"])), values, node.mark)
