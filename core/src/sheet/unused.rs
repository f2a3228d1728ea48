//! Keys of the sheet that the questions of this version do not use.

use super::document::Document;
use super::json::Json;
use super::schema;

/// Keys at the top that are used.
const USED: [&str; 17] = [
    "rungline",
    "title",
    "note",
    "species",
    "configurations",
    "structure",
    "measured",
    "field",
    "line",
    "nucleus",
    "isotopes",
    "level",
    "source",
    "window",
    "medium",
    "refractive_index",
    "air",
];

/// Keys of the source that are used.
const OF_SOURCE: [&str; 3] = ["temperature", "electron_density", "column"];

/// The keys that are known, checked and not used; a key within a group as `group.key`.
pub fn keys(json: &Json) -> Vec<String> {
    let others = |json: Option<&Json>, used: &[&str]| -> Vec<String> {
        match json {
            Some(Json::Object(entries)) => entries
                .iter()
                .map(|(key, _)| key.clone())
                .filter(|key| !used.contains(&key.as_str()))
                .collect(),
            _ => Vec::new(),
        }
    };
    let mut unused = others(Some(json), &USED);
    unused.retain(|key| schema::is_known(key));
    let inner = others(json.get("source"), &OF_SOURCE);
    unused.extend(inner.iter().map(|key| format!("source.{key}")));
    unused
}

impl Document {
    /// A sentence on keys that this version keeps and checks but does not use.
    pub fn unused(&self) -> Option<String> {
        (!self.unused_keys.is_empty()).then(|| {
            format!(
                "This version does not use these keys of the sheet: {}.",
                self.unused_keys.join(", ")
            )
        })
    }
}
