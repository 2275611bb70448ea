//! The message catalogues and the number formatter: where findings become sentences.
