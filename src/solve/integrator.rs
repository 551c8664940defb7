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
            growth: 10.0,
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
    /// Length in time of the step that the controller wanted next: what a phase that starts without a jump goes on from.
    last_step: Option<f64>,
    stages: [Vec<Slot<L>>; STAGES],
    follower_stages: [Vec<Slot<L>>; STAGES],
    rate: Vec<Slot<L>>,
    rate_next: Vec<Slot<L>>,
    rate_of_time: Vec<Slot<L>>,
    trial: Vec<Slot<L>>,
    /// What earlier stages add to the right-hand side of the next.
    earlier: Vec<Slot<L>>,
    follower_earlier: Vec<Slot<L>>,
    follower_rate: Vec<Slot<L>>,
    follower_rate_next: Vec<Slot<L>>,
    follower_rate_of_time: Vec<Slot<L>>,
    follower_trial: Vec<Slot<L>>,
    driven: Vec<Slot<L>>,
    matrix: Tridiagonal<L>,
}

/// Share of the last step that a phase which starts without a jump begins with.
const AFTER_KINK: f64 = 0.1;

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
            earlier: zeros.clone(),
            trial: zeros,
            follower_earlier: few.clone(),
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
            // A kink without a jump bends what follows: start with a part of the last step.
            Some(time) => (AFTER_KINK * time / longest).min(1.0),
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

    /// The first step after a jump: short enough that no unknown moves by more than thirty tolerances, by its rate (the jump of the flux into the
    /// outermost cell) or by the growth of its rate.
    fn first_step<S: System<L>>(&self, system: &S, settings: &Settings, length: Slot<L>, depends_on_time: bool) -> Result<f64, SolveError> {
        let allowed = 30.0 * settings.tolerance;
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
                // One pass over the earlier stages gives both the argument of this one and what they add to its right-hand side.
                sums(k, &self.unknowns, done, &mut self.trial, &mut self.earlier);
                sums(k, &self.followers, followers_done, &mut self.follower_trial, &mut self.follower_earlier);
                system.rate(share + ALPHA[k] * trial, &self.trial, &self.follower_trial, stage, follower_stage);
            }
            let bend = if depends_on_time { GAMMA_SUM[k] } else { 0.0 };
            right_hand_side(stage, &self.earlier, &self.rate_of_time, k > 0, bend, step);
            right_hand_side(follower_stage, &self.follower_earlier, &self.follower_rate_of_time, k > 0, bend, step);
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

/// The argument of stage `k` and what the earlier stages add to its right-hand side, in one pass over them.
fn sums<const L: usize>(k: usize, base: &[Slot<L>], stages: &[Vec<Slot<L>>], argument: &mut [Slot<L>], earlier: &mut [Slot<L>]) {
    fn pass<const K: usize>(base: &[f64], stages: [&[f64]; K], k: usize, argument: &mut [f64], earlier: &mut [f64]) {
        let len = base.len();
        let stages = stages.map(|stage| &stage[..len]);
        let (argument, earlier) = (&mut argument[..len], &mut earlier[..len]);
        let [a, c] = [&A[k], &C[k]].map(|row| std::array::from_fn::<f64, K, _>(|j| row[j]));
        for i in 0..len {
            let mut point = base[i];
            let mut sum = 0.0;
            for j in 0..K {
                let value = stages[j][i];
                point += a[j] * value;
                sum += c[j] * value;
            }
            argument[i] = point;
            earlier[i] = sum;
        }
    }
    let base = base.as_flattened();
    let (argument, earlier) = (argument.as_flattened_mut(), earlier.as_flattened_mut());
    let flat = |j: usize| stages[j].as_flattened();
    match k {
        1 => pass(base, [flat(0)], k, argument, earlier),
        2 => pass(base, [flat(0), flat(1)], k, argument, earlier),
        3 => pass(base, [flat(0), flat(1), flat(2)], k, argument, earlier),
        4 => pass(base, [flat(0), flat(1), flat(2), flat(3)], k, argument, earlier),
        5 => pass(base, [flat(0), flat(1), flat(2), flat(3), flat(4)], k, argument, earlier),
        6 => pass(base, [flat(0), flat(1), flat(2), flat(3), flat(4), flat(5)], k, argument, earlier),
        _ => pass(
            base,
            [flat(0), flat(1), flat(2), flat(3), flat(4), flat(5), flat(6)],
            k,
            argument,
            earlier,
        ),
    }
}

/// h · rate, what earlier stages add to it, and the time derivative's share.
fn right_hand_side<const L: usize>(
    stage: &mut [Slot<L>],
    earlier: &[Slot<L>],
    rate_of_time: &[Slot<L>],
    has_earlier: bool,
    bend: f64,
    step: Slot<L>,
) {
    let len = stage.len();
    let (earlier, rate_of_time) = (&earlier[..len], &rate_of_time[..len]);
    for i in 0..len {
        for l in 0..L {
            let added = if has_earlier { earlier[i][l] } else { 0.0 };
            stage[i][l] = step[l] * stage[i][l] + added;
        }
    }
    if bend != 0.0 {
        for i in 0..len {
            for l in 0..L {
                stage[i][l] += bend * step[l] * step[l] * rate_of_time[i][l];
            }
        }
    }
}

fn add<const L: usize>(out: &mut [Slot<L>], stage: &[Slot<L>]) {
    for (out, stage) in out.as_flattened_mut().iter_mut().zip(stage.as_flattened()) {
        *out += stage;
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
