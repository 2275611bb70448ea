//! Friction in full pipes.
//!
//! Head lost per length is f V^2 / (2 g D) (Darcy-Weisbach), with f the Darcy
//! factor (four times Fanning's). Three regimes by Reynolds number Re = V D / nu:
//!
//! | Re | factor |
//! |---|---|
//! | to 2300 | 64/Re (Hagen-Poiseuille) |
//! | 2300 to 4000 | a bridge: uncertain, see [`Regime::Transition`] |
//! | above 4000 | Colebrook-White, solved to machine precision |
//!
//! Hazen-Williams and Manning are there because some suppliers quote C or n:
//! see [`FrictionLaw`]. Start from [`FrictionLaw::head_gradient`].

mod colebrook;
mod factor;
mod law;

pub use colebrook::{colebrook_factor, colebrook_factors, colebrook_white};
pub use factor::{
    DarcyFactor, FrictionError, GREATEST_RELATIVE_ROUGHNESS, GREATEST_REYNOLDS, LAMINAR_LIMIT,
    LEAST_REYNOLDS, Regime, RelativeRoughness, ReynoldsNumber, TURBULENT_LIMIT, darcy_factor,
    darcy_weisbach, factor_si, laminar, reynolds_number,
};
pub use law::{
    BORE_RANGE_M, Friction, FrictionLaw, HAZEN_WILLIAMS_RANGE, MANNING_RANGE,
    equivalent_hazen_williams, equivalent_manning, equivalent_roughness,
};
