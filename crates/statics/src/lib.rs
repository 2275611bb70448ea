//! Forces and walls: hoop stress, allowable pressure by stress, collapse.
