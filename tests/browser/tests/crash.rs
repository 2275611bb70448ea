//! The browser killed while it saves, over and over: what was said to be saved
//! is there again, whole, and the book can always be read.
//!
//! A few times with every change; `cargo task proof crash` asks for many by
//! `FALLWRIGHT_KILLS`.

use walkthrough::walk;
use workbook::format;

/// Kills with every change.
const FEW: usize = 3;
/// Kills of one profile; each walk has an end of its own.
const OF_ONE_PROFILE: usize = 10;
const FIELD: &str = "text-place";

fn kills() -> usize {
    std::env::var("FALLWRIGHT_KILLS")
        .ok()
        .and_then(|text| text.parse().ok())
        .unwrap_or(FEW)
}

#[test]
fn what_was_saved_outlives_every_kill() {
    let kills = kills();
    for first in (0..kills).step_by(OF_ONE_PROFILE) {
        let last = (first + OF_ONE_PROFILE).min(kills);
        walk(&format!("crash-{first}"), async |page| {
            page.viewport(360, 800).await?;
            page.goto("").await?;
            for kill in first..last {
                page.sheet("stream").await?;
                let saved = format!("saved {kill}");
                page.write(FIELD, &saved).await?;
                page.until_saved().await?;
                // Written, and killed before anything was said of it.
                let later = format!("later {kill}");
                page.write(FIELD, &later).await?;
                page.kill();

                page.start().await?;
                page.goto("").await?;
                page.sheet("stream").await?;
                let found = page.written(FIELD).await?;
                // Key by key it was on its way: any of it may have been kept,
                // but nothing older than what was said to be saved.
                assert!(
                    found == saved || later.starts_with(&found),
                    "kill {kill}: {found:?} after {saved:?} was saved and {later:?} begun"
                );
                let json = page.stored_book().await?;
                let book = format::read(json.as_bytes())
                    .map_err(|trouble| format!("kill {kill}: {trouble}: {json}"))?;
                assert!(!book.site.place.starts_with("saved") || book.site.place == saved);
            }
            Ok(())
        });
    }
}
