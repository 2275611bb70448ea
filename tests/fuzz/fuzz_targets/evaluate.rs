//! Whatever stands in a book: it is evaluated, every known figure is a number,
//! and the book outlives its file.
#![no_main]

use arbitrary::{Result, Unstructured};
use libfuzzer_sys::{Corpus, fuzz_target};
use workbook::book::{
    BoreSizing, DistanceKind, FittingEntry, FittingKind, Laying, NozzleKind, OwnMaterial,
    OwnPipeEntry, OwnRating, Reckoning, RoughnessAge, Station, StretchEntry,
};
use workbook::pipe_copy::PipeCopy;
use workbook::reading::DecimalMark;
use workbook::sweep::Sweep;
use workbook::{Book, Entry, evaluate, format};

fuzz_target!(|bytes: &[u8]| -> Corpus {
    let Ok(book) = book(&mut Unstructured::new(bytes)) else {
        return Corpus::Reject;
    };
    let found = format!("{:?}", evaluate(&book));
    for none in ["NaN", ": inf", ": -inf", "(inf", "(-inf"] {
        assert!(!found.contains(none), "{none} in {found}");
    }
    Sweep::new(&book).advance(3);
    let text = format::write(&book).expect("a book made of entries can be written");
    assert_eq!(format::read(text.as_bytes()), Ok(book));
    Corpus::Keep
});

/// A book whose rows, choices and entries the bytes decide.
fn book(u: &mut Unstructured) -> Result<Book> {
    let mut book = if u.ratio(1, 2)? {
        workbook::demo::demo("fuzz")
    } else {
        Book::new("fuzz")
    };
    if u.arbitrary()? {
        book.line.stations = rows(u, 12, |_, id| {
            Ok(Station {
                id,
                ..Station::default()
            })
        })?;
    }
    if u.arbitrary()? {
        book.own_pipes = rows(u, 2, own_pipe)?;
    }
    if u.arbitrary()? {
        stretches(u, &mut book)?;
    }
    if u.arbitrary()? {
        book.line.fittings = rows(u, 4, fitting)?;
    }
    book.line.distance_kind = *u.choose(&[DistanceKind::Slope, DistanceKind::Horizontal])?;
    book.line.reckoning = *u.choose(&[Reckoning::FromStart, Reckoning::FromPrevious])?;
    book.jets.sizing = *u.choose(&[BoreSizing::Solved, BoreSizing::Chosen])?;
    book.jets.kind = *u.choose(&[NozzleKind::Fixed, NozzleKind::Needle])?;
    book.limits.roughness = *u.choose(&[RoughnessAge::New, RoughnessAge::Aged])?;
    let fields = book.fields();
    for _ in 0..u.int_in_range(0..=fields.len())? {
        let field = *u.choose(&fields)?;
        let units = field.kind().units();
        let unit = u.choose(units)?.symbol;
        let typed = Entry::typed(&text(u)?, unit, field.kind(), DecimalMark::Point);
        if let Some(entry) = book.entry_mut(field) {
            *entry = typed;
        }
    }
    Ok(book)
}

fn rows<T>(
    u: &mut Unstructured,
    most: u32,
    mut one: impl FnMut(&mut Unstructured, u32) -> Result<T>,
) -> Result<Vec<T>> {
    let count = u.int_in_range(0..=most)?;
    (1..=count).map(|id| one(u, id)).collect()
}

fn stretches(u: &mut Unstructured, book: &mut Book) -> Result<()> {
    let catalogue = &pipes::catalogue().pipes;
    let mut copies = Vec::new();
    book.line.stretches = rows(u, 4, |u, id| {
        let pipe = match u.int_in_range(0..=3)? {
            0 => None,
            1 => Some(format!("own/{}", u.int_in_range(1..=3)?)),
            _ => {
                let pipe = &catalogue[u.choose_index(catalogue.len())?];
                copies.push(PipeCopy::of(pipe));
                Some(pipe.id.clone())
            }
        };
        Ok(StretchEntry {
            id,
            from_station: u.int_in_range(1..=12)?,
            pipe,
            laying: *u.choose(&[Laying::Buried, Laying::OnGround, Laying::OnSupports])?,
            ..StretchEntry::default()
        })
    })?;
    book.pipes = copies;
    Ok(())
}

fn fitting(u: &mut Unstructured, id: u32) -> Result<FittingEntry> {
    Ok(FittingEntry {
        id,
        at_station: u.int_in_range(1..=12)?,
        kind: *u.choose(&[
            FittingKind::TrashRack,
            FittingKind::EntranceSharp,
            FittingKind::EntranceProjecting,
            FittingKind::EntranceRounded,
            FittingKind::EntranceBellmouth,
            FittingKind::Bend,
            FittingKind::Mitre,
            FittingKind::GateValve,
            FittingKind::BallValve,
            FittingKind::ButterflyValve,
            FittingKind::TeeRun,
            FittingKind::TeeBranch,
            FittingKind::Own,
        ])?,
        ..FittingEntry::default()
    })
}

fn own_pipe(u: &mut Unstructured, id: u32) -> Result<OwnPipeEntry> {
    Ok(OwnPipeEntry {
        id,
        material: *u.choose(&[
            OwnMaterial::Pe,
            OwnMaterial::Pvc,
            OwnMaterial::Steel,
            OwnMaterial::DuctileIron,
            OwnMaterial::Grp,
            OwnMaterial::Other,
        ])?,
        rated: *u.choose(&[OwnRating::Pressure, OwnRating::SteelStress])?,
        ..OwnPipeEntry::default()
    })
}

/// What may be typed: mostly a number of some size, at times anything.
fn text(u: &mut Unstructured) -> Result<String> {
    if u.ratio(1, 8)? {
        return Ok(u.arbitrary::<&str>()?.chars().take(20).collect());
    }
    let number = f64::from(u.int_in_range(-200..=9999)?);
    let scale = *u.choose(&[1.0, 10.0, 100.0, 1e4, 1e-3])?;
    Ok(format!("{}", number / scale))
}
