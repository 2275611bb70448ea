//! Books are kept: through a battery that gives out, without a server, in
//! files, several side by side; and none is replaced or deleted unasked.

use std::fs;
use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};
use walkthrough::{PATIENCE, Page, Result, walk};
use workbook::{Book, demo, format};

/// The fields that these walks write in, and what they write.
const TYPED: [(&str, &str); 4] = [
    ("field-DesignFlow", "31,5 \u{b1} 2"),
    ("text-name", "Kiln Brook"),
    ("field-WarmestWater", "not known"),
    ("field-ColdestWater", "36 \u{b0}F"),
];

async fn write_all(page: &Page) -> Result {
    page.sheet("stream").await?;
    for (field, text) in TYPED {
        page.write(field, text).await?;
    }
    page.until_saved().await
}

async fn stands_as_typed(page: &Page) -> Result {
    page.sheet("stream").await?;
    for (field, text) in TYPED {
        assert_eq!(page.written(field).await?, text, "{field}");
    }
    Ok(())
}

fn as_typed(book: &Book) {
    assert_eq!(book.site.name, "Kiln Brook");
    assert_eq!(book.stream.design_flow_m3_s.text, "31,5 \u{b1} 2");
    assert_eq!(book.climate.warmest_water_degc.text, "not known");
}

fn read(json: &str) -> Result<Book> {
    format::read(json.as_bytes()).map_err(|trouble| format!("{trouble:?}: {json}").into())
}

#[test]
fn a_book_outlives_a_killed_browser() {
    walk("killed", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        write_all(page).await?;
        let said = page.text("saved").await?.to_lowercase();
        assert!(said.contains("saved"), "{said}");
        page.kill();

        page.start().await?;
        page.goto("").await?;
        page.text_when("books", |text| text == "Kiln Brook").await?;
        stands_as_typed(page).await?;
        as_typed(&read(&page.stored_book().await?)?);

        // And again in the middle of typing: all that was said to be saved is there.
        page.write("text-place", "half a wor").await?;
        page.until_saved().await?;
        page.kill();
        page.start().await?;
        page.goto("").await?;
        stands_as_typed(page).await?;
        assert_eq!(page.written("text-place").await?, "half a wor");
        Ok(())
    });
}

#[test]
fn a_book_opens_cold_without_a_server() {
    walk("kept-offline", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.until_offline_ready().await?;
        write_all(page).await?;
        page.close().await?;
        page.stop_server();

        page.start().await?;
        page.goto("").await?;
        page.text_when("books", |text| text == "Kiln Brook").await?;
        stands_as_typed(page).await?;
        // It works there, too, and keeps.
        page.write("field-DesignFlow", "28").await?;
        page.text_when("title-flow", |text| text.starts_with("28.0\u{202f}L/s"))
            .await?;
        page.until_saved().await?;
        page.goto("#pipe").await?;
        page.find_test("sheet-pipe").await?;
        page.sheet("stream").await?;
        assert_eq!(page.written("field-DesignFlow").await?, "28");
        Ok(())
    });
}

/// An empty folder that the browser saves into.
async fn downloads(page: &Page, name: &str) -> Result<PathBuf> {
    let folder = tasks::places::target().join("walks").join(name);
    if folder.exists() {
        fs::remove_dir_all(&folder)?;
    }
    fs::create_dir_all(&folder)?;
    page.save_downloads_in(&folder).await?;
    Ok(folder)
}

/// Waits for the one file to be there and whole, and takes it out of the folder.
fn downloaded(folder: &Path) -> Result<(String, Vec<u8>)> {
    let begun = Instant::now();
    loop {
        for entry in fs::read_dir(folder)? {
            let path = entry?.path();
            if path.extension().is_some_and(|ext| ext == "json") {
                let bytes = fs::read(&path)?;
                if format::read(&bytes).is_ok() {
                    let name = path.file_name().map(|n| n.to_string_lossy().into_owned());
                    fs::remove_file(&path)?;
                    return Ok((name.unwrap_or_default(), bytes));
                }
            }
        }
        if begun.elapsed() > PATIENCE {
            return Err("no file was saved".into());
        }
        std::thread::sleep(Duration::from_millis(50));
    }
}

