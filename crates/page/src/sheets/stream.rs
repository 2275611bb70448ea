//! Stream: design flow, title block, climate, units and language.

use crate::inputs::choice::choice_of;
use crate::inputs::{NumberField, TextLook, choice, text_field};
use crate::parts::books;
use crate::parts::cautions::cautions;
use crate::platform::clock;
use crate::sheets::{head, part};
use crate::state::{State, state};
use leptos::prelude::*;
use words::Key;
use words::language::Language;
use workbook::Field;
use workbook::caution::Sheet;
use workbook::units::UnitSystem;

const UNITS: [(UnitSystem, &str, Key); 2] = [
    (UnitSystem::Metric, "metric", Key::SETTING_METRIC_LONG),
    (UnitSystem::UsCustomary, "us", Key::SETTING_US_LONG),
];

const LANGUAGES: [(Language, &str, Key); 2] = [
    (Language::English, "en", Key::PAGE_ENGLISH),
    (Language::Spanish, "es", Key::PAGE_SPANISH),
];

/// Whether this is an empty book that nothing was done to.
fn is_untouched(state: State) -> bool {
    state.book.with(|b| b.revision == 0 && !b.invented)
}

/// The sheet.
#[component]
pub fn StreamSheet() -> impl IntoView {
    let state = state();
    let climate = [
        Field::Altitude,
        Field::ColdestWater,
        Field::WarmestWater,
        Field::WarmestWall,
        Field::ColdestWall,
    ]
    .map(|field| view! { <NumberField field=field/> });
    let site = view! {
        <div class="fields">
            {text_field(
                "name",
                Key::FIELD_SITE_NAME,
                TextLook::default(),
                |b| b.site.name.clone(),
                |b, t| b.site.name = t,
            )}
            {text_field(
                "place",
                Key::FIELD_SITE_PLACE,
                TextLook::default(),
                |b| b.site.place.clone(),
                |b, t| b.site.place = t,
            )}
            {text_field(
                "client",
                Key::FIELD_SITE_CLIENT,
                TextLook::default(),
                |b| b.site.client.clone(),
                |b, t| b.site.client = t,
            )}
            {text_field(
                "prepared",
                Key::FIELD_SITE_PREPARED,
                TextLook::default(),
                |b| b.site.prepared_by.clone(),
                |b, t| b.site.prepared_by = t,
            )}
            {text_field(
                "date",
                Key::FIELD_SITE_DATE,
                TextLook { short: true, ..TextLook::default() },
                |b| b.site.date.clone(),
                |b, t| b.site.date = t,
            )}
            {text_field(
                "note",
                Key::FIELD_SITE_NOTE,
                TextLook { long: true, ..TextLook::default() },
                |b| b.site.note.clone(),
                |b, t| b.site.note = t,
            )}
        </div>
        <Show when=move || state.book.with(|b| b.site.date.is_empty())>
            <div class="buttons">
                <button
                    type="button"
                    class="button-quiet"
                    data-test="today"
                    on:click=move |_| state.act(|b| b.site.date = clock::today())
                >
                    {move || state.words.get().say(Key::PAGE_TODAY)}
                </button>
            </div>
        </Show>
    }
    .into_any();
    let settings = view! {
        <div class="fields">
            {choice("units", Key::SETTING_UNITS, &UNITS, |b| b.units, |b, u| b.units = u)}
            {choice_of(
                state,
                "language",
                Key::SETTING_LANGUAGE,
                &LANGUAGES,
                state.language.into(),
                move |l| state.speak(l),
            )}
        </div>
    }
    .into_any();
    view! {
        {head(Key::SHEET_STREAM, Key::PAGE_ABOUT_STREAM)}
        <Show when=move || is_untouched(state)>
            <div class="buttons" data-test="first-start">
                <button
                    type="button"
                    class="button"
                    data-test="first-demo"
                    on:click=move |_| books::open_demo(state)
                >
                    {move || state.words.get().say(Key::DO_DEMO_BOOK)}
                </button>
                <button
                    type="button"
                    class="button"
                    data-test="first-file"
                    on:click=move |_| books::pick_file()
                >
                    {move || state.words.get().say(Key::DO_OPEN_FILE)}
                </button>
            </div>
        </Show>
        <div class="fields fields-one">
            <NumberField field=Field::DesignFlow doubt=true/>
        </div>
        {part("site", Key::FIGURE_SITE, site)}
        {part(
            "climate",
            Key::LINE_CLIMATE,
            view! { <div class="fields">{climate}</div> }.into_any(),
        )}
        {part("settings", Key::SETTING_TITLE, settings)}
        {cautions(Sheet::Stream)}
    }
}
