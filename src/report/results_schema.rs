//! The JSON Schema of the JSON documents, made from the structs that they are written from.

use super::{CheckDocument, MaterialsDocument, ProfilesDocument, ResultDocument};
use schemars::generate::SchemaSettings;
use serde_json::{Value, json};

/// The schema's own name; the number rises when a document changes its meaning.
const IDENTITY: &str = "urn:soakdown:results:1";

/// The JSON Schema (2020-12) of every document that `--json` and `--out` write.
pub fn results_schema() -> Value {
    let mut generator = SchemaSettings::draft2020_12().for_serialize().into_generator();
    let documents = [
        generator.subschema_for::<ResultDocument<'static>>(),
        generator.subschema_for::<CheckDocument<'static>>(),
        generator.subschema_for::<MaterialsDocument<'static>>(),
        generator.subschema_for::<ProfilesDocument<'static>>(),
    ];
    json!({
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "$id": IDENTITY,
        "title": "soakdown results",
        "description": "SI units; temperatures in kelvin, times in seconds from the start of the profile unless the name says otherwise. \
                        A quantity that does not exist is null, never left out.",
        "oneOf": documents,
        "$defs": generator.take_definitions(true),
    })
}
