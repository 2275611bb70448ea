//! Pipes of the user's own.

use crate::edits::pipes::{add_own, choose, own_name, remove_own};
use crate::inputs::{NumberField, TextLook, choice, picker, text_field};
use crate::state::{State, state};
use leptos::prelude::*;
use words::{Key, capital};
use workbook::book::{Id, OwnMaterial, OwnPipeEntry, OwnRating, OwnSizing};
use workbook::field::{OWN_FIELDS, OwnField};
use workbook::figure::{Place, Trouble};
use workbook::{Book, Field};

const MATERIALS: [(OwnMaterial, &str, Key); 6] = [
    (OwnMaterial::Pe, "pe", Key::MATERIAL_PE),
    (OwnMaterial::Pvc, "pvc", Key::MATERIAL_PVC),
    (OwnMaterial::Steel, "steel", Key::MATERIAL_STEEL),
    (
        OwnMaterial::DuctileIron,
        "ductile-iron",
        Key::MATERIAL_DUCTILE_IRON,
    ),
    (OwnMaterial::Grp, "grp", Key::MATERIAL_GRP),
    (OwnMaterial::Other, "other", Key::MATERIAL_OTHER),
];

const RATED: [(OwnRating, &str, Key); 2] = [
    (OwnRating::Pressure, "pressure", Key::OPTION_RATED_PRESSURE),
    (OwnRating::SteelStress, "stress", Key::OPTION_RATED_STRESS),
];

fn find(book: &Book, id: Id) -> Option<&OwnPipeEntry> {
    book.own_pipes.iter().find(|p| p.id == id)
}

fn find_mut(book: &mut Book, id: Id) -> Option<&mut OwnPipeEntry> {
    book.own_pipes.iter_mut().find(|p| p.id == id)
}

const SIZED: [(OwnSizing, &str, Key); 2] = [
    (OwnSizing::Outside, "outside", Key::OPTION_SIZED_OUTSIDE),
    (OwnSizing::Bore, "bore", Key::OPTION_SIZED_BORE),
];

const ENDS: [(bool, &str, Key); 2] = [
    (false, "plain", Key::OPTION_ENDS_PLAIN),
    (true, "threaded", Key::OPTION_ENDS_THREADED),
];

/// What decides which figures a pipe is asked for.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Asked {
    /// How it is rated.
    pub rated: OwnRating,
    /// Which diameter is given.
    pub sized: OwnSizing,
    /// Whether its steel is of a grade the catalogue knows.
    pub graded: bool,
    /// Whether its ends are threaded.
    pub threaded: bool,
}

impl Asked {
    fn of(pipe: &OwnPipeEntry) -> Asked {
        Asked {
            rated: pipe.rated,
            sized: pipe.sized,
            graded: !pipe.grade.is_empty(),
            threaded: pipe.threaded,
        }
    }

    /// Whether such a pipe has a use for this figure.
    #[must_use]
    pub fn needs(&self, field: OwnField) -> bool {
        let by_stress = self.rated == OwnRating::SteelStress;
        match field {
            OwnField::OutsideDiameter => self.sized == OwnSizing::Outside,
            OwnField::Bore => self.sized == OwnSizing::Bore,
            OwnField::Rating | OwnField::RatingTemperature => !by_stress,
            OwnField::Yield | OwnField::Tensile => by_stress && !self.graded,
            OwnField::JointFactor | OwnField::Corrosion | OwnField::MillTolerance => by_stress,
            OwnField::Thread => by_stress && self.threaded,
            _ => true,
        }
    }
}

/// All of them, with a button for another.
#[component]
pub fn OwnPipes() -> impl IntoView {
    let state = state();
    let ids = Memo::new(move |_| {
        state
            .book
            .with(|b| b.own_pipes.iter().map(|p| p.id).collect::<Vec<Id>>())
    });
    view! {
        <section class="sheet-part" aria-labelledby="own-head">
            <h3 id="own-head">{move || state.words.get().say(Key::PAGE_OWN_PIPES)}</h3>
            <For each=move || ids.get() key=|id| *id children=move |id| one(state, id)/>
            <div class="buttons">
                <button
                    type="button"
                    class="button"
                    data-test="own-add"
                    on:click=move |_| {
                        state
                            .act(|book| {
                                add_own(book);
                            });
                    }
                >
                    {move || state.words.get().say(Key::DO_ADD_OWN_PIPE)}
                </button>
            </div>
        </section>
    }
}

