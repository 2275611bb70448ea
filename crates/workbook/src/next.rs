//! The one entry a book needs next.

use crate::book::{Book, BoreSizing};
use crate::caution::Sheet;
use crate::field::Field;
use crate::figure::{Figure, Gap, Lack, Place};
use crate::resolve::Resolved;
use crate::walls::Walls;

/// Where to go next, and why.
#[derive(Debug, Clone, PartialEq)]
pub struct Next {
    /// What to fill in or to mend.
    pub place: Place,
    /// The sheet it is on.
    pub sheet: Sheet,
    /// Why: something missing, or something wrong.
    pub why: Gap,
}

/// The next entry the book needs: what is wrong first, then what is missing
/// in the order a person on site would fill it in.
#[must_use]
pub fn next(book: &Book, found: &Resolved, walls: &Walls) -> Option<Next> {
    if let Some(trouble) = found.troubles.first() {
        let place = trouble.place();
        return Some(Next {
            sheet: sheet(&place),
            place,
            why: Gap::Wrong(trouble.clone()),
        });
    }
    lacks(book, found, walls).into_iter().find_map(|lack| {
        let place = lack.place()?;
        Some(Next {
            sheet: sheet(&place),
            place,
            why: Gap::Unsettled(lack),
        })
    })
}

fn lacks(book: &Book, found: &Resolved, walls: &Walls) -> Vec<Lack> {
    let mut all = Vec::new();
    push(&mut all, &found.design_flow);
    push(&mut all, &found.profile.whole());
    push(&mut all, &found.gross_head);
    push(&mut all, &found.warmest_wall);
    for stretch in &found.stretches {
        push(&mut all, &stretch.pipe);
    }
    push(&mut all, &found.drive.speeds);
    push(&mut all, &found.drive.area);
    if let Ok(jets) = &found.jets
        && jets.sizing == BoreSizing::Chosen
    {
        push(&mut all, &jets.bore);
    }
    for wall in &walls.stretches {
        all.extend(wall.unrated.iter().map(|id| Lack::Rating(*id)));
        if wall.jets_unrated {
            all.push(Lack::Entry(Field::JetRating));
        }
    }
    if book.climate.altitude_m.is_empty() {
        all.push(Lack::Entry(Field::Altitude));
    }
    all
}

fn push<T>(all: &mut Vec<Lack>, figure: &Figure<T>) {
    if let Err(Gap::Unsettled(lack)) = figure {
        all.push(lack.clone());
    }
}

/// The sheet a place is on.
#[must_use]
pub fn sheet(place: &Place) -> Sheet {
    match place {
        Place::Field(field) => field_sheet(*field),
        Place::Station(_) | Place::Fitting(_) | Place::Line => Sheet::Line,
        Place::Stretch(_) | Place::OwnPipe(_) | Place::Pipe(_) => Sheet::Pipe,
        Place::Jets => Sheet::Jets,
        Place::Surge => Sheet::Surge,
    }
}

fn field_sheet(field: Field) -> Sheet {
    match field {
        Field::DesignFlow
        | Field::Altitude
        | Field::ColdestWater
        | Field::WarmestWater
        | Field::ColdestWall
        | Field::WarmestWall => Sheet::Stream,
        Field::ForebayHighest
        | Field::ForebayNormal
        | Field::ForebayLowest
        | Field::JetAxis
        | Field::TailLevel
        | Field::GaugeLevel
        | Field::StationDistance(_)
        | Field::StationLevel(_)
        | Field::StationForeSight(_)
        | Field::StationBackSight(_)
        | Field::StationStaffBack(_)
        | Field::StationStaffFore(_)
        | Field::StationTurn(_)
        | Field::KnownFall
        | Field::BendRadius
        | Field::JointDeflection
        | Field::AirSlopeChange
        | Field::StretchCover(_)
        | Field::FittingCount(_)
        | Field::FittingAngle(_)
        | Field::FittingRadius(_)
        | Field::FittingOpening(_)
        | Field::RackWidth(_)
        | Field::RackLength(_)
        | Field::RackBar(_)
        | Field::RackGap(_)
        | Field::RackClogged(_)
        | Field::FittingK(_)
        | Field::FittingRating(_) => Sheet::Line,
        Field::Own(..)
        | Field::Price(_)
        | Field::SurgeAllowed(_)
        | Field::TightMargin
        | Field::LossCap
        | Field::VelocityHigh
        | Field::CollapseSafety
        | Field::Spare => Sheet::Pipe,
        Field::JetCount
        | Field::JetBore
        | Field::JetVelocityCoefficient
        | Field::JetContraction
        | Field::BranchK
        | Field::BranchBore
        | Field::JetRating => Sheet::Jets,
        Field::ClosingTime
        | Field::FastTime
        | Field::SlowTime
        | Field::Knee
        | Field::NeedleAngle
        | Field::NeedleTravel
        | Field::ValveStroke(_)
        | Field::ValveOpen(_)
        | Field::OpeningTime
        | Field::SlamTime
        | Field::EntrainedAir
        | Field::SlowestClosing
        | Field::ClosingReserve => Sheet::Surge,
    }
}
