//! Water in pipes: properties, friction, fittings, the steady line with its jets, quick surge figures.
