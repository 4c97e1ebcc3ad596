import json
import math
from dataclasses import fields, replace

import pytest
from jsonschema import Draft202012Validator

from recheck.model import Audit, Claim, DocumentFacts, Finding, Implied, Place, Printed, Remedy, Settings
from recheck.reports.json import audit_record, audit_schema, unread_record, written_json
from tests.reports.audits import EMPTY, FULL, REVERSED, audit

UNREAD = unread_record("torn.pdf", "torn.pdf: is cut off; ask for the whole file.")


@pytest.fixture(scope="module")
def validator():
    Draft202012Validator.check_schema(audit_schema())
    return Draft202012Validator(audit_schema())


def described(record, schema, path="$"):
    """Yield the path of every key of a record that the schema does not describe."""
    if "$ref" in schema:
        schema = audit_schema()["$defs"][schema["$ref"].rsplit("/", 1)[1]]
    if isinstance(record, list):
        for item in record:
            yield from described(item, schema["items"], f"{path}[]")
    if isinstance(record, dict):
        for key, value in record.items():
            inner = schema.get("properties", {}).get(key) or schema.get("additionalProperties")
            if not inner:
                yield f"{path}.{key}"
            else:
                yield from described(value, inner, f"{path}.{key}")


@pytest.mark.parametrize(
    "record", [audit_record(FULL), audit_record(EMPTY), UNREAD], ids=["full", "empty", "unread"]
)
def test_one_record_holds_to_the_schema(validator, record):
    validator.validate(json.loads(written_json([record])))


def test_several_records_are_a_list_in_order(validator):
    content = json.loads(written_json([audit_record(FULL), UNREAD, audit_record(EMPTY)]))
    validator.validate(content)
    assert ["error" in record for record in content] == [False, True, False]


def test_the_schema_describes_every_key():
    assert not list(described(audit_record(FULL), {"$ref": "#/$defs/audit"}))


@pytest.mark.parametrize(
    ("noun", "name"),
    [
        (Claim, "claim"),
        (Place, "place"),
        (Printed, "printed"),
        (Finding, "finding"),
        (Implied, "implied"),
        (Remedy, "remedy"),
        (DocumentFacts, "document"),
        (Settings, "settings"),
        (Audit, "audit"),
    ],
)
def test_every_field_of_the_model_is_in_the_schema(noun, name):
    properties = audit_schema()["$defs"][name]["properties"]
    assert {field.name for field in fields(noun)} <= set(properties)


@pytest.mark.parametrize("name", audit_schema()["$defs"])
def test_every_part_of_the_schema_says_what_it_is(name):
    part = audit_schema()["$defs"][name]
    rows = [part, *part.get("properties", {}).values()]
    assert all("$ref" in row or row["description"] for row in rows)


@pytest.mark.parametrize(
    ("path", "wrong"),
    [
        (("findings", 0, "verdict"), "guilty"),
        (("findings", 0, "place", "page"), 0),
        (("claims", 0, "values", "t", "text"), 2.2),
        (("settings", "alpha"), 1.5),
        (("document", "sha256"), "none"),
        (("schema",), "recheck.audit/2"),
        (("summary",), {}),
    ],
)
def test_the_schema_refuses_what_is_wrong(validator, path, wrong):
    record = audit_record(FULL)
    at = record
    for step in path[:-1]:
        at = at[step]
    at[path[-1]] = wrong
    assert not validator.is_valid(record)


def test_an_infinite_end_is_null():
    record = audit_record(FULL)
    assert record["findings"][4]["implied"][0]["low"] is None
    assert "Infinity" not in written_json([record])


def test_a_gap_that_is_no_number_is_null():
    record = audit_record(audit(replace(REVERSED, gap=math.nan)))
    assert record["findings"][0]["gap"] is None


def test_numbers_keep_their_printed_text():
    values = audit_record(FULL)["claims"][0]["values"]
    assert values["p"] == {
        "text": ".010",
        "relation": "=",
        "value": 0.01,
        "decimals": 3,
        "percent": False,
        "page": None,
        "box": None,
    }


def test_the_same_audit_gives_the_same_text():
    assert written_json([audit_record(FULL)]) == written_json([audit_record(FULL)])
