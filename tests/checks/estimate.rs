//! The estimate of the error is honest: what a run says it may be off bounds, to a factor of 3, what it is off on every closed form that is checked
//! here.

use super::{bar, cylinder, fire, lumped, multilayer, nonlinear, semi_infinite, slab};
use crate::walls::*;

/// Rounding of the reference values and of the crossings, K.
const GRAIN: f64 = 1e-4;

#[test]
fn the_true_error_is_at_most_three_times_the_estimate() -> Outcome {
    let topics = [
        semi_infinite::cases()?,
        slab::cases()?,
        cylinder::cases()?,
        multilayer::cases()?,
        lumped::cases()?,
        nonlinear::cases()?,
        fire::cases()?,
        bar::cases()?,
    ];
    let (mut compared, mut wrong) = (0, Vec::new());
    for case in topics.iter().flatten() {
        let (found, estimate) = case.run()?;
        assert!((0.0..=PROMISE).contains(&estimate), "{}: the estimate is {estimate} K", case.name);
        for found in found.iter().filter(|found| found.within <= PROMISE) {
            compared += 1;
            if found.error.is_nan() || found.error > (3.0 * estimate + GRAIN).min(PROMISE) {
                wrong.push(format!(
                    "{}: {:?} is {:.5} K off, estimated {estimate:.5} K",
                    case.name, found.what, found.error
                ));
            }
        }
    }
    assert!(compared > 500, "{compared}");
    if wrong.is_empty() { Ok(()) } else { Err(wrong.join("\n").into()) }
}
