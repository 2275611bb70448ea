//! The working behind a figure: formula, numbers put in, source.

use crate::platform::place;
use crate::state::{State, state};
use leptos::prelude::*;
use words::Key;
use workbook::working::FigureKey;

const DIALOG: &str = "working";

/// Opens the working of a figure.
pub fn open(state: State, key: FigureKey) {
    state.working.set(Some(key));
    place::open_dialog(DIALOG);
}

/// The dialog; there is one, on every sheet.
#[component]
pub fn WorkingDialog() -> impl IntoView {
    let state = state();
    let say = move |key: Key| move || state.words.get().say(key);
    let name = move || {
        let words = state.words.get();
        state
            .working
            .get()
            .map(|key| state.book.with(|b| words.about(b).figure_name(key)))
            .unwrap_or_default()
    };
    view! {
        <dialog
            id=DIALOG
            aria-labelledby="working-head"
            data-test="working"
            on:close=move |_| state.working.set(None)
        >
            <div class="dialog-head">
                <h2 id="working-head">{name}</h2>
                <button
                    type="button"
                    class="button-quiet"
                    data-test="working-close"
                    on:click=|_| place::close_dialog(DIALOG)
                >
                    {say(Key::DO_CLOSE)}
                </button>
            </div>
            <div class="dialog-body">{move || body(state)}</div>
        </dialog>
    }
}

fn body(state: State) -> Option<AnyView> {
    let key = state.working.get()?;
    let words = state.words.get();
    let working = state.findings.with(|f| f.working(key));
    let working = match working {
        Ok(working) => working,
        Err(gap) => {
            let said = state.book.with(|b| words.about(b).gap(&gap));
            return Some(view! { <p>{said}</p> }.into_any());
        }
    };
    let inputs: Vec<AnyView> = working
        .inputs
        .iter()
        .map(|input| {
            view! {
                <tr>
                    <th scope="row">{input.symbol}</th>
                    <td>{words.term(input.term)}</td>
                    <td class="num">{words.input(input)}</td>
                </tr>
            }
            .into_any()
        })
        .collect();
    let sources: Vec<AnyView> = working
        .sources
        .iter()
        .map(|s| view! { <li>{s.clone()}</li> }.into_any())
        .collect();
    Some(
        view! {
            <div class="working">
                <p class="working-formula" data-test="working-formula">{working.formula}</p>
                <table class="table">
                    <caption class="visually-hidden">{words.say(Key::WORKING_INPUTS)}</caption>
                    <thead>
                        <tr>
                            <th scope="col">{words.say(Key::PAGE_SYMBOL)}</th>
                            <th scope="col">{words.say(Key::WORKING_INPUT)}</th>
                            <th scope="col" class="num">{words.say(Key::WORKING_VALUE)}</th>
                        </tr>
                    </thead>
                    <tbody>{inputs}</tbody>
                </table>
                <p>
                    {words.say(Key::WORKING_RESULT)} " "
                    <strong class="num" data-test="working-result">
                        {words.full(working.result)}
                    </strong>
                </p>
                <div class="working-source">
                    <p>{words.say(Key::WORKING_SOURCE)}</p>
                    <ul>{sources}</ul>
                </div>
            </div>
        }
        .into_any(),
    )
}
