//! Why a file is not a book, in words.

use crate::Words;
use crate::text::{self, Key};
use workbook::format::{FORMAT, FileTrouble, LONGEST, MOST_ROWS};

impl Words {
    /// Why a file cannot be opened, and that nothing was changed by trying.
    ///
    /// The words of the JSON reader are passed on as they are, in English,
    /// marked as its own.
    #[must_use]
    pub fn file_trouble(self, trouble: &FileTrouble) -> String {
        match trouble {
            FileTrouble::TooLong { bytes } => {
                text::file_too_long(self, &self.count(*bytes), &self.count(LONGEST))
            }
            FileTrouble::NotText => self.say(Key::FILE_NOT_TEXT).to_owned(),
            FileTrouble::NotJson { line, column, why } => {
                text::file_not_json(self, &self.count(*line), &self.count(*column), why)
            }
            FileTrouble::NotABook => self.say(Key::FILE_NOT_A_BOOK).to_owned(),
            FileTrouble::NewerFormat { found } => {
                text::file_newer(self, &found.to_string(), &FORMAT.to_string())
            }
            FileTrouble::Content { why, line } => text::file_content(self, &self.count(*line), why),
            FileTrouble::RepeatedNumber { list, id } => {
                text::file_repeated(self, &id.to_string(), self.list(list))
            }
            FileTrouble::TooManyRows { list, count } => text::file_rows(
                self,
                &self.count(*count),
                self.list(list),
                &self.count(MOST_ROWS),
            ),
            FileTrouble::NoKey => self.say(Key::FILE_NO_KEY).to_owned(),
            _ => self.say(Key::FILE_OTHER).to_owned(),
        }
    }

    /// A list of the file, as the user knows it.
    fn list(self, list: &str) -> &'static str {
        self.say(match list {
            "stations" => Key::FILE_LIST_STATIONS,
            "stretches" => Key::FILE_LIST_STRETCHES,
            "fittings" => Key::FILE_LIST_FITTINGS,
            "prices" => Key::FILE_LIST_PRICES,
            "pipes" => Key::FILE_LIST_PIPES,
            _ => Key::FILE_LIST_OWN,
        })
    }
}
