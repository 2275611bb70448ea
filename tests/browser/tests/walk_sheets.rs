//! Every sheet, with the demo book: usable by everyone, in every theme, on a
//! narrow and on a wide screen, and by keyboard alone.

use walkthrough::{Key, Page, Result, walk};

const SHEETS: [&str; 6] = ["stream", "line", "pipe", "jets", "surge", "print"];
const THEMES: [&str; 3] = ["paper", "outdoor", "dark"];

async fn take_theme(page: &Page, theme: &str) -> Result {
    for _ in THEMES {
        let now = page
            .script("return document.documentElement.className;", vec![])
            .await?;
        if now
            .as_str()
            .is_some_and(|c| c.contains(&format!("theme-{theme}")))
        {
            return Ok(());
        }
        page.tap_test("theme").await?;
    }
    Err(format!("no theme {theme}").into())
}

async fn open(page: &Page, sheet: &str) -> Result {
    page.sheet(sheet).await?;
    if sheet == "pipe" {
        page.until_swept().await?;
    }
    Ok(())
}

/// The head of the table of pipes stands right above its first row.
async fn look_at_table(page: &Page) -> Result {
    let gap = page
        .script(
            "const table = document.querySelector('[data-test=sweep-table]');
             table.scrollIntoView({ block: 'center', behavior: 'instant' });
             window.scrollTo(0, window.scrollY + table.getBoundingClientRect().top - 400);
             return table.tHead.getBoundingClientRect().height;",
            vec![],
        )
        .await?;
    page.screenshot("sheet-pipe-table-360").await?;
    let gap = gap.as_f64().unwrap_or(f64::INFINITY);
    assert!(gap < 160.0, "the head of the table is {gap} px high");
    Ok(())
}

#[test]
fn every_sheet_is_accessible_in_every_theme_and_fits_a_phone() {
    walk("sheets", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.open_demo().await?;
        let mut found = Vec::new();
        for theme in THEMES {
            take_theme(page, theme).await?;
            for sheet in SHEETS {
                open(page, sheet).await?;
                if let Err(trouble) = page.check_access().await {
                    found.push(format!("{sheet}, {theme}, 360: {trouble}"));
                }
                if let Err(trouble) = page.check_narrow().await {
                    found.push(format!("{sheet}, {theme}: {trouble}"));
                }
                let mark = if theme == "paper" {
                    String::new()
                } else {
                    format!("-{theme}")
                };
                page.script("window.scrollTo(0, 0);", vec![]).await?;
                page.screenshot(&format!("sheet-{sheet}{mark}-360")).await?;
                if sheet == "pipe" && theme == "paper" {
                    look_at_table(page).await?;
                }
                if theme == "paper" {
                    page.screenshot_whole(&format!("sheet-{sheet}-360-whole"))
                        .await?;
                }
            }
        }
        assert!(found.is_empty(), "{}", found.join("\n\n"));
        Ok(())
    });
}

#[test]
fn every_sheet_is_accessible_on_a_wide_screen() {
    walk("sheets-wide", async |page| {
        page.viewport(1280, 800).await?;
        page.goto("").await?;
        page.open_demo().await?;
        let mut found = Vec::new();
        for sheet in SHEETS {
            open(page, sheet).await?;
            if let Err(trouble) = page.check_access().await {
                found.push(format!("{sheet}, 1280: {trouble}"));
            }
            let wide = page
                .script(
                    "return document.documentElement.scrollWidth > window.innerWidth;",
                    vec![],
                )
                .await?;
            if wide == true {
                found.push(format!("{sheet} scrolls sideways at 1280"));
            }
            page.screenshot(&format!("sheet-{sheet}-1280")).await?;
        }
        assert!(found.is_empty(), "{}", found.join("\n\n"));
        Ok(())
    });
}

#[test]
fn an_empty_book_is_accessible_too() {
    walk("sheets-empty", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        let mut found = Vec::new();
        for sheet in SHEETS {
            page.sheet(sheet).await?;
            if let Err(trouble) = page.check_access().await {
                found.push(format!("{sheet}, empty: {trouble}"));
            }
            if let Err(trouble) = page.check_narrow().await {
                found.push(format!("{sheet}, empty: {trouble}"));
            }
            page.screenshot(&format!("empty-{sheet}-360")).await?;
        }
        assert!(found.is_empty(), "{}", found.join("\n\n"));
        Ok(())
    });
}

