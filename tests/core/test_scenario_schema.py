"""The JSON Schema that ships."""

from __future__ import annotations

import json

from tauline.resources import resource
from tauline.scenario.forms import FORMS
from tauline.scenario.schema import json_schema


def test_the_file_that_ships_is_up_to_date() -> None:
    """Write it anew with ``python -m tauline.scenario.schema`` where it is not."""
    shipped = resource("tauline-scenario.schema.json").read_text(encoding="utf-8")
    assert json.loads(shipped) == json_schema()


def test_it_describes_every_form() -> None:
    schema = json_schema()
    assert schema["properties"].keys() >= FORMS.keys()
    for kind, forms in FORMS.items():
        items = schema["properties"][kind]["items"]
        named = [option["$ref"] for option in items.get("anyOf", [items])]
        assert named == list(dict.fromkeys(f"#/$defs/{form.__name__}" for form, _ in forms))
    itinerary = schema["$defs"]["Itinerary"]
    assert set(itinerary["required"]) == {"id", "start", "leg"}
    assert itinerary["additionalProperties"] is False
    leg = itinerary["properties"]["leg"]["items"]["anyOf"]
    assert leg == [{"$ref": "#/$defs/CoastLeg"}, {"$ref": "#/$defs/AcceleratedLeg"}]
    assert "for" in schema["$defs"]["CoastLeg"]["properties"]


def test_every_reference_leads_somewhere() -> None:
    schema = json_schema()
    text = json.dumps(schema)
    for name in schema["$defs"]:
        assert f'"#/$defs/{name}"' in text
    for part in text.split('"#/$defs/')[1:]:
        assert part.partition('"')[0] in schema["$defs"]
