//! Where the pressure runs through the class of a stretch, and the cut that
//! mends it, in one tap.

use crate::edits::pipes::choose;
use crate::state::{State, state};
use leptos::prelude::*;
use words::Key;
use workbook::book::Id;
use workbook::cut::{self, Proposal};

/// Every stretch whose pipe is not enough all along.
pub(super) fn cuts() -> AnyView {
    let state = state();
    let proposals = Memo::new(move |_| {
        state.findings.with(|f| {
            cut::proposals(f)
                .into_iter()
                .filter_map(|(id, p)| p.ok().map(|p| (id, p)))
                .filter(|(_, p)| *p != Proposal::Enough)
                .collect::<Vec<_>>()
        })
    });
    view! {
        <Show when=move || !proposals.with(Vec::is_empty)>
            <div class="caution" data-test="cuts">
                <strong>{move || state.words.get().say(Key::CUT_TITLE)}</strong>
                {move || {
                    proposals
                        .get()
                        .into_iter()
                        .map(|(id, proposal)| one(state, id, proposal))
                        .collect_view()
                }}
            </div>
        </Show>
    }
    .into_any()
}

fn one(state: State, id: Id, proposal: Proposal) -> AnyView {
    let said = {
        let proposal = proposal.clone();
        move || {
            let words = state.words.get();
            state.book.with(|b| words.about(b).proposal(id, &proposal))
        }
    };
    let can = matches!(proposal, Proposal::Cut(_) | Proposal::AllAlong { .. });
    let take = move |_| match &proposal {
        Proposal::Cut(cut) => {
            let findings = state.findings.get_untracked();
            let mut made = None;
            state.act(|b| made = cut::apply(b, &findings, cut));
            if made.is_some() {
                state.stretch.set(made);
            }
        }
        Proposal::AllAlong { pipe } => state.act(|b| {
            choose(b, pipe, Some(id));
        }),
        _ => {}
    };
    view! {
        <p>{said}</p>
        {can
            .then(|| {
                view! {
                    <div class="buttons">
                        <button
                            type="button"
                            class="button"
                            data-test=format!("cut-take-{id}")
                            on:click=take
                        >
                            {move || state.words.get().say(Key::CUT_TAKE)}
                        </button>
                    </div>
                }
            })}
    }
    .into_any()
}