/// Marks every control that Tab should reach, and returns how many there are.
/// Of radio buttons with one name, the browser stops at one.
const MARK: &str = "
    const shown = (one) => one.checkVisibility({ visibilityProperty: true });
    const all = [...document.querySelectorAll(
      '#sheet :is(a[href], button, input, select, textarea, summary, [tabindex=\"0\"])')]
      .filter((one) => !one.disabled && one.tabIndex >= 0 && shown(one));
    const groups = new Set();
    let count = 0;
    for (const one of all) {
      if (one.type === 'radio') {
        if (groups.has(one.name)) continue;
        groups.add(one.name);
        document.getElementsByName(one.name).forEach((each) => each.dataset.walk = 'r' + one.name);
      } else {
        one.dataset.walk = String(count);
      }
      count += 1;
    }
    return count;";

/// What has the focus: its mark, and what is wrong with how it shows.
const LOOK: &str = "
    const one = document.activeElement;
    if (!one || one === document.body) return ['', ''];
    // The ring is on the element itself, on what is drawn in its place, or on its line.
    const ringed = (each) => {
      if (!each) return false;
      const style = getComputedStyle(each);
      return (style.outlineStyle !== 'none' && parseFloat(style.outlineWidth) >= 2)
        || style.boxShadow !== 'none';
    };
    const near = [one, one.nextElementSibling, one.parentElement, one.closest('.field-line')];
    let trouble = near.some(ringed) ? '' : 'shows no focus: ' + one.outerHTML.slice(0, 160);
    const drawn = one.type === 'radio' ? one.closest('label') : one;
    const box = drawn.getBoundingClientRect();
    // At least a part of it can be seen: its middle, or a point near an end.
    const seen = [0.5, 0.1, 0.9].some((share) => {
      const x = box.x + box.width * share, y = box.y + Math.min(box.height, 40) / 2;
      const top = document.elementFromPoint(x, y);
      return top && (drawn.contains(top) || top.contains(drawn));
    });
    if (!seen) {
      const over = document.elementFromPoint(box.x + box.width / 2, box.y + 10);
      trouble += ' is hidden with the focus at ' + Math.round(box.y) + ' px under '
        + (over?.closest('[class]')?.outerHTML.slice(0, 60) ?? 'the edge') + ': '
        + one.outerHTML.slice(0, 160);
    }
    return [one.dataset.walk ?? '', trouble];";

async fn tab_through(page: &Page, sheet: &str) -> Result<Vec<String>> {
    open(page, sheet).await?;
    // What is folded away has controls too.
    page.script(
        "document.querySelectorAll('#sheet details').forEach((fold) => { fold.open = true; });
         document.getElementById('sheet').focus();",
        vec![],
    )
    .await?;
    let count = page.script(MARK, vec![]).await?.as_u64().unwrap_or(0);
    assert!(count > 3, "{count} controls on {sheet}");
    let mut reached = std::collections::BTreeSet::new();
    let mut found = Vec::new();
    for _ in 0..count + 12 {
        page.press(Key::Tab).await?;
        let look = page.script(LOOK, vec![]).await?;
        let (mark, trouble): (String, String) = serde_json::from_value(look)?;
        if !mark.is_empty() {
            reached.insert(mark);
            if !trouble.is_empty() {
                found.push(format!("{sheet}: {trouble}"));
            }
        }
    }
    let missed = page
        .script(
            "return [...document.querySelectorAll('[data-walk]')]
               .filter((one) => !arguments[0].includes(one.dataset.walk))
               .map((one) => one.outerHTML.slice(0, 160));",
            vec![serde_json::json!(reached)],
        )
        .await?;
    let missed: Vec<String> = serde_json::from_value(missed)?;
    found.extend(
        missed
            .into_iter()
            .map(|one| format!("{sheet}: Tab never reaches {one}")),
    );
    Ok(found)
}

#[test]
fn the_keyboard_reaches_every_control_and_shows_where_it_is() {
    walk("keyboard", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.open_demo().await?;
        let mut found = Vec::new();
        for sheet in ["line", "stream", "jets", "print"] {
            found.extend(tab_through(page, sheet).await?);
        }
        page.viewport(1280, 800).await?;
        found.extend(tab_through(page, "line").await?);
        assert!(found.is_empty(), "{}", found.join("\n"));
        Ok(())
    });
}

#[test]
fn enter_in_the_last_station_adds_one() {
    walk("enter", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.open_demo().await?;
        page.sheet("line").await?;
        page.tap_test("field-StationLevel-15").await?;
        page.press(Key::Enter).await?;
        page.until(
            "the new station has the focus",
            "return document.activeElement?.id === 'field-StationDistance-16';",
        )
        .await?;
        page.screenshot("enter-station-360").await?;
        // Escape takes back what was typed in this visit.
        page.find_test("field-StationDistance-16")
            .await?
            .send_keys("400")
            .await?;
        page.press(Key::Escape).await?;
        assert_eq!(page.written("field-StationDistance-16").await?, "");
        page.tap_test("undo").await?;
        page.until(
            "the station is gone again",
            "return document.querySelectorAll('[data-test=station-table] tbody tr').length === 15;",
        )
        .await
    });
}
