//! A hot end that follows a face of another station.

use super::{Kelvin, KelvinDifference, ModelError, Seconds, WattsPerSquareMetreKelvin};
use std::sync::Arc;
use uom::si::f64::HeatTransfer;

/// Another station's face, which the hot end follows at all times, burn and after, through a conductance. One way: what it draws is not taken from
/// that wall.
#[derive(Clone, Debug, PartialEq)]
pub struct Followed {
    pub(crate) station: String,
    pub(crate) face: FollowedFace,
    pub(crate) conductance: WattsPerSquareMetreKelvin,
    /// How that face goes; `None` as long as that station has not run. Without it the face stands at the model's start temperature.
    pub(crate) course: Option<Arc<FaceCourse>>,
}

/// Which face of the other station.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum FollowedFace {
    /// The heated one.
    Hot,
    /// The one away from the heat.
    Outer,
}

impl FollowedFace {
    /// The word of the case file.
    pub fn word(self) -> &'static str {
        match self {
            Self::Hot => "hot-face",
            Self::Outer => "outer-face",
        }
    }
}

impl Followed {
    /// A face of a station by its name, through a conductance.
    ///
    /// # Errors
    /// When the conductance is not above zero.
    pub fn new(station: impl Into<String>, face: FollowedFace, conductance: HeatTransfer) -> Result<Self, ModelError> {
        Ok(Self {
            station: station.into(),
            face,
            conductance: ModelError::above_zero("conductance", conductance.value)?,
            course: None,
        })
    }

    /// The followed station's name.
    pub fn station(&self) -> &str {
        &self.station
    }

    /// Which of its faces.
    pub fn face(&self) -> FollowedFace {
        self.face
    }
}

/// A face's temperature against the clock: straight lines between rows, and where it comes to rest after the last.
#[derive(Clone, Debug, PartialEq)]
pub struct FaceCourse {
    rows: Vec<(Seconds, Kelvin)>,
    /// The hottest, the coolest, and whether it only falls, from each row on, the rest included.
    to_come: Vec<Outlook>,
    rest: Option<Kelvin>,
    error: KelvinDifference,
}

/// What a face does from some time on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Outlook {
    /// The hottest it gets.
    pub hottest: Kelvin,
    /// The coolest it gets.
    pub coolest: Kelvin,
    /// Whether it never rises.
    pub only_falls: bool,
}

impl FaceCourse {
    /// Rows of rising clocks from 0 on; where the face comes to rest for ever after the last row (`None`: nowhere), and how far off all that may be.
    ///
    /// # Errors
    /// When there is no row, or the clocks do not rise.
    pub fn new(rows: Vec<(Seconds, Kelvin)>, rest: Option<Kelvin>, error: KelvinDifference) -> Result<Self, ModelError> {
        let Some(last) = rows.last() else {
            return Err(ModelError::Missing {
                what: "a row of the followed face",
            });
        };
        if let Some(row) = rows.windows(2).position(|pair| pair[1].0 <= pair[0].0) {
            return Err(ModelError::NotRising {
                what: "course of the followed face",
                row: row + 2,
            });
        }
        let end = rest.unwrap_or(last.1);
        let mut outlook = Outlook {
            hottest: end,
            coolest: end,
            only_falls: true,
        };
        let mut after = end;
        let mut to_come: Vec<_> = rows
            .iter()
            .rev()
            .map(|row| {
                outlook = Outlook {
                    hottest: outlook.hottest.max(row.1),
                    coolest: outlook.coolest.min(row.1),
                    only_falls: outlook.only_falls && row.1 >= after,
                };
                after = row.1;
                outlook
            })
            .collect();
        to_come.reverse();
        Ok(Self { rows, to_come, rest, error })
    }

    /// Temperature at a clock.
    pub fn at(&self, clock: Seconds) -> Kelvin {
        let after = self.rows.partition_point(|row| row.0 <= clock);
        match (after.checked_sub(1).map(|before| self.rows[before]), self.rows.get(after)) {
            (Some(low), Some(high)) => low.1 + (high.1 - low.1) * (clock - low.0) / (high.0 - low.0),
            (Some(last), None) => self.rest.unwrap_or(last.1),
            (None, Some(first)) => first.1,
            (None, None) => 0.0,
        }
    }

    /// Clocks of the rows.
    pub fn clocks(&self) -> impl Iterator<Item = Seconds> + '_ {
        self.rows.iter().map(|row| row.0)
    }

    /// What comes from a clock on.
    pub fn to_come(&self, clock: Seconds) -> Outlook {
        let now = self.at(clock);
        let after = self.rows.partition_point(|row| row.0 <= clock);
        match (self.to_come.get(after), self.rows.get(after)) {
            (Some(outlook), Some(next)) => Outlook {
                hottest: outlook.hottest.max(now),
                coolest: outlook.coolest.min(now),
                only_falls: outlook.only_falls && next.1 <= now,
            },
            _ => Outlook {
                hottest: now,
                coolest: now,
                only_falls: true,
            },
        }
    }

    /// Where it comes to rest; `None`: nowhere.
    pub fn rest(&self) -> Option<Kelvin> {
        self.rest
    }

    /// How far off it may be.
    pub fn error(&self) -> KelvinDifference {
        self.error
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_course_knows_what_is_still_to_come() -> Result<(), ModelError> {
        let course = FaceCourse::new(vec![(0.0, 300.0), (2.0, 900.0), (10.0, 400.0), (20.0, 450.0)], Some(450.0), 0.01)?;
        assert_eq!([0.0, 1.0, 6.0, 99.0].map(|clock| course.at(clock)), [300.0, 600.0, 650.0, 450.0]);
        let outlook = |clock| {
            let outlook = course.to_come(clock);
            (outlook.hottest, outlook.coolest, outlook.only_falls)
        };
        assert_eq!(outlook(0.0), (900.0, 300.0, false));
        assert_eq!(outlook(6.0), (650.0, 400.0, false));
        assert_eq!(outlook(50.0), (450.0, 450.0, true));
        let falls = FaceCourse::new(vec![(0.0, 300.0), (2.0, 900.0), (10.0, 400.0)], Some(399.9), 0.0)?;
        assert!(!falls.to_come(1.0).only_falls && falls.to_come(2.0).only_falls && falls.to_come(3.0).only_falls);
        assert!(FaceCourse::new(vec![(0.0, 300.0), (0.0, 900.0)], None, 0.0).is_err());
        Ok(())
    }
}
