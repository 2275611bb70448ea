//! The sweep as a table: filtered, ordered, chosen from with a tap.

use crate::edits::pipes::choose;
use crate::inputs::choice::choice_of;
use crate::inputs::picker;
use crate::parts::verdicts::{mark_svg, share_of, slug as verdict_slug};
use crate::slug;
use crate::speak;
use crate::state::State;
use crate::sweep_table::{COLUMNS, Column, NARROW, collapse_share, held_back, shown};
use leptos::prelude::*;
use pipes::Material;
use words::{Key, Words, capital, text};
use workbook::Measure;
use workbook::figure::Figure;
use workbook::sweep::Row;
use workbook::units::Kind;
use workbook::verdict::Verdict;

/// Rows drawn at first: what a phone draws at once.
const FIRST_ROWS: usize = 40;

/// The cap on the loss, where it can be had.
pub(super) fn cap_of(state: State) -> Option<f64> {
    state
        .findings
        .with(|f| f.resolved.limits.as_ref().ok().map(|l| l.loss_cap))
}

/// Pipes of the selected stretch, or of the whole line.
pub(super) fn chosen_pipes(state: State) -> Vec<String> {
    let selected = state.stretch.get();
    state.book.with(|b| {
        b.line
            .stretches
            .iter()
            .filter(|s| selected.is_none_or(|id| id == s.id))
            .filter_map(|s| s.pipe.clone())
            .collect()
    })
}

/// Name of a column, with its unit.
fn column(words: Words, column: Column) -> (String, &'static str) {
    let (key, kind) = match column {
        Column::Pipe => (Key::SWEEP_COLUMN_PIPE, None),
        Column::Bore => (Key::SWEEP_COLUMN_BORE, Some(Kind::Bore)),
        Column::Velocity => (Key::SWEEP_COLUMN_VELOCITY, Some(Kind::Velocity)),
        Column::Loss => (Key::SWEEP_COLUMN_LOSS, Some(Kind::Head)),
        Column::LossShare => (Key::SWEEP_COLUMN_LOSS_SHARE, Some(Kind::Share)),
        Column::NetHead => (Key::SWEEP_COLUMN_NET, Some(Kind::Head)),
        Column::Power => (Key::SWEEP_COLUMN_POWER, Some(Kind::Power)),
        Column::Standing => (Key::SWEEP_COLUMN_STATIC, Some(Kind::Pressure)),
        Column::Quick => (Key::SWEEP_COLUMN_SURGE, Some(Kind::Head)),
        Column::Share => (Key::SWEEP_COLUMN_SHARE, Some(Kind::Share)),
        Column::Collapse => (Key::SWEEP_COLUMN_COLLAPSE, Some(Kind::Share)),
        Column::Verdict => (Key::SWEEP_COLUMN_VERDICT, None),
    };
    (
        words.say(key).to_owned(),
        kind.map_or("", |k| words.unit(k)),
    )
}

fn cell(words: Words, row: &Row, column: Column) -> Option<String> {
    fn of<T: Copy + Into<Measure>>(words: Words, figure: &Figure<T>) -> Option<String> {
        figure.as_ref().ok().map(|x| words.value(*x))
    }
    let share = |s: Option<f64>| s.map(|s| words.value(Measure::share(s)));
    match column {
        Column::Pipe | Column::Verdict => None,
        Column::Bore => Some(words.value(Measure::bore(row.bore))),
        Column::Velocity => of(words, &row.velocity),
        Column::Loss => of(words, &row.loss),
        Column::LossShare => share(row.loss_share.as_ref().ok().copied()),
        Column::NetHead => of(words, &row.net_head),
        Column::Power => of(words, &row.power),
        Column::Standing => of(words, &row.standing),
        Column::Quick => of(words, &row.quick_rise),
        Column::Share => share(row.share.as_ref().ok().copied()),
        Column::Collapse => share(collapse_share(row)),
    }
}

/// A row read out, for the point that is touched.
pub(super) fn read_row(words: Words, row: &Row) -> String {
    let mut said = vec![row.short.clone()];
    for c in [
        Column::Bore,
        Column::Velocity,
        Column::LossShare,
        Column::Share,
    ] {
        if let Some(value) = cell(words, row, c) {
            let (name, unit) = column(words, c);
            said.push(format!("{name} {value}\u{202f}{unit}"));
        }
    }
    said.push(words.verdict(row.verdict.verdict).to_owned());
    said.join(" · ")
}

