//! Verdicts: mark, word, place and the figure that decides, in one sentence.

use crate::drawing::verdict_mark::{VIEW_BOX, verdict_mark};
use crate::parts::line_drawing::mark;
use crate::speak;
use crate::state::{State, state};
use leptos::prelude::*;
use workbook::book::Id;
use workbook::verdict::{StretchVerdict, Verdict};

/// Class of a verdict, and its name in `data-verdict`.
#[must_use]
pub fn slug(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::Holds => "holds",
        Verdict::Tight => "tight",
        Verdict::Unsettled => "unsettled",
        Verdict::Fails => "fails",
    }
}

/// The mark of a verdict: a picture beside its word, which says it.
#[must_use]
pub fn mark_svg(verdict: Verdict, share: Option<f64>) -> AnyView {
    view! {
        <svg
            class="verdict-mark"
            viewBox=VIEW_BOX
            aria-hidden="true"
            inner_html=verdict_mark(mark(verdict), share)
        ></svg>
    }
    .into_any()
}

/// The share the deciding check uses.
#[must_use]
pub fn share_of(verdict: &StretchVerdict) -> Option<f64> {
    verdict.deciding_check().and_then(|c| c.share)
}

/// The verdict of the line: that of its worst stretch.
#[must_use]
pub fn worst(state: State) -> Option<StretchVerdict> {
    state.findings.with(|f| {
        f.judged
            .stretches
            .iter()
            .rev()
            .max_by_key(|v| v.verdict)
            .cloned()
    })
}

/// The verdict line of a stretch, with every check below it.
pub fn verdict_line(stretch: Id) -> AnyView {
    let state = state();
    let found = Memo::new(move |_| {
        state.findings.with(|f| {
            f.judged
                .stretches
                .iter()
                .find(|v| v.stretch == stretch)
                .cloned()
        })
    });
    (move || {
        let found = found.get()?;
        let words = state.words.get();
        let book = state.book.get();
        let findings = state.findings.get();
        let class = format!("verdict is-{}", slug(found.verdict));
        let (lead, rest) = speak::stretch_verdict(words, &book, &findings, &found);
        // One stretch at a time shows all it was checked for.
        let looked_at =
            state.stretch.get() == Some(stretch) || findings.judged.stretches.len() == 1;
        let mut told = Vec::new();
        let checks: Vec<AnyView> = found
            .checks
            .iter()
            .filter(|_| looked_at)
            .filter_map(|check| {
                let said = words.about(&book).check(check);
                // Several checks may want for the same thing.
                if told.contains(&said) {
                    return None;
                }
                told.push(said.clone());
                let line = view! {
                    <span class="verdict-more" data-verdict=slug(check.verdict)>
                        {said}
                    </span>
                }
                .into_any();
                Some(line)
            })
            .collect();
        Some(view! {
            <div
                class=class
                data-test=format!("verdict-{stretch}")
                data-verdict=slug(found.verdict)
            >
                {mark_svg(found.verdict, share_of(&found))}
                <div>
                    <p>
                        <span class="verdict-word">{lead}</span>
                        " "
                        {rest}
                    </p>
                    {checks}
                </div>
            </div>
        })
    })
    .into_any()
}
