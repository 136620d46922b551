"""Prints what the Open Reaction Database's own validator says of a dataset, as JSON.

    python validate_dataset.py DATASET.pb DATASET.json

Runs in the environment of requirements-ord.txt.
"""

import json
import sys

from google.protobuf import json_format
from ord_schema import validations
from ord_schema.proto import dataset_pb2

binary, text = sys.argv[1:]
with open(binary, "rb") as file:
    dataset = dataset_pb2.Dataset.FromString(file.read())
with open(text, encoding="utf-8") as file:
    same = json_format.Parse(file.read(), dataset_pb2.Dataset())
told = validations.validate_message(dataset, raise_on_error=False)
measured = [
    product.measurements
    for reaction in dataset.reactions
    for outcome in reaction.outcomes
    for product in outcome.products
    if product.measurements
]
print(
    json.dumps(
        {
            "errors": list(told.errors),
            "warnings": list(told.warnings),
            "equal": dataset == same,
            "reactions": len(dataset.reactions),
            "measured": len(measured),
            "first": json_format.MessageToDict(dataset.reactions[0]),
            "positions": [
                (reaction.setup.vessel.vessel_id, reaction.setup.vessel.position)
                for reaction in dataset.reactions
            ],
        }
    )
)