/// What to show, and for which stretch a tap chooses.
pub(super) fn controls(state: State) -> AnyView {
    let say = move |key: Key| move || state.words.get().say(key);
    let materials = Signal::derive(move || {
        let words = state.words.get();
        let mut all = vec![(String::new(), words.say(Key::MATERIAL_ALL).to_owned())];
        for m in Material::ALL {
            let any = state.rows.with(|rows| rows.iter().any(|r| r.material == m));
            if any {
                all.push((m.slug().to_owned(), words.name(m).to_owned()));
            }
        }
        all
    });
    let material = Signal::derive(move || {
        state
            .filter
            .get()
            .material
            .map_or_else(String::new, |m| m.slug().to_owned())
    });
    let target = move || {
        let words = state.words.get();
        match state.stretch.get() {
            None => words.say(Key::SWEEP_FOR_LINE).to_owned(),
            Some(id) => {
                let book = state.book.get();
                let name = speak::stretch(words, &book, &state.findings.get(), id);
                text::sweep_for_stretch(words, &name)
            }
        }
    };
    let progress = move || {
        let words = state.words.get();
        state.sweeping.get().map(|p| {
            let (done, all) = (words.count(p.done), words.count(p.all));
            text::sweep_running(words, &done, &all)
        })
    };
    let fit = [
        (true, "fit", Key::PAGE_FIT_ONLY),
        (false, "all", Key::PAGE_ALL_PIPES),
    ];
    view! {
        <div class="fields">
            {picker(
                "sweep-material",
                Signal::derive(move || say(Key::SWEEP_FILTER)().to_owned()),
                materials,
                material,
                move |value| {
                    state.filter.update(|f| f.material = Material::from_slug(&value));
                },
            )}
            {choice_of(
                state,
                "sweep-fit",
                Key::PAGE_SHOW,
                &fit,
                Signal::derive(move || state.filter.get().fit_only),
                move |v| state.filter.update(|f| f.fit_only = v),
            )}
        </div>
        <p data-test="sweep-target">
            {target} " "
            <Show when=move || state.stretch.get().is_some()>
                <button
                    type="button"
                    class="button-quiet"
                    data-test="sweep-whole-line"
                    on:click=move |_| state.stretch.set(None)
                >
                    {say(Key::PAGE_CHOOSE_FOR_LINE)}
                </button>
            </Show>
        </p>
        <p class="quiet" role="status" data-test="sweep-progress">{progress}</p>
    }
    .into_any()
}

/// The table.
pub(super) fn table(state: State) -> AnyView {
    let say = move |key: Key| move || state.words.get().say(key);
    let all = RwSignal::new(false);
    let places = Memo::new(move |_| {
        let filter = state.filter.get();
        let cap = cap_of(state);
        let chosen = chosen_pipes(state);
        state.rows.with(|rows| shown(rows, filter, cap, &chosen))
    });
    let back = move || {
        let (filter, cap, chosen) = (state.filter.get(), cap_of(state), chosen_pipes(state));
        let count = state
            .rows
            .with(|rows| held_back(rows, filter, cap, &chosen));
        (count > 0).then(|| text::sweep_from_memory(state.words.get(), count))
    };
    let in_view = move || {
        let most = if all.get() { usize::MAX } else { FIRST_ROWS };
        places.with(|p| p.iter().copied().take(most).collect::<Vec<_>>())
    };
    let heads: Vec<AnyView> = COLUMNS.into_iter().map(|c| column_head(state, c)).collect();
    let rows = move || {
        let words = state.words.get();
        let chosen = chosen_pipes(state);
        let visible = in_view();
        state.rows.with(|rows| {
            visible
                .into_iter()
                .filter_map(|i| rows.get(i))
                .map(|r| row(state, words, r, chosen.contains(&r.pipe)))
                .collect_view()
        })
    };
    let count = move || text::sweep_pipes(state.words.get(), places.with(Vec::len));
    view! {
        <p class="quiet" data-test="sweep-count">{count}</p>
        <p class="quiet" data-test="sweep-memory">{back}</p>
        <div
            class="table-scroll"
            tabindex="0"
            role="region"
            aria-label=count
        >
            <table
                class="table table-rows"
                data-test="sweep-table"
                aria-busy=move || if state.sweeping.with(Option::is_some) { "true" } else { "false" }
            >
                <thead>
                    <tr>
                        {heads} <th scope="col" class="wide-only">{say(Key::SWEEP_WHY)}</th>
                    </tr>
                </thead>
                <tbody>{rows}</tbody>
            </table>
        </div>
        <Show when=move || !all.get() && places.with(|p| p.len() > FIRST_ROWS)>
            <div class="buttons">
                <button
                    type="button"
                    class="button"
                    data-test="sweep-all"
                    on:click=move |_| all.set(true)
                >
                    {say(Key::DO_SHOW_ALL)}
                </button>
            </div>
        </Show>
    }
    .into_any()
}

