//! Starts the page in the browser.

use leptos::prelude::*;

fn main() {
    console_error_panic_hook::set_once();
    mount_to_body(|| {
        view! {
            <main>
                <h1>"Fallwright"</h1>
            </main>
        }
    });
}
