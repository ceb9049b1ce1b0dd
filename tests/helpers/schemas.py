"""The JSON Schemas of the contract."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from jsonschema import Draft202012Validator
from referencing import Registry, Resource

FOLDER = Path(__file__).resolve().parent.parent / "schema"


def _schema(kind: str) -> dict[str, Any]:
    return json.loads((FOLDER / f"{kind}.schema.json").read_text())


def validate(kind: str, content: dict[str, Any]) -> None:
    """Raise unless *content* is a valid ``"comparison"`` or ``"recording"``."""
    recording = _schema("recording")
    registry = Registry().with_resource(recording["$id"], Resource.from_contents(recording))
    schema = _schema(kind)
    Draft202012Validator.check_schema(schema)
    Draft202012Validator(schema, registry=registry).validate(content)
