//! What the engine does, phase by phase.

use super::{ModelError, Seconds};
use uom::si::f64::Time;

/// What kind of phase it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PhaseKind {
    /// The engine burns.
    Burn,
    /// The gas is off; another phase follows.
    Hold,
    /// The gas is off for good: the last phase.
    Shutdown,
}

impl PhaseKind {
    /// The word of the case file.
    pub fn word(self) -> &'static str {
        match self {
            Self::Burn => "burn",
            Self::Hold => "hold",
            Self::Shutdown => "shutdown",
        }
    }
}

/// One phase of the profile.
#[derive(Clone, Debug, PartialEq)]
pub struct Phase {
    pub(crate) kind: PhaseKind,
    pub(crate) duration: Seconds,
    /// Chamber pressure over its design value; 1 unless throttled. Only burns use it.
    pub(crate) level: f64,
    /// Linear rise of the heating scale at the start of a burn.
    pub(crate) ramp: Seconds,
    /// Linear fall of the heating after the end of a burn, on top of what the next phase does.
    pub(crate) tail: Seconds,
    /// Whether the purge is on (holds and shutdown).
    pub(crate) purge: bool,
    /// Whether the coolant flows in this burn, if there is one.
    pub(crate) coolant: bool,
}

impl Phase {
    /// A burn at level 1 without ramp and tail, with its coolant on.
    ///
    /// # Errors
    /// When the duration is not above zero.
    pub fn burn(duration: Time) -> Result<Self, ModelError> {
        Self::of(PhaseKind::Burn, duration)
    }

    /// A hold without purge.
    ///
    /// # Errors
    /// When the duration is not above zero.
    pub fn hold(duration: Time) -> Result<Self, ModelError> {
        Self::of(PhaseKind::Hold, duration)
    }

    /// The shutdown, without purge. The run goes on with it until its questions are decided.
    ///
    /// # Errors
    /// When the duration is negative.
    pub fn shutdown(duration: Time) -> Result<Self, ModelError> {
        ModelError::not_negative("duration", duration.value)?;
        Ok(Self {
            duration: duration.value,
            ..Self::of(PhaseKind::Shutdown, Time::new::<uom::si::time::second>(1.0))?
        })
    }

    fn of(kind: PhaseKind, duration: Time) -> Result<Self, ModelError> {
        let duration = ModelError::above_zero("duration", duration.value)?;
        Ok(Self {
            kind,
            duration,
            level: 1.0,
            ramp: 0.0,
            tail: 0.0,
            purge: false,
            coolant: true,
        })
    }

    /// The same burn at another level (chamber pressure over its design value).
    ///
    /// # Errors
    /// When the level is negative.
    pub fn at_level(mut self, level: f64) -> Result<Self, ModelError> {
        self.level = ModelError::not_negative("level", level)?;
        Ok(self)
    }

    /// The same burn with a linear rise at its start and a linear fall after its end.
    ///
    /// # Errors
    /// When either is negative.
    pub fn with_ramp_and_tail(mut self, ramp: Time, tail: Time) -> Result<Self, ModelError> {
        self.ramp = ModelError::not_negative("ramp", ramp.value)?;
        self.tail = ModelError::not_negative("tail", tail.value)?;
        Ok(self)
    }

    /// The same phase with the purge on or off.
    #[must_use]
    pub fn with_purge(mut self, purge: bool) -> Self {
        self.purge = purge;
        self
    }

    /// The same burn with the coolant on or off.
    #[must_use]
    pub fn with_coolant(mut self, coolant: bool) -> Self {
        self.coolant = coolant;
        self
    }

    /// What kind of phase it is.
    pub fn kind(&self) -> PhaseKind {
        self.kind
    }

    /// How long it lasts, s.
    pub fn duration(&self) -> Seconds {
        self.duration
    }

    /// Heating scale of a burn in steady flow: level^0.8, as turbulent convection goes with mass flow (Bartz 1957; Dittus & Boelter 1930).
    pub fn scale(&self) -> f64 {
        self.level.powf(0.8)
    }
}

/// The phases in order, written out, ending with the shutdown.
#[derive(Clone, Debug, PartialEq)]
pub struct Profile {
    phases: Vec<Phase>,
}

impl Profile {
    /// A profile of these phases; a shutdown of no length is added where the last phase is none.
    pub fn new(mut phases: Vec<Phase>) -> Self {
        if phases.last().is_none_or(|phase| phase.kind != PhaseKind::Shutdown) {
            phases.push(Phase {
                kind: PhaseKind::Shutdown,
                duration: 0.0,
                level: 1.0,
                ramp: 0.0,
                tail: 0.0,
                purge: false,
                coolant: true,
            });
        }
        Self { phases }
    }

    /// The phases.
    pub fn phases(&self) -> &[Phase] {
        &self.phases
    }

    /// Index of the last burn.
    pub fn last_burn(&self) -> Option<usize> {
        self.phases.iter().rposition(|phase| phase.kind == PhaseKind::Burn)
    }

    /// When each phase starts, and at last when the written profile ends, s.
    pub fn starts(&self) -> Vec<Seconds> {
        let mut clock = 0.0;
        let mut starts = vec![0.0];
        for phase in &self.phases {
            clock += phase.duration;
            starts.push(clock);
        }
        starts
    }

    /// End of the last burn (the command, before a tail), s.
    pub fn last_burn_end(&self) -> Option<Seconds> {
        self.last_burn().map(|index| self.starts()[index + 1])
    }
}
