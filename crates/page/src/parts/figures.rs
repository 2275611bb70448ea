//! Figures with their names; a tap opens the working behind one.

use crate::parts::working;
use crate::state::{State, state};
use leptos::prelude::*;
use workbook::Measure;
use workbook::figure::{Figure, Gap};
use workbook::working::FigureKey;

/// Name of a figure in `data-test`, after `figure-`.
#[must_use]
pub fn slug(key: FigureKey) -> String {
    format!("{key:?}").replace('(', "-").replace(')', "")
}

/// A figure, or a dash: for places where the reason has no room.
#[must_use]
pub fn figure_text(state: State, key: FigureKey) -> String {
    let words = state.words.get();
    state.findings.with(|f| match f.working(key) {
        Ok(w) => words.figure(w.result),
        Err(_) => "\u{2014}".to_owned(),
    })
}

/// What a figure is called, with its place.
#[must_use]
pub fn figure_name(state: State, key: FigureKey) -> String {
    let words = state.words.get();
    state.book.with(|b| words.about(b).figure_name(key))
}

/// The class of a figure that is none.
#[must_use]
pub fn gap_class(gap: &Gap) -> &'static str {
    match gap {
        Gap::Unsettled(_) => "figure is-unsettled",
        Gap::Wrong(_) => "figure is-wrong",
    }
}

/// A list of figures, each with its name, opening its working.
pub fn figures(keys: Vec<FigureKey>) -> AnyView {
    let rows: Vec<AnyView> = keys.into_iter().map(row).collect();
    view! { <dl class="figures">{rows}</dl> }.into_any()
}

fn row(key: FigureKey) -> AnyView {
    let state = state();
    let value: Memo<Figure<Measure>> =
        Memo::new(move |_| state.findings.with(|f| f.working(key).map(|w| w.result)));
    let test = format!("figure-{}", slug(key));
    let name = move || figure_name(state, key);
    let shown = move || {
        let words = state.words.get();
        let test = test.clone();
        match value.get() {
            Ok(measure) => view! {
                <dd>
                    <button
                        type="button"
                        class="figure"
                        data-test=test
                        on:click=move |_| working::open(state, key)
                    >
                        {words.figure(measure)}
                    </button>
                </dd>
            }
            .into_any(),
            Err(gap) => {
                let said = state.book.with(|b| words.about(b).gap(&gap));
                view! {
                    <dd class=gap_class(&gap) data-test=test>
                        {said}
                    </dd>
                }
                .into_any()
            }
        }
    };
    view! {
        <div>
            <dt class="figure-label">{name}</dt>
            {shown}
        </div>
    }
    .into_any()
}

/// A figure that has no working of its own.
pub fn plain_figure(
    test: &'static str,
    name: impl Fn() -> String + Send + 'static,
    value: Signal<Figure<Measure>>,
) -> AnyView {
    let state = state();
    let shown = move || {
        let words = state.words.get();
        match value.get() {
            Ok(measure) => {
                view! { <dd class="figure" data-test=test>{words.figure(measure)}</dd> }.into_any()
            }
            Err(gap) => {
                let said = state.book.with(|b| words.about(b).gap(&gap));
                view! { <dd class=gap_class(&gap) data-test=test>{said}</dd> }.into_any()
            }
        }
    };
    view! {
        <div>
            <dt class="figure-label">{name}</dt>
            {shown}
        </div>
    }
    .into_any()
}
