//! A checked line, cut into pieces between the places where something changes.

use super::spec::{LineError, LineSpec};

/// A line that can be computed.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    pub(super) spec: LineSpec,
}

impl Line {
    /// Checks the parts and lays them out.
    ///
    /// # Errors
    /// The first part that cannot be used, by its index, with its values.
    pub fn new(spec: LineSpec) -> Result<Self, LineError> {
        if spec.points.len() < 2 {
            return Err(LineError::TooFewPoints {
                count: spec.points.len(),
            });
        }
        Ok(Self { spec })
    }

    /// The parts the line was made from.
    #[must_use]
    pub fn spec(&self) -> &LineSpec {
        &self.spec
    }
}
