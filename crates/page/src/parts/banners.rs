//! Lines about the program itself: what was done, what went wrong with the
//! store, a newer edition.

use crate::keeping::{Saved, store_trouble};
use crate::parts::books;
use crate::platform::update;
use crate::state::state;
use leptos::prelude::*;
use words::Key;

/// All of them, under the title block.
#[component]
pub fn Banners() -> impl IntoView {
    let state = state();
    let say = move |key: Key| move || state.words.get().say(key);
    let not_kept = move || match state.saved.get() {
        Saved::Not(why) => Some(store_trouble(state.words.get(), &why)),
        _ => None,
    };
    view! {
        {move || {
            not_kept()
                .map(|text| {
                    view! {
                        <div class="banner" role="alert" data-test="banner-not-saved">
                            <p>{text}</p>
                            <button
                                type="button"
                                class="button"
                                on:click=move |_| books::save_file(state)
                            >
                                {say(Key::DO_SAVE_FILE)}
                            </button>
                        </div>
                    }
                })
        }}
        {move || {
            state
                .notice
                .get()
                .map(|notice| {
                    view! {
                        <div
                            class="banner"
                            role=if notice.trouble { "alert" } else { "status" }
                            data-test="notice"
                        >
                            <p>{notice.text}</p>
                            <button
                                type="button"
                                class="button-quiet"
                                data-test="notice-close"
                                on:click=move |_| state.notice.set(None)
                            >
                                {say(Key::DO_CLOSE)}
                            </button>
                        </div>
                    }
                })
        }}
        <Show when=move || state.update.get()>
            <div class="banner" role="status" data-test="update">
                <p>{say(Key::STATE_UPDATE_READY)}</p>
                <button
                    type="button"
                    class="button button-strong"
                    data-test="update-accept"
                    on:click=|_| update::accept()
                >
                    {say(Key::DO_RELOAD)}
                </button>
                <button
                    type="button"
                    class="button-quiet"
                    data-test="update-later"
                    on:click=move |_| state.update.set(false)
                >
                    {say(Key::DO_LATER)}
                </button>
            </div>
        </Show>
    }
}
