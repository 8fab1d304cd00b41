"""What to say where a value of the file does not fit its model."""

from __future__ import annotations

from typing import Annotated, Any, get_args, get_origin

from pydantic import BaseModel, Tag
from pydantic_core import ErrorDetails

from guys import units
from guys.scenario.keys import Key, clipped, nearest
from guys.scenario.quantity import Quantity, shown

_TABLE_TYPES = {"model_type", "dict_type", "model_attributes_type", "mapping_type"}


def key_of(location: tuple[str | int, ...]) -> Key:
    """The key path of an error: its location without the tags of unions."""
    return tuple(part for part in location if not (isinstance(part, str) and part.startswith("<")))


def message(error: ErrorDetails, annotation: Any) -> str:
    """One line: what was found and what would do.  `annotation` is the type the location starts from."""
    kind, value, location = error["type"], error["input"], error["loc"]
    context = error.get("ctx", {})
    if kind == "guys":
        return str(context["text"])
    if kind == "missing":
        return "missing" + _such_as(str(location[-1]), _type_at(annotation, location))
    if kind == "extra_forbidden":
        return "unknown key" + nearest(str(location[-1]), known_keys(_type_at(annotation, location[:-1])))
    if kind == "literal_error":
        choices = _choices(_type_at(annotation, location))
        return f"{shown(value)} is not one of {', '.join(choices)}" + _meant(value, choices)
    return f"{_got(value)}; {_wanted(kind, context)}"


def known_keys(annotation: Any) -> tuple[str, ...]:
    """The keys a table may have."""
    model = _bare(annotation)
    if isinstance(model, type) and issubclass(model, BaseModel):
        return tuple(field.alias or name for name, field in model.model_fields.items())
    return ()


def _type_at(annotation: Any, location: tuple[str | int, ...]) -> Any:
    """The type at a location, walking models, lists, tables by name and tagged unions; None where it leads nowhere."""
    for part in location:
        annotation = _step(_bare(annotation), part)
    return annotation


def _step(annotation: Any, part: str | int) -> Any:
    if isinstance(part, str) and part.startswith("<"):
        tagged = (member for member in get_args(annotation) if Tag(part) in getattr(member, "__metadata__", ()))
        return next(tagged, None)
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        fields = {field.alias or name: field for name, field in annotation.model_fields.items()}
        found = fields.get(str(part))
        if found is None:
            return None
        return Annotated[found.annotation, *found.metadata] if found.metadata else found.annotation
    arguments = get_args(annotation)
    return arguments[-1 if get_origin(annotation) is dict else 0] if arguments else None


def _bare(annotation: Any) -> Any:
    """Without Annotated and without the None of an optional."""
    while True:
        if get_origin(annotation) is Annotated:
            annotation = get_args(annotation)[0]
            continue
        members = [member for member in get_args(annotation) if member is not type(None)]
        if len(members) == 1 and type(None) in get_args(annotation):
            annotation = members[0]
            continue
        return annotation


def _such_as(name: str, annotation: Any) -> str:
    for mark in getattr(annotation, "__metadata__", ()):
        if isinstance(mark, Quantity):
            return f'; give {name} = "..." as {units.a(mark.dimension)}, in {" or ".join(units.DIMENSIONS[mark.dimension])}'
    return ""


def _choices(annotation: Any) -> tuple[str, ...]:
    return tuple(f'"{choice}"' for choice in get_args(_bare(annotation)))


def _meant(value: object, choices: tuple[str, ...]) -> str:
    hint = nearest(value, [choice.strip('"') for choice in choices]) if isinstance(value, str) else ""
    return hint if "did you mean" in hint else ""


def _got(value: object) -> str:
    if isinstance(value, dict):
        return "a table stands here"
    if isinstance(value, list):
        return "a list stands here" if value else "the list is empty"
    return f"{clipped(shown(value))} will not do"


def _wanted(kind: str, context: dict[str, Any]) -> str:
    if kind in _TABLE_TYPES:
        return "a table belongs here"
    if kind in ("list_type", "tuple_type"):
        return "a list belongs here"
    if kind == "too_short":
        return "at least one is needed"
    if kind == "too_long":
        return f"at most {context['max_length']} are read"
    if kind in ("string_type", "string_too_short"):
        return "text in quotes belongs here"
    if kind == "string_too_long":
        return f"at most {context['max_length']} characters"
    if kind == "string_pattern_mismatch":
        return "write it on one line, without blanks at its ends"
    if kind == "bool_type":
        return "write true or false"
    if kind in ("float_type", "int_type"):
        return "a bare number belongs here"
    if kind == "finite_number":
        return "a finite number belongs here"
    if kind in ("greater_than", "greater_than_equal"):
        return f"it must be {'more than' if kind == 'greater_than' else 'at least'} {context.get('gt', context.get('ge'))}"
    if kind in ("less_than", "less_than_equal"):
        return f"it must be {'less than' if kind == 'less_than' else 'at most'} {context.get('lt', context.get('le')):g}"
    return "see `guys schema`"