/// Opens a file by the button of the list of books.
async fn open_file(page: &Page, file: &Path) -> Result {
    if !listed(page).await? {
        page.tap_test("tab-books").await?;
    }
    page.choose_file("book-file-open", "file-input", file).await
}

/// Whether the list of books is open.
async fn listed(page: &Page) -> Result<bool> {
    let open = page
        .script(
            "return document.querySelector('[data-test=books-dialog]').open;",
            vec![],
        )
        .await?;
    Ok(open == true)
}

async fn close_books(page: &Page) -> Result {
    if listed(page).await? {
        page.tap_test("books-close").await?;
    }
    Ok(())
}

#[test]
fn a_file_is_saved_and_opened_and_replaces_nothing_unasked() {
    walk("files", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        let folder = downloads(page, "files-saved").await?;
        write_all(page).await?;
        page.tap_test("save-file").await?;
        let (name, bytes) = downloaded(&folder)?;
        assert!(
            name.starts_with("kiln-brook") && name.ends_with(".fallwright.json"),
            "{name}"
        );
        let saved = format::read(&bytes).map_err(|e| format!("{e:?}"))?;
        as_typed(&saved);
        assert_eq!(saved, read(&page.stored_book().await?)?);
        page.text_when("notice", |text| text.contains(&name))
            .await?;

        // The book goes on; the file is the older one.
        page.write("field-DesignFlow", "40").await?;
        page.until_saved().await?;
        let file = folder.join("older.txt");
        fs::write(&file, &bytes)?;

        // Asked: leave all as it is.
        open_file(page, &file).await?;
        let asked = page
            .text_when("ask-dialog", |text| text.contains("Which should stand?"))
            .await?;
        assert!(
            asked.contains("Kiln Brook") && asked.contains(&saved.revision.to_string()),
            "{asked}"
        );
        page.check_access().await?;
        page.screenshot("kept-ask-360").await?;
        page.tap_test("ask-cancel").await?;
        close_books(page).await?;
        assert_eq!(page.written("field-DesignFlow").await?, "40");
        assert_eq!(
            read(&page.stored_book().await?)?
                .stream
                .design_flow_m3_s
                .text,
            "40"
        );

        // Asked: keep both.
        open_file(page, &file).await?;
        page.tap_test("ask-keep-both").await?;
        page.text_when("title-flow", |text| text.starts_with("31.5"))
            .await?;
        page.until_saved().await?;
        close_books(page).await?;
        let copy = read(&page.stored_book().await?)?;
        assert_ne!(copy.id, saved.id);
        assert_eq!(books(page).await?.len(), 2);

        // Asked: replace.
        open_file(page, &file).await?;
        page.tap_test("ask-replace").await?;
        page.text_when("books", |text| text == "Kiln Brook").await?;
        page.until_saved().await?;
        close_books(page).await?;
        assert_eq!(
            read(&page.stored_book().await?)?
                .stream
                .design_flow_m3_s
                .text,
            "31,5 \u{b1} 2"
        );
        assert_eq!(books(page).await?.len(), 2);
        stands_as_typed(page).await?;
        // It stays so after a restart.
        page.kill();
        page.start().await?;
        page.goto("").await?;
        stands_as_typed(page).await
    });
}

#[test]
fn a_damaged_file_is_refused_in_words() {
    walk("damaged", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        write_all(page).await?;
        let before = page.stored_book().await?;
        let folder = tasks::places::target().join("walks/damaged-files");
        fs::create_dir_all(&folder)?;
        let whole = format::write(&demo::demo("some-other-key"))?;
        let newer = whole.replacen("\"format\": 1", "\"format\": 999", 1);
        assert_ne!(newer, whole);
        let cases: [(&str, Vec<u8>, &str); 5] = [
            (
                "cut",
                whole.as_bytes()[..whole.len() / 2].to_vec(),
                "damaged or cut short",
            ),
            ("newer", newer.into_bytes(), "newer edition"),
            (
                "other",
                b"{\"a\": 1}".to_vec(),
                "not a book of this program",
            ),
            ("bytes", vec![0xff, 0xfe, 0x00, 0x80], "not text"),
            ("none", Vec::new(), "damaged or cut short"),
        ];
        for (name, bytes, words) in cases {
            let file = folder.join(format!("{name}.json"));
            fs::write(&file, bytes)?;
            open_file(page, &file).await?;
            let said = page
                .text_when("notice", |text| text.contains(words))
                .await?;
            // It can be read where the person is: not behind the list of books.
            let seen = page
                .script(
                    "const box = document.querySelector('[data-test=notice] p').getBoundingClientRect();
                     const top = document.elementFromPoint(box.x + box.width / 2, box.y + box.height / 2);
                     return Boolean(top?.closest('[data-test=notice]'));",
                    vec![],
                )
                .await?;
            page.screenshot(&format!("kept-damaged-{name}-360")).await?;
            assert_eq!(seen, true, "{name}: {said:?} lies under something");
            page.tap_test("notice-close").await?;
            close_books(page).await?;
        }
        assert_eq!(page.stored_book().await?, before);
        stands_as_typed(page).await
    });
}

