//! The loop: step sizes, acceptance, the observer.

use super::rodas5p::{A, ALPHA, C, GAMMA, GAMMA_SUM, STAGES};
use super::{Slot, Step, System, Tridiagonal};

/// How finely to integrate.
#[derive(Clone, Debug)]
pub struct Settings {
    /// Largest weighted error of one step, in the unit that [`System::weights`] make.
    pub tolerance: f64,
    /// Most that a step may grow over the one before.
    pub growth: f64,
    /// Share of the tolerance that the controller aims below (its usual safety factor).
    pub safety: f64,
    /// Steps after which a phase is given up.
    pub most_steps: usize,
}

impl Settings {
    /// Settings for a tolerance.
    pub fn with_tolerance(tolerance: f64) -> Self {
        Self {
            tolerance,
            growth: 8.0,
            safety: 0.9,
            most_steps: 1_000_000,
        }
    }
}

/// What the observer wants.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Flow {
    /// Go on.
    Continue,
    /// Stop at the end of this step.
    Stop,
}

/// What an integration cost.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Effort {
    /// Accepted steps.
    pub steps: usize,
    /// Rejected steps.
    pub rejected: usize,
}

/// Why an integration was given up.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum SolveError {
    /// The step fell below what numbers can resolve.
    #[error("the step became too small at share {share} of the phase")]
    StepTooSmall {
        /// Share of the phase reached.
        share: f64,
    },
    /// Too many steps in one phase.
    #[error("{steps} steps were not enough; share {share} of the phase was reached")]
    TooManySteps {
        /// Share of the phase reached.
        share: f64,
        /// Steps taken.
        steps: usize,
    },
    /// The rate at the start of the phase is no number.
    #[error("the rate at the start of the phase is not a finite number")]
    NotFinite,
}

/// The state of an integration, and all the room it needs: nothing is allocated inside a step.
#[derive(Clone, Debug)]
pub struct Integrator<const L: usize> {
    /// The unknowns.
    pub unknowns: Vec<Slot<L>>,
    /// The followers.
    pub followers: Vec<Slot<L>>,
    /// What it has cost so far.
    pub effort: Effort,
    /// The last step length as a share of its phase, and the member's phase length: what a phase that starts smoothly goes on with.
    last_step: Option<f64>,
    stages: [Vec<Slot<L>>; STAGES],
    follower_stages: [Vec<Slot<L>>; STAGES],
    rate: Vec<Slot<L>>,
    rate_next: Vec<Slot<L>>,
    rate_of_time: Vec<Slot<L>>,
    trial: Vec<Slot<L>>,
    follower_rate: Vec<Slot<L>>,
    follower_rate_next: Vec<Slot<L>>,
    follower_rate_of_time: Vec<Slot<L>>,
    follower_trial: Vec<Slot<L>>,
    driven: Vec<Slot<L>>,
    matrix: Tridiagonal<L>,
}

impl<const L: usize> Integrator<L> {
    /// An integration that starts from these unknowns and followers.
    pub fn new(unknowns: Vec<Slot<L>>, followers: Vec<Slot<L>>) -> Self {
        let zeros = vec![[0.0; L]; unknowns.len()];
        let few = vec![[0.0; L]; followers.len()];
        Self {
            effort: Effort::default(),
            last_step: None,
            stages: std::array::from_fn(|_| zeros.clone()),
            follower_stages: std::array::from_fn(|_| few.clone()),
            rate: zeros.clone(),
            rate_next: zeros.clone(),
            rate_of_time: zeros.clone(),
            matrix: Tridiagonal::new(zeros.len()),
            trial: zeros,
            follower_rate: few.clone(),
            follower_rate_next: few.clone(),
            follower_rate_of_time: few.clone(),
            follower_trial: few.clone(),
            driven: few,
            unknowns,
            followers,
        }
    }

    /// Forgets the last step length: the next phase starts with a jump.
    pub fn expect_jump(&mut self) {
        self.last_step = None;
    }

