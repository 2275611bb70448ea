//! Steel pipes of the user's own: from plate, threaded, of another grade.

use uom::si::f64::Length;
use uom::si::length::meter;

use super::check::{between, check_pipe, positive, trimmed};
use super::{OwnPipe, OwnPipeError, OwnRating};
use crate::{Material, Pipe, Rating, Sourced, SteelRating};

/// A pipe rolled and welded from steel plate, of any bore and wall; the
/// roughness and modulus are those of steel.
///
/// # Errors
/// [`OwnPipeError`] as for [`OwnPipe::build`].
pub fn plate_steel(bore: Length, wall: Length, rating: SteelRating) -> Result<Pipe, OwnPipeError> {
    let inside = positive("bore", bore.get::<meter>())?;
    let thick = positive("wall", wall.get::<meter>())?;
    let (inside, thick) = (inside * 1000.0, thick * 1000.0);
    let own = OwnPipe {
        designation: format!(
            "Plate steel {} bore {} x {} mm",
            rating.grade,
            trimmed(inside),
            trimmed(thick)
        ),
        short: format!("Plate {} x {}", trimmed(inside), trimmed(thick)),
        source: "bore and wall as entered".to_owned(),
        material: Material::Steel,
        outside_diameter: bore + 2.0 * wall,
        wall_min: wall,
        rating: OwnRating::Stress(Box::new(rating)),
        ..OwnPipe::default()
    };
    let mut pipe = own.build()?;
    pipe.id = format!("plate-steel/{}x{}", trimmed(inside), trimmed(thick));
    pipe.series = "plate-steel".to_owned();
    Ok(pipe)
}

impl Pipe {
    /// The same steel pipe with taper threads cut at its ends: rated by the wall
    /// left under the thread. The depth is the one usual for the diameter
    /// unless one is given.
    ///
    /// # Errors
    /// [`OwnPipeError::StressNeedsSteel`] when the pipe is not steel rated by
    /// stress, [`OwnPipeError::Missing`] when no thread is kept for its
    /// diameter (over 170 mm) and none is given, [`OwnPipeError::Wall`] when
    /// no wall is left.
    pub fn threaded(&self, depth: Option<Sourced<Length>>) -> Result<Self, OwnPipeError> {
        let mut pipe = self.clone();
        let Rating::Stress(rating) = &mut pipe.rating else {
            return Err(OwnPipeError::StressNeedsSteel {
                material: self.material,
            });
        };
        let depth = depth
            .or_else(|| {
                crate::catalogue()
                    .steel()
                    .thread_depth(self.outside_diameter)
            })
            .ok_or(OwnPipeError::Missing {
                field: "thread depth",
            })?;
        positive("thread depth", depth.value.get::<meter>())?;
        rating.thread_depth = Some(depth);
        pipe.id.push_str("/threaded");
        pipe.designation.push_str(" threaded");
        pipe.short.push_str(" threaded");
        check_pipe(&pipe)?;
        Ok(pipe)
    }

    /// The same pipe with another steel rating (grade, allowances, shares).
    ///
    /// # Errors
    /// [`OwnPipeError::StressNeedsSteel`] when the pipe is not rated by stress,
    /// others as for [`OwnPipe::build`].
    pub fn with_steel(&self, rating: SteelRating) -> Result<Self, OwnPipeError> {
        let mut pipe = self.clone();
        if !matches!(pipe.rating, Rating::Stress(_)) {
            return Err(OwnPipeError::StressNeedsSteel {
                material: self.material,
            });
        }
        let mill = between("mill_tolerance", rating.mill_tolerance.value, 0.0, 1.0)?;
        pipe.wall_min = pipe.wall_mean() * (1.0 - mill);
        pipe.rating = Rating::Stress(Box::new(rating));
        check_pipe(&pipe)?;
        Ok(pipe)
    }
}