fn one(state: State, id: Id) -> AnyView {
    let say = move |key: Key| move || state.words.get().say(key);
    let asked = Memo::new(move |_| {
        state
            .book
            .with(|b| find(b, id).map(Asked::of).unwrap_or_default())
    });
    let by_stress = Memo::new(move |_| asked.with(|a| a.rated == OwnRating::SteelStress));
    let grade = Signal::derive(move || {
        state
            .book
            .with(|b| find(b, id).map(|p| p.grade.clone()).unwrap_or_default())
    });
    let grades = Signal::derive(move || {
        let known = pipes::catalogue().steel_grades().into_iter();
        core::iter::once((
            String::new(),
            state.words.get().say(Key::OPTION_GRADE_OWN).to_owned(),
        ))
        .chain(known.map(|name| (name.to_owned(), name.to_owned())))
        .collect()
    });
    let material = Signal::derive(move || {
        let now = state
            .book
            .with(|b| find(b, id).map_or(OwnMaterial::Steel, |p| p.material));
        let found = MATERIALS.iter().find(|m| m.0 == now);
        found.map_or("", |m| m.1).to_owned()
    });
    let materials = Signal::derive(move || {
        let words = state.words.get();
        MATERIALS
            .iter()
            .map(|m| (m.1.to_owned(), words.say(m.2).to_owned()))
            .collect()
    });
    let trouble = move || {
        let words = state.words.get();
        let found = state.troubles.with(|all| {
            all.iter()
                .find(|t| t.place() == Place::OwnPipe(id) && matches!(t, Trouble::OwnPipe { .. }))
                .cloned()
        })?;
        Some(state.book.with(|b| words.about(b).trouble(&found)))
    };
    let fields = move || {
        let asked = asked.get();
        OWN_FIELDS
            .into_iter()
            .filter(|f| asked.needs(*f))
            .map(|f| view! { <NumberField field=Field::Own(id, f)/> })
            .collect_view()
    };
    view! {
        <fieldset class="sheet-part" id=format!("own-pipe-{id}") tabindex="-1">
            <legend>
                <strong>
                    {move || state.book.with(|b| capital(&state.words.get().about(b).own_pipe(id)))}
                </strong>
            </legend>
            <div class="fields">
                {text_field(
                    &format!("own-{id}-name"),
                    Key::FIELD_OWN_NAME,
                    TextLook::default(),
                    move |b| find(b, id).map(|p| p.name.clone()).unwrap_or_default(),
                    move |b, t| {
                        if let Some(p) = find_mut(b, id) {
                            p.name = t;
                        }
                    },
                )}
                {text_field(
                    &format!("own-{id}-source"),
                    Key::FIELD_OWN_SOURCE,
                    TextLook { hint: Some(Key::HINT_OWN_SOURCE), ..TextLook::default() },
                    move |b| find(b, id).map(|p| p.source.clone()).unwrap_or_default(),
                    move |b, t| {
                        if let Some(p) = find_mut(b, id) {
                            p.source = t;
                        }
                    },
                )}
                {picker(
                    &format!("own-{id}-material"),
                    Signal::derive(move || say(Key::FIELD_OWN_MATERIAL)().to_owned()),
                    materials,
                    material,
                    move |value| {
                        state
                            .act(|b| {
                                if let (Some(p), Some(m)) = (
                                    find_mut(b, id),
                                    MATERIALS.iter().find(|m| m.1 == value),
                                ) {
                                    p.material = m.0;
                                }
                            });
                    },
                )}
                {choice(
                    &format!("own-{id}-rated"),
                    Key::FIELD_OWN_RATED,
                    &RATED,
                    move |b| find(b, id).map_or(OwnRating::Pressure, |p| p.rated),
                    move |b, value| {
                        if let Some(p) = find_mut(b, id) {
                            p.rated = value;
                        }
                    },
                )}
                <Show when=move || by_stress.get()>
                    {picker(
                        &format!("own-{id}-grade"),
                        Signal::derive(move || say(Key::FIELD_OWN_GRADE)().to_owned()),
                        grades,
                        grade,
                        move |value| {
                            state
                                .act(|b| {
                                    if let Some(p) = find_mut(b, id) {
                                        p.grade = value;
                                    }
                                });
                        },
                    )}
                    {choice(
                        &format!("own-{id}-ends"),
                        Key::FIELD_OWN_ENDS,
                        &ENDS,
                        move |b| find(b, id).is_some_and(|p| p.threaded),
                        move |b, value| {
                            if let Some(p) = find_mut(b, id) {
                                p.threaded = value;
                            }
                        },
                    )}
                </Show>
                {choice(
                    &format!("own-{id}-sized"),
                    Key::FIELD_OWN_SIZED,
                    &SIZED,
                    move |b| find(b, id).map_or(OwnSizing::Outside, |p| p.sized),
                    move |b, value| {
                        if let Some(p) = find_mut(b, id) {
                            p.sized = value;
                        }
                    },
                )} {fields}
            </div>
            <p class="field-trouble" data-test=format!("own-{id}-trouble")>{trouble}</p>
            <div class="buttons">
                <button
                    type="button"
                    class="button"
                    data-test=format!("choose-own-{id}")
                    on:click=move |_| {
                        let stretch = state.stretch.get_untracked();
                        state
                            .act(|b| {
                                choose(b, &own_name(id), stretch);
                            });
                    }
                >
                    {say(Key::DO_CHOOSE_PIPE)}
                </button>
                <button
                    type="button"
                    class="button-quiet"
                    data-test=format!("own-{id}-delete")
                    on:click=move |_| {
                        state
                            .act(|b| {
                                remove_own(b, id);
                            });
                    }
                >
                    {say(Key::DO_DELETE_OWN_PIPE)}
                </button>
            </div>
        </fieldset>
    }
    .into_any()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn count(asked: &Asked) -> usize {
        OWN_FIELDS.into_iter().filter(|f| asked.needs(*f)).count()
    }

    #[test]
    fn each_way_of_rating_asks_for_its_own_figures() {
        let by_pressure = Asked::default();
        assert_eq!(count(&by_pressure), 10);
        let by_stress = Asked {
            rated: OwnRating::SteelStress,
            ..Asked::default()
        };
        assert_eq!(count(&by_stress), 13);
        let graded = Asked {
            graded: true,
            ..by_stress.clone()
        };
        assert_eq!(count(&graded), 11);
        let threaded = Asked {
            threaded: true,
            ..by_stress.clone()
        };
        assert_eq!(count(&threaded), 14);
    }

    #[test]
    fn one_diameter_is_asked_for() {
        let by_bore = Asked {
            sized: OwnSizing::Bore,
            ..Asked::default()
        };
        assert!(by_bore.needs(OwnField::Bore) && !by_bore.needs(OwnField::OutsideDiameter));
    }
}