fn column_head(state: State, c: Column) -> AnyView {
    let sorted = move || {
        let filter = state.filter.get();
        (filter.by == c).then_some(if filter.down {
            "descending"
        } else {
            "ascending"
        })
    };
    let name = move || {
        let (name, unit) = column(state.words.get(), c);
        if unit.is_empty() {
            name
        } else {
            format!("{name} {unit}")
        }
    };
    view! {
        <th
            scope="col"
            class:num=!matches!(c, Column::Pipe | Column::Verdict)
            class:wide-only=!COLUMNS[..NARROW].contains(&c)
            aria-sort=sorted
        >
            <button
                type="button"
                class="button-quiet"
                data-test=format!("sort-{c:?}")
                aria-label=move || text::sweep_sort(state.words.get(), &name())
                on:click=move |_| state.filter.update(|f| *f = f.ordered(c))
            >
                {name}
            </button>
        </th>
    }
    .into_any()
}

fn row(state: State, words: Words, row: &Row, chosen: bool) -> AnyView {
    let pipe = row.pipe.clone();
    let take = move |_| {
        let stretch = state.stretch.get_untracked();
        state.act(|b| {
            choose(b, &pipe, stretch);
        });
    };
    let verdict = row.verdict.verdict;
    let why = {
        let book = state.book.get_untracked();
        row.verdict
            .deciding_check()
            .map(|c| words.about(&book).check(c))
            .unwrap_or_default()
    };
    let share = share_of(&row.verdict);
    let cells: Vec<AnyView> = COLUMNS
        .into_iter()
        .enumerate()
        .filter(|(_, c)| *c != Column::Pipe)
        .map(|(i, c)| {
            if c == Column::Verdict {
                return verdict_cell(words, verdict, share);
            }
            let value = cell(words, row, c).unwrap_or_else(speak::none);
            let class = if i < NARROW { "num" } else { "num wide-only" };
            view! { <td class=class>{value}</td> }.into_any()
        })
        .collect();
    // On a phone: what fails says why, the others what else they come to.
    let rest = if verdict == Verdict::Fails {
        capital(&why)
    } else {
        rest_of(words, row)
    };
    let test = slug::pipe(&row.pipe);
    view! {
        <tr class:chosen=chosen data-test=format!("row-{test}")>
            <th scope="row">
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("choose-{test}")
                    aria-pressed=if chosen { "true" } else { "false" }
                    on:click=take
                >
                    {row.short.clone()}
                </button>
                {(!row.seen)
                    .then(|| {
                        view! { <span class="marked">{words.say(Key::SCHEDULE_FROM_MEMORY)}</span> }
                    })}
            </th>
            {cells}
            <td class="wide-only">
                <p class="table-why">{why}</p>
            </td>
        </tr>
        <tr class="table-rest" class:chosen=chosen>
            <td colspan=NARROW.to_string()>{rest}</td>
        </tr>
    }
    .into_any()
}

/// What the columns hold that a phone has no room for.
fn rest_of(words: Words, row: &Row) -> String {
    let said: Vec<String> = [Column::Velocity, Column::NetHead, Column::Quick]
        .into_iter()
        .filter_map(|c| {
            let value = cell(words, row, c)?;
            let (name, unit) = column(words, c);
            Some(match c {
                Column::Velocity => format!("{value}\u{202f}{unit}"),
                _ => format!("{} {value}\u{202f}{unit}", name.to_lowercase()),
            })
        })
        .collect();
    said.join(" · ")
}

fn verdict_cell(words: Words, verdict: Verdict, share: Option<f64>) -> AnyView {
    view! {
        <td class="verdict-cell" data-verdict=verdict_slug(verdict)>
            {mark_svg(verdict, share)} " "
            <span class=format!("verdict-word is-{}", verdict_slug(verdict))>
                {words.verdict(verdict)}
            </span>
        </td>
    }
    .into_any()
}
