//! A value with its source, and whether that source was seen.

/// Was the source of a value seen?
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Attested {
    /// The figure was seen in the source named, or follows from a rule seen there.
    Seen,
    /// The figure is from memory, or by a rule where the table itself was not
    /// seen. No limit that rests on it can give holds.
    FromMemory,
}

impl Attested {
    /// The weaker of the two: from memory when either is.
    #[must_use]
    pub fn and(self, other: Self) -> Self {
        self.max(other)
    }

    /// True when the source was seen.
    #[must_use]
    pub fn is_seen(self) -> bool {
        self == Self::Seen
    }
}

/// A value with its source.
#[derive(Debug, Clone, PartialEq)]
pub struct Sourced<T> {
    /// The value.
    pub value: T,
    /// Where it comes from, in words fit for the calculation record.
    pub source: String,
    /// Whether that source was seen.
    pub attested: Attested,
}

impl<T> Sourced<T> {
    /// A value whose source was seen.
    pub fn seen(value: T, source: impl Into<String>) -> Self {
        Self {
            value,
            source: source.into(),
            attested: Attested::Seen,
        }
    }

    /// The same source and mark with the value made into something else.
    pub fn map<U>(self, make: impl FnOnce(T) -> U) -> Sourced<U> {
        Sourced {
            value: make(self.value),
            source: self.source,
            attested: self.attested,
        }
    }

    /// A value from memory.
    pub fn from_memory(value: T, source: impl Into<String>) -> Self {
        Self {
            value,
            source: source.into(),
            attested: Attested::FromMemory,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::Attested::{FromMemory, Seen};

    #[test]
    fn memory_taints() {
        assert_eq!(Seen.and(Seen), Seen);
        assert_eq!(Seen.and(FromMemory), FromMemory);
        assert_eq!(FromMemory.and(Seen), FromMemory);
        assert_eq!(FromMemory.and(FromMemory), FromMemory);
        assert!(Seen.is_seen() && !FromMemory.is_seen());
    }
}
