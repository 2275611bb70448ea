//! Stable names of fields in the document's `id` and `data-test` attributes.

use workbook::Field;
use workbook::figure::Place;

/// The name of a field: `DesignFlow`, `StationLevel-3`, `Own-1-Wall`.
#[must_use]
pub fn field(field: Field) -> String {
    let mut slug = String::new();
    for c in format!("{field:?}").chars() {
        match c {
            '(' | ',' => slug.push('-'),
            ')' | ' ' => {}
            c => slug.push(c),
        }
    }
    slug
}

/// The `id` of the element a place of the book is entered at.
#[must_use]
pub fn place(place: &Place) -> String {
    match place {
        Place::Field(f) => format!("field-{}", field(*f)),
        Place::Station(id) => format!("field-{}", field(Field::StationDistance(*id))),
        Place::Stretch(id) => format!("stretch-{id}"),
        Place::Fitting(id) => format!("fitting-{id}"),
        Place::OwnPipe(id) => format!("own-pipe-{id}"),
        Place::Pipe(_) | Place::Line | Place::Jets | Place::Surge => "sheet".to_owned(),
    }
}

/// The name of a pipe, whose id may hold strokes and dots.
#[must_use]
pub fn pipe(id: &str) -> String {
    id.replace(['/', '.', ' '], "-")
}

/// A file name for a book of this name: letters and figures kept, the rest as
/// hyphens, never empty.
#[must_use]
pub fn file_name(name: &str, revision: u64) -> String {
    let mut stem = String::new();
    for c in name.chars() {
        if c.is_alphanumeric() {
            stem.extend(c.to_lowercase());
        } else if !stem.is_empty() && !stem.ends_with('-') {
            stem.push('-');
        }
    }
    let stem = stem.trim_end_matches('-');
    let stem = if stem.is_empty() { "book" } else { stem };
    format!("{stem}-r{revision}.fallwright.json")
}

/// A file name for one of a book's lists as a table.
#[must_use]
pub fn csv_name(name: &str, list: &str, revision: u64) -> String {
    file_name(name, revision).replace(".fallwright.json", &format!("-{list}.csv"))
}

#[cfg(test)]
mod tests {
    use super::*;
    use workbook::field::OwnField;

    #[test]
    fn names_hold_no_brackets() {
        assert_eq!(field(Field::DesignFlow), "DesignFlow");
        assert_eq!(field(Field::StationLevel(3)), "StationLevel-3");
        assert_eq!(field(Field::Own(1, OwnField::Wall)), "Own-1-Wall");
    }

    #[test]
    fn a_file_name_is_safe_on_every_system() {
        assert_eq!(
            file_name("Peña / Alta: 2", 7),
            "peña-alta-2-r7.fallwright.json"
        );
        assert_eq!(file_name("../..", 0), "book-r0.fallwright.json");
    }
}