/// The keys of the books that the list shows.
async fn books(page: &Page) -> Result<Vec<String>> {
    page.tap_test("tab-books").await?;
    page.until(
        "the books are listed",
        "return document.querySelector('.books[aria-busy=false] [data-test^=book-open-]') !== null;",
    )
    .await?;
    let found = page
        .script(
            "return [...document.querySelectorAll('[data-test^=book-open-]')]
               .map((one) => one.dataset.test.slice('book-open-'.length));",
            vec![],
        )
        .await?;
    page.tap_test("books-close").await?;
    Ok(serde_json::from_value(found)?)
}

#[test]
fn several_books_stand_side_by_side_and_deleting_asks() {
    walk("several", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        write_all(page).await?;
        let first = read(&page.stored_book().await?)?.id;

        page.open_demo().await?;
        page.text_when("books", |text| text == "Alder Notch")
            .await?;
        let demo = read(&page.stored_book().await?)?.id;
        page.tap_test("tab-books").await?;
        page.tap_test("book-new").await?;
        page.text_when("books", |text| text == "Book without a name")
            .await?;
        page.sheet("stream").await?;
        page.write("text-name", "Third").await?;
        page.until_saved().await?;
        page.tap_test("tab-books").await?;
        // The list is read from the store anew each time it is opened.
        page.until(
            "three books are listed",
            "return document.querySelectorAll('[data-test^=book-open-]').length === 3;",
        )
        .await?;
        page.tap_test("books-close").await?;

        page.tap_test("tab-books").await?;
        page.find_test(&format!("book-{first}")).await?;
        page.check_access().await?;
        page.screenshot("kept-books-360").await?;
        page.tap_test(&format!("book-open-{first}")).await?;
        page.text_when("books", |text| text == "Kiln Brook").await?;
        stands_as_typed(page).await?;

        // Deleting asks by name, can be called off, and takes only what was meant.
        page.tap_test("tab-books").await?;
        page.tap_test(&format!("book-delete-{demo}")).await?;
        let asked = page
            .text_when(&format!("book-{demo}"), |text| {
                text.contains("It cannot be brought back")
            })
            .await?;
        assert!(
            asked.contains("Delete Alder Notch from this device?"),
            "{asked}"
        );
        page.screenshot("kept-delete-360").await?;
        page.tap("button", "Cancel").await?;
        page.tap_test("books-close").await?;
        assert_eq!(books(page).await?.len(), 3);
        page.tap_test("tab-books").await?;
        page.tap_test(&format!("book-delete-{demo}")).await?;
        page.tap_test(&format!("book-delete-sure-{demo}")).await?;
        page.until(
            "the demo is gone from the list",
            &format!("return document.querySelector('[data-test=\"book-{demo}\"]') === null;"),
        )
        .await?;
        page.tap_test("books-close").await?;
        let left = books(page).await?;
        assert_eq!(left.len(), 2);
        assert!(left.contains(&first) && !left.contains(&demo), "{left:?}");

        // The book that was worked on last comes back, not the newest one made.
        page.write("text-place", "by the lane").await?;
        page.until_saved().await?;
        page.kill();
        page.start().await?;
        page.goto("").await?;
        page.text_when("books", |text| text == "Kiln Brook").await?;
        assert_eq!(page.written("text-place").await?, "by the lane");
        let mut again = books(page).await?;
        let mut left = left;
        again.sort();
        left.sort();
        assert_eq!(again, left);
        Ok(())
    });
}
