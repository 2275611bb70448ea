//! The pipe catalogue: materials, published size tables as data files, temperature derating.