    /// Takes the system through its phase, or until the observer stops it; returns the share reached.
    ///
    /// # Errors
    /// When the step becomes too small, the steps too many, or the first rate is no number.
    pub fn phase<S: System<L>>(
        &mut self,
        system: &mut S,
        settings: &Settings,
        mut observer: impl FnMut(&S, &Step<'_, L>) -> Flow,
    ) -> Result<f64, SolveError> {
        let length = system.phase_length();
        let longest = length.iter().copied().fold(0.0, f64::max);
        if longest <= 0.0 {
            return Ok(1.0);
        }
        let mut share = 0.0;
        system.jacobian(
            share,
            &self.unknowns,
            &self.followers,
            &mut self.rate,
            &mut self.follower_rate,
            &mut self.matrix,
        );
        let mut depends_on_time = system.rate_of_time(share, &self.unknowns, &mut self.rate_of_time, &mut self.follower_rate_of_time);
        let mut size = match self.last_step {
            Some(time) => (time / longest).min(1.0),
            None => self.first_step(system, settings, length, depends_on_time)?,
        };
        let mut taken = 0;
        let mut grown = settings.growth;
        loop {
            // A remainder too short to be worth a step of its own is taken along.
            let reaches_end = share + size * 1.000_001 >= 1.0;
            let trial = if reaches_end { 1.0 - share } else { size };
            if trial < 1e-15 * share.max(1e-3) || trial * longest < 1e-14 {
                return Err(SolveError::StepTooSmall { share });
            }
            let step = length.map(|length| trial * length);
            let error = self.attempt(system, share, trial, step, depends_on_time);
            let wanted = settings.safety * (settings.tolerance / error).powf(0.2);
            if error > settings.tolerance {
                self.effort.rejected += 1;
                grown = 1.0;
                size = trial * if wanted.is_finite() { wanted.clamp(0.1, 0.9) } else { 0.1 };
                continue;
            }
            let end = if reaches_end { 1.0 } else { share + trial };
            system.jacobian(
                end,
                &self.trial,
                &self.follower_trial,
                &mut self.rate_next,
                &mut self.follower_rate_next,
                &mut self.matrix,
            );
            self.effort.steps += 1;
            taken += 1;
            let flow = observer(
                system,
                &Step {
                    from: share,
                    to: end,
                    length: step,
                    before: &self.unknowns,
                    after: &self.trial,
                    rate_before: &self.rate,
                    rate_after: &self.rate_next,
                    followers_before: &self.followers,
                    followers_after: &self.follower_trial,
                    stages: &self.stages,
                    follower_stages: &self.follower_stages,
                },
            );
            std::mem::swap(&mut self.unknowns, &mut self.trial);
            std::mem::swap(&mut self.followers, &mut self.follower_trial);
            std::mem::swap(&mut self.rate, &mut self.rate_next);
            std::mem::swap(&mut self.follower_rate, &mut self.follower_rate_next);
            share = end;
            let next = trial * wanted.clamp(0.2, grown);
            // The last step of a phase is often cut short: what the controller wanted before that stays the better guess.
            self.last_step = Some(longest * if reaches_end { next.max(size.min(next * settings.growth)) } else { next });
            grown = settings.growth;
            size = next;
            if reaches_end || flow == Flow::Stop {
                return Ok(share);
            }
            if taken >= settings.most_steps {
                return Err(SolveError::TooManySteps { share, steps: taken });
            }
            depends_on_time = system.rate_of_time(share, &self.unknowns, &mut self.rate_of_time, &mut self.follower_rate_of_time);
        }
    }

    /// The first step after a jump: short enough that no unknown moves by more than twenty tolerances, by its rate (the jump of the flux into the
    /// outermost cell) or by the growth of its rate.
    fn first_step<S: System<L>>(&self, system: &S, settings: &Settings, length: Slot<L>, depends_on_time: bool) -> Result<f64, SolveError> {
        let allowed = 20.0 * settings.tolerance;
        let mut size: f64 = 1.0;
        let weights = system.weights();
        for (i, weight) in weights.iter().enumerate() {
            for l in 0..L {
                let rate = (self.rate[i][l] * weight[l]).abs();
                if !rate.is_finite() {
                    return Err(SolveError::NotFinite);
                }
                size = size.min(allowed / (rate * length[l]));
                if depends_on_time {
                    let growth = (self.rate_of_time[i][l] * weight[l]).abs();
                    size = size.min((2.0 * allowed / growth).sqrt() / length[l]);
                }
            }
        }
        Ok(size)
    }

    /// Computes the stages of one step; leaves its end in `trial` and returns the weighted error.
    fn attempt<S: System<L>>(&mut self, system: &mut S, share: f64, trial: f64, step: Slot<L>, depends_on_time: bool) -> f64 {
        self.matrix.factor(1.0 / GAMMA, step);
        for k in 0..STAGES {
            let (done, rest) = self.stages.split_at_mut(k);
            let (followers_done, followers_rest) = self.follower_stages.split_at_mut(k);
            let stage = &mut rest[0];
            let follower_stage = &mut followers_rest[0];
            if k == 0 {
                stage.copy_from_slice(&self.rate);
                follower_stage.copy_from_slice(&self.follower_rate);
            } else {
                if k < 6 {
                    combine(&self.unknowns, done, &A[k], &mut self.trial);
                    combine(&self.followers, followers_done, &A[k], &mut self.follower_trial);
                } else {
                    add(&mut self.trial, &done[k - 1]);
                    add(&mut self.follower_trial, &followers_done[k - 1]);
                }
                system.rate(share + ALPHA[k] * trial, &self.trial, &self.follower_trial, stage, follower_stage);
            }
            scale(stage, step);
            scale(follower_stage, step);
            if depends_on_time && GAMMA_SUM[k] != 0.0 {
                add_scaled(stage, &self.rate_of_time, GAMMA_SUM[k], step);
                add_scaled(follower_stage, &self.follower_rate_of_time, GAMMA_SUM[k], step);
            }
            if k > 0 {
                accumulate(done, &C[k], stage);
                accumulate(followers_done, &C[k], follower_stage);
            }
            self.matrix.solve(stage);
            system.drive(stage, &mut self.driven);
            for ((value, driven), decay) in follower_stage.iter_mut().zip(&self.driven).zip(system.decay()) {
                for l in 0..L {
                    value[l] = (value[l] + step[l] * driven[l]) / (1.0 / GAMMA + step[l] * decay[l]);
                }
            }
        }
        add(&mut self.trial, &self.stages[STAGES - 1]);
        add(&mut self.follower_trial, &self.follower_stages[STAGES - 1]);
        largest(&self.stages[STAGES - 1], system.weights()).max(largest(&self.follower_stages[STAGES - 1], system.follower_weights()))
    }
}

/// out = base + Σ coefficient · stage.
fn combine<const L: usize>(base: &[Slot<L>], stages: &[Vec<Slot<L>>], coefficients: &[f64; 7], out: &mut [Slot<L>]) {
    out.copy_from_slice(base);
    accumulate(stages, coefficients, out);
}

/// out += Σ coefficient · stage, in one pass over the unknowns.
fn accumulate<const L: usize>(stages: &[Vec<Slot<L>>], coefficients: &[f64; 7], out: &mut [Slot<L>]) {
    fn pass<const K: usize>(stages: &[&[f64]; K], coefficients: &[f64], out: &mut [f64]) {
        let len = out.len();
        let stages = stages.map(|stage| &stage[..len]);
        let coefficients: [f64; K] = std::array::from_fn(|k| coefficients[k]);
        for i in 0..len {
            let mut sum = out[i];
            for k in 0..K {
                sum += coefficients[k] * stages[k][i];
            }
            out[i] = sum;
        }
    }
    let out = out.as_flattened_mut();
    let flat = |k: usize| stages[k].as_flattened();
    match stages.len() {
        1 => pass(&[flat(0)], coefficients, out),
        2 => pass(&[flat(0), flat(1)], coefficients, out),
        3 => pass(&[flat(0), flat(1), flat(2)], coefficients, out),
        4 => pass(&[flat(0), flat(1), flat(2), flat(3)], coefficients, out),
        5 => pass(&[flat(0), flat(1), flat(2), flat(3), flat(4)], coefficients, out),
        6 => pass(&[flat(0), flat(1), flat(2), flat(3), flat(4), flat(5)], coefficients, out),
        7 => pass(&[flat(0), flat(1), flat(2), flat(3), flat(4), flat(5), flat(6)], coefficients, out),
        _ => {}
    }
}

fn add<const L: usize>(out: &mut [Slot<L>], stage: &[Slot<L>]) {
    for (out, stage) in out.as_flattened_mut().iter_mut().zip(stage.as_flattened()) {
        *out += stage;
    }
}

fn scale<const L: usize>(out: &mut [Slot<L>], step: Slot<L>) {
    for out in out {
        for l in 0..L {
            out[l] *= step[l];
        }
    }
}

fn add_scaled<const L: usize>(out: &mut [Slot<L>], rate_of_time: &[Slot<L>], weight: f64, step: Slot<L>) {
    for (out, rate) in out.iter_mut().zip(rate_of_time) {
        for l in 0..L {
            out[l] += weight * step[l] * step[l] * rate[l];
        }
    }
}

fn largest<const L: usize>(error: &[Slot<L>], weights: &[Slot<L>]) -> f64 {
    let mut largest: f64 = 0.0;
    let mut sum = 0.0;
    for (error, weight) in error.as_flattened().iter().zip(weights.as_flattened()) {
        let weighted = (error * weight).abs();
        largest = largest.max(weighted);
        sum += weighted;
    }
    // The maximum ignores what is no number; the sum does not.
    if sum.is_finite() { largest } else { f64::INFINITY }
}
