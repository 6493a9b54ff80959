"""Does a plain value have the declared shape? Unknown and missing fields are refused."""

import math
from collections.abc import Iterator
from dataclasses import fields, is_dataclass
from functools import cache
from types import NoneType, UnionType
from typing import Any, Literal, Union, get_args, get_origin, get_type_hints, is_typeddict


def shape_problems(shape: Any, value: Any, *, where: str = "") -> Iterator[str]:
    """Yield one sentence for everything in `value` that does not fit the type `shape`."""
    if is_typeddict(shape):
        yield from _record_problems(_typed_fields(shape), value, where)
        return
    origin = get_origin(shape)
    if origin in (Union, UnionType):
        yield from _union_problems(get_args(shape), value, where)
    elif origin is list:
        yield from _list_problems(get_args(shape)[0], value, where)
    elif origin is dict:
        yield from _dict_problems(get_args(shape)[1], value, where)
    elif origin is Literal:
        if value not in get_args(shape):
            yield f"{where} is {value!r}, not one of {', '.join(map(repr, get_args(shape)))}"
    elif not _is_scalar(shape, value):
        yield f"{where} is {value!r}, not {shape.__name__}"


def dataclass_problems(record: Any) -> Iterator[str]:
    """Yield what does not fit in the fields of a dataclass instance."""
    kind: Any = type(record)
    for name, shape in _typed_fields(kind).items():
        yield from shape_problems(shape, getattr(record, name), where=name)


@cache
def _typed_fields(shape: Any) -> dict[str, Any]:
    hints = get_type_hints(shape)
    if is_dataclass(shape):
        return {field.name: hints[field.name] for field in fields(shape)}
    return hints


def _is_scalar(shape: Any, value: Any) -> bool:
    if shape is float:
        return isinstance(value, int | float) and not isinstance(value, bool) and _finite(value)
    if shape is int:
        return isinstance(value, int) and not isinstance(value, bool)
    return isinstance(value, shape)


def _finite(value: float) -> bool:
    return math.isfinite(value)


def _record_problems(shapes: dict[str, Any], value: Any, where: str) -> Iterator[str]:
    if not isinstance(value, dict):
        yield f"{where} is {value!r}, not an object"
        return
    for name in value.keys() - shapes.keys():
        yield f"{where}.{name} is an unknown field"
    for name, shape in shapes.items():
        if name not in value:
            yield f"{where}.{name} is missing"
        else:
            yield from shape_problems(shape, value[name], where=f"{where}.{name}")


def _union_problems(shapes: tuple[Any, ...], value: Any, where: str) -> Iterator[str]:
    if value is None and NoneType in shapes:
        return
    first: list[str] = []
    for shape in shapes:
        if shape is NoneType:
            continue
        problems = list(shape_problems(shape, value, where=where))
        if not problems:
            return
        first = first or problems
    yield from first


def _list_problems(shape: Any, value: Any, where: str) -> Iterator[str]:
    if not isinstance(value, list):
        yield f"{where} is {value!r}, not a list"
        return
    for index, item in enumerate(value):
        yield from shape_problems(shape, item, where=f"{where}[{index}]")


def _dict_problems(shape: Any, value: Any, where: str) -> Iterator[str]:
    if not isinstance(value, dict):
        yield f"{where} is {value!r}, not an object"
        return
    for key, item in value.items():
        if not isinstance(key, str):
            yield f"{where} has the key {key!r}, which is no text"
        yield from shape_problems(shape, item, where=f"{where}[{key}]")
