//! The interface: shows findings, edits the book, holds no engineering.
//!
//! - [`state`]: the book with its history, and all that is derived from it
//! - [`history`], [`edits`], [`slices`], [`save_queue`], [`sweep_table`],
//!   [`slug`]: plain logic, tested natively
//! - [`gate`], [`station_rows`]: what keeps a key in one field from waking all
//! - [`keeping`], [`sweeping`]: writing to the store; working the sweep in slices
//! - [`platform`]: all that is asked of the browser
//! - [`inputs`], [`parts`], [`sheets`], [`app`]: what is shown
//! - [`drawing`]: the drawings, as pure functions
//!
//! # Marks for a walk-through
//!
//! Elements that a person uses or reads carry `data-test`:
//!
//! | mark | what |
//! |---|---|
//! | `app` (with `data-ready="yes"`), `sheet-<sheet>` | the page, the sheet in view |
//! | `tab-stream`, `tab-line`, `tab-pipe`, `tab-jets`, `tab-surge`, `tab-print` | the tabs |
//! | `undo`, `redo`, `theme`, `tab-books`, `save-file` | acts beside the tabs |
//! | `books`, `saved` (with `data-saved`: `nothing`, `saving`, `saved`, `not`), `title-flow`, `title-head` | title block |
//! | `next`, `notice`, `notice-close`, `banner-not-saved`, `update`, `update-accept` | lines under it |
//! | `drawing`, `drawing-said`, `drawing-line`, `drawing-open`, `zoom-in`, `zoom-out`, `zoom-fit`, `drawing-close` | the long section |
//! | `field-<Field>`, with `-unit`, `-minus`, `-doubt`, `-trouble` | a number: [`slug::field`], as `field-DesignFlow`, `field-StationLevel-3` |
//! | `text-<name>` | a text: `name`, `place`, `client`, `prepared`, `date`, `note`, `reviewer`, `licence` |
//! | `<choice>-<option>` | `units-metric`, `units-us`, `language-en`, `language-es`, `distance-kind-slope`, `distance-kind-horizontal`, `reckoning-start`, `reckoning-previous`, `laying-<stretch>-buried`, `bore-sizing-solved`, `bore-sizing-chosen`, `nozzle-kind-fixed`, `nozzle-kind-needle`, `speeds-one`, `speeds-two`, `guard-slam-yes`, `kept-clear-yes`, `deflectors-yes`, `unsteady-friction-yes` (and `-no`), `roughness-aged`, `paper-a4`, `paper-letter` |
//! | `first-demo`, `first-file`, `today` | Stream sheet |
//! | `station-table`, `station-<id>`, `station-pick-<id>`, `station-add`, `station-tools`, `station-above`, `station-below`, `station-split`, `station-fitting`, `station-delete` | stations |
//! | `line-stretch-<id>`, `stretch-start-<id>`, `stretch-delete-<id>`, `stretch-to-pipe-<id>` | stretches on the Line sheet |
//! | `fitting-add`, `fitting-<id>`, `fitting-kind-<id>`, `fitting-station-<id>`, `fitting-delete-<id>`; `fitting-fold-<id>` opens one | fittings |
//! | `figure-<FigureKey>` | a figure, which opens `working` (`working-formula`, `working-result`, `working-close`) |
//! | `stretch-<id>`, `stretch-pick-<id>`, `stretch-pipe-<id>`, `verdict-<id>` (with `data-verdict`) | stretches on the Pipe sheet |
//! | `sweep-material`, `sweep-fit-fit`, `sweep-fit-all`, `sweep-target`, `sweep-whole-line`, `sweep-progress`, `sweep-count`, `sweep-memory`, `sweep-chart`, `sweep-said`, `sweep-left-out`, `sweep-table`, `sort-<Column>`, `sweep-all` | the sweep |
//! | `row-<pipe>`, `choose-<pipe>` | a pipe of it: [`slug::pipe`], as `choose-pe100-iso4427-225-sdr17` |
//! | `own-add`, `own-<id>-delete`, `choose-own-<id>` | pipes of the user's own |
//! | `jet-table`, `jets-open-<n>`, `power-curve` | Jets sheet |
//! | `surge-law`, `surge-others`, `surge-held`, `surge-allowances`, `surge-found` (with `surge-unsettled` where it is), `surge-table`, `surge-stretch-<id>`, `surge-events`, `event-<Event>`, `surge-decides`, `surge-trace`, `surge-trace-said`, `surge-trust`, `surge-<figure>` | Surge sheet |
//! | `valve-add`, `valve-delete-<row>` | table of the valve, rows from 0 |
//! | `print`, `print-sheet`, `print-unsettled`, `print-open`, `print-drawing`, `print-schedule`, `schedule-<stretch>`, `print-pressures`, `pressure-<stretch>`, `print-surge`, `surge-of-<stretch>`, `print-fittings`, `print-nozzles`, `print-stations`, `print-cautions`, `print-assumptions`, `print-sources`, `print-review` | Print sheet |
//! | `books-dialog`, `book-new`, `book-demo`, `book-file-open`, `book-file-save`, `file-input`, `book-open-<key>`, `book-copy-<key>`, `book-save-<key>`, `book-delete-<key>`, `book-delete-sure-<key>`, `books-close` | the books |
//! | `ask-dialog`, `ask-keep-both`, `ask-replace`, `ask-cancel` | a file whose key a stored book has |
#![recursion_limit = "512"]

pub mod app;
pub mod drawing;
pub mod edits;
pub mod gate;
pub mod history;
pub mod inputs;
pub mod keeping;
pub mod parts;
pub mod platform;
pub mod save_queue;
pub mod sheets;
pub mod slices;
pub mod slug;
pub mod speak;
pub mod state;
pub mod station_rows;
pub mod sweep_table;
pub mod sweeping;
pub mod theme;
