use std::collections::BTreeMap;

use super::Item;

/// A change is one item that two contents do not share.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Change {
    /// What it belongs to.
    pub of: String,
    /// Its key there.
    pub key: String,
    /// Its value before; `None` where it was not there.
    pub before: Option<String>,
    /// Its value after; `None` where it is gone.
    pub after: Option<String>,
}

/// What differs between two contents: what changed or is gone in the order of `before`, then what is new in the order of `after`.
pub fn changes(before: &[Item], after: &[Item]) -> Vec<Change> {
    let by_name = |items: &[Item]| -> BTreeMap<(String, String), String> {
        items.iter().map(|item| ((item.of.clone(), item.key.clone()), item.value.clone())).collect()
    };
    let (old, new) = (by_name(before), by_name(after));
    let change = |item: &Item| {
        let name = (item.of.clone(), item.key.clone());
        let (before, after) = (old.get(&name).cloned(), new.get(&name).cloned());
        (before != after).then_some(Change { of: name.0, key: name.1, before, after })
    };
    let gone = before.iter().filter_map(change);
    let come = after.iter().filter(|item| !old.contains_key(&(item.of.clone(), item.key.clone()))).filter_map(change);
    gone.chain(come).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn item(of: &str, key: &str, value: &str) -> Item {
        Item { of: of.into(), key: key.into(), value: value.into(), line: 0 }
    }

    #[test]
    fn changed_gone_and_new_items_are_told_and_no_others() {
        let before = [item("a", "x", "1"), item("a", "y", "2"), item("b", "x", "3")];
        let after = [item("a", "x", "1"), item("a", "y", "5"), item("c", "x", "4")];
        let told: Vec<_> = changes(&before, &after).into_iter().map(|c| (c.of + &c.key, c.before, c.after)).collect();
        let some = |text: &str| Some(text.to_owned());
        assert_eq!(told, [("ay".into(), some("2"), some("5")), ("bx".into(), some("3"), None), ("cx".into(), None, some("4"))]);
        assert!(changes(&before, &before).is_empty());
    }
}
