//! Small maps in the order of their keys.
//!
//! std's tree is compiled anew for every pair of types, several kilobytes each time that a browser
//! has to load; here a vector is kept in order.

use super::order::sort_by;
use serde::ser::{Serialize, SerializeMap, Serializer};

/// A map whose entries are kept in the order of their keys; meant for some hundred of them, or for
/// any number that is collected at once.
#[derive(Clone, Debug)]
pub struct SortedMap<K, V> {
    entries: Vec<(K, V)>,
}

impl<K, V> Default for SortedMap<K, V> {
    fn default() -> Self {
        SortedMap {
            entries: Vec::new(),
        }
    }
}

impl<K: Ord, V> SortedMap<K, V> {
    /// The value of a key.
    pub fn get(&self, key: &K) -> Option<&V> {
        let place = self.entries.binary_search_by(|entry| entry.0.cmp(key));
        self.entries.get(place.ok()?).map(|entry| &entry.1)
    }

    /// Puts a value, in the place of one that its key had before.
    pub fn insert(&mut self, key: K, value: V) {
        match self.entries.binary_search_by(|entry| entry.0.cmp(&key)) {
            Ok(place) => {
                if let Some(entry) = self.entries.get_mut(place) {
                    entry.1 = value;
                }
            }
            Err(place) => self.entries.insert(place, (key, value)),
        }
    }

    /// Changes the value of a key, first the type's default.
    pub fn change(&mut self, key: K, change: impl FnOnce(&mut V))
    where
        V: Default,
    {
        let found = self.entries.binary_search_by(|entry| entry.0.cmp(&key));
        let place = match found {
            Ok(place) => place,
            Err(place) => {
                self.entries.insert(place, (key, V::default()));
                place
            }
        };
        if let Some(entry) = self.entries.get_mut(place) {
            change(&mut entry.1);
        }
    }

    /// The entries themselves, by rising key.
    pub fn into_entries(self) -> Vec<(K, V)> {
        self.entries
    }

    /// The entries by rising key.
    pub fn entries(&self) -> &[(K, V)] {
        &self.entries
    }
}

/// Of equal keys the last one stays.
impl<K: Ord, V> FromIterator<(K, V)> for SortedMap<K, V> {
    fn from_iter<I: IntoIterator<Item = (K, V)>>(entries: I) -> Self {
        let mut entries: Vec<(K, V)> = entries.into_iter().collect();
        // Reversed before the stable sort, so that the last of equal ones comes first and is kept.
        entries.reverse();
        sort_by(&mut entries, |one, other| one.0.cmp(&other.0));
        entries.dedup_by(|later, kept| later.0 == kept.0);
        SortedMap { entries }
    }
}

impl<K: Serialize, V: Serialize> Serialize for SortedMap<K, V> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(Some(self.entries.len()))?;
        for (key, value) in &self.entries {
            map.serialize_entry(key, value)?;
        }
        map.end()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeMap;

    #[test]
    fn it_is_the_library_s_map() {
        let mut state = 1_u32;
        let mut draw = || {
            state = state.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
            state >> 20
        };
        let pairs: Vec<(u32, u32)> = (0..3000).map(|_| (draw() % 700, draw())).collect();
        let mut theirs: BTreeMap<u32, u32> = pairs.iter().copied().collect();
        let mut ours: SortedMap<u32, u32> = pairs.iter().copied().collect();
        for _ in 0..100 {
            let (key, value) = (draw() % 900, draw());
            theirs.insert(key, value);
            ours.insert(key, value);
        }
        assert!(
            ours.entries()
                .iter()
                .map(|entry| (&entry.0, &entry.1))
                .eq(&theirs)
        );
        assert!((0..1000).all(|key| ours.get(&key) == theirs.get(&key)));
        assert_eq!(
            serde_json::to_string(&ours).expect("JSON"),
            serde_json::to_string(&theirs).expect("JSON")
        );
    }
}
