//! Stations whose hot end follows a face of another: the other one runs first, and its face against time drives this one.

use super::accuracy::{Resolved, resolve};
use super::pass::PassSettings;
use crate::model::{FaceCourse, FollowedFace, Kelvin, KelvinDifference, Model, ModelError, Seconds};
use crate::run::{Course, Moment, RunError, Timeline};
use crate::solve::Flow;
use crate::wall::{Equilibrium, equilibrium};
use std::borrow::Cow;
use std::sync::atomic::AtomicBool;

/// The straight lines of a face's course leave its curve by no more than this, twice: once between the points read off a step, and once where points
/// are left out.
const STRAIGHT: KelvinDifference = 0.004;
/// A wall this near to its rest is there.
const AT_REST: KelvinDifference = 5e-4;

/// A station with the model that it runs in: where its hot end follows another, that one's course is in it.
#[derive(Clone, Debug)]
pub(super) struct ResolvedWall<'a> {
    pub model: Cow<'a, Model>,
    pub resolved: Resolved,
    index: usize,
}

impl ResolvedWall<'_> {
    /// The hottest that a followed face gets; `None`: the hot end follows none.
    pub fn hottest_followed(&self) -> Option<Kelvin> {
        let course = self.model.stations[self.index].followed()?.course.as_ref()?;
        Some(course.to_come(0.0).hottest)
    }
}

/// Resolves every station, each followed one before those that follow it, with settings for each place in that order.
pub(super) fn resolve_all<'a, 's>(model: &'a Model, settings: impl Fn(usize) -> PassSettings<'s>) -> Result<Vec<ResolvedWall<'a>>, RunError> {
    let mut walls: Vec<Option<ResolvedWall<'a>>> = vec![None; model.stations.len()];
    for (place, index) in order(model).into_iter().enumerate() {
        let settings = settings(place);
        let informed = informed(
            model,
            index,
            &|followed| walls[followed].as_ref().map(|wall| &wall.resolved),
            settings.stop,
        )?;
        let resolved = resolve(&informed, index, &settings)?;
        walls[index] = Some(ResolvedWall {
            model: informed,
            resolved,
            index,
        });
    }
    Ok(walls.into_iter().flatten().collect())
}

/// Indices of all stations, each followed one before those that follow it.
fn order(model: &Model) -> Vec<usize> {
    let depth = |index: usize| {
        let mut depth = 0;
        let mut at = index;
        while let Some(next) = model.followed_by(at).filter(|_| depth <= model.stations.len()) {
            depth += 1;
            at = next;
        }
        depth
    };
    let mut order: Vec<usize> = (0..model.stations.len()).collect();
    order.sort_by_key(|index| depth(*index));
    order
}

/// The model in which a station runs: as it is, or with the course of the face that its hot end follows, computed in this model on the grid that the
/// followed station was resolved on.
pub(super) fn informed<'a, 'r>(
    model: &'a Model,
    index: usize,
    resolved: &dyn Fn(usize) -> Option<&'r Resolved>,
    stop: Option<&AtomicBool>,
) -> Result<Cow<'a, Model>, RunError> {
    let Some(followed) = model.followed_by(index) else {
        return Ok(Cow::Borrowed(model));
    };
    let unknown = |source| RunError::Followed {
        station: model.stations[index].name.clone(),
        source,
    };
    let on = resolved(followed).ok_or_else(|| {
        unknown(ModelError::Missing {
            what: "a run of the followed station",
        })
    })?;
    let there = informed(model, followed, resolved, stop)?;
    let face = model.stations[index].followed().map_or(FollowedFace::Hot, |followed| followed.face());
    let (rows, rest) = face_course(&there, followed, face, on, stop)?;
    let course = FaceCourse::new(rows, rest, on.estimated_error + 2.0 * STRAIGHT).map_err(unknown)?;
    Ok(Cow::Owned(model.with_face_course(index, course)))
}

/// Rows of a face's course, and where it comes to rest.
type Rows = (Vec<(Seconds, Kelvin)>, Option<Kelvin>);

/// How a face of a station goes, until its wall is at rest or 100 h are over, and where it then stays.
fn face_course(model: &Model, index: usize, face: FollowedFace, on: &Resolved, stop: Option<&AtomicBool>) -> Result<Rows, RunError> {
    let station = &model.stations[index];
    let mut course = Course::new(station, &model.surroundings, &on.grid, model.start, on.step_tolerance);
    let node = match face {
        FollowedFace::Hot => 0,
        FollowedFace::Outer => course.wall.map(0).len() - 1,
    };
    let at_rest = Timeline::at_rest(model, station);
    let driver = station.followed().and_then(|followed| followed.course.as_deref());
    let mut rest: Option<Equilibrium> = None;
    let mut line = Line::default();
    course.drive(&Timeline::of_profile(model, station, None), stop, |moment| {
        read_off(moment, node, &mut line);
        if !moment.segment.open_ended {
            return Flow::Continue;
        }
        let Some(at_rest) = at_rest else { return Flow::Continue };
        let rest = rest.get_or_insert_with(|| {
            if driver.is_some_and(|driver| driver.rest().is_none()) {
                return Equilibrium::None;
            }
            let mut wall = moment.wall.clone();
            wall.set_forcing([at_rest]);
            equilibrium(&mut wall, moment.step.after)
        });
        if is_at_rest(moment, rest, driver) { Flow::Stop } else { Flow::Continue }
    })?;
    let rest = match &rest {
        Some(Equilibrium::At(nodes)) => nodes.get(node).copied(),
        Some(Equilibrium::Isolated(even)) => Some(*even),
        Some(Equilibrium::None) | None => None,
    };
    Ok((line.finish(), rest))
}

/// Whether every node, and a face that the wall itself follows, stand where they will stay.
fn is_at_rest(moment: &Moment<'_>, rest: &Equilibrium, driver: Option<&FaceCourse>) -> bool {
    let away = |node: usize| match rest {
        Equilibrium::At(nodes) => (moment.temperature(node, 1.0) - nodes[node]).abs(),
        Equilibrium::Isolated(even) => (moment.temperature(node, 1.0) - even).abs(),
        Equilibrium::None => f64::INFINITY,
    };
    let followed = driver.map_or(0.0, |driver| {
        let outlook = driver.to_come(moment.to);
        outlook.hottest - outlook.coolest
    });
    followed < AT_REST && (0..moment.map().len()).all(|node| away(node) < AT_REST)
}

/// Points of one step, close enough that straight lines between them follow the curve.
fn read_off(moment: &Moment<'_>, node: usize, line: &mut Line) {
    const MOST: f64 = 512.0;
    let at = |theta: f64| moment.temperature(node, theta);
    let (start, end) = (at(0.0), at(1.0));
    let away = |theta: f64| (at(theta) - start - theta * (end - start)).abs();
    let bend = [0.25, 0.5, 0.75].map(away).into_iter().fold(0.0, f64::max);
    // Halving the pieces of a smooth curve quarters how far it bends away from them; half as many again for curves that bend unevenly.
    let pieces = (1.5 * (bend / STRAIGHT).sqrt()).ceil().clamp(1.0, MOST) as u32;
    if line.is_empty() {
        line.push((moment.from, start));
    }
    for piece in 1..=pieces {
        let theta = f64::from(piece) / f64::from(pieces);
        line.push((moment.clock(theta), at(theta)));
    }
}

/// A polyline that leaves out points as long as straight lines stay within [`STRAIGHT`] of them (the "swinging door" of process data, Bristol 1990).
#[derive(Default)]
struct Line {
    kept: Vec<(Seconds, Kelvin)>,
    /// The last point seen, if it is not kept (yet).
    candidate: Option<(Seconds, Kelvin)>,
    /// Slopes from the last kept point that stay near all points since.
    door: (f64, f64),
}

impl Line {
    fn is_empty(&self) -> bool {
        self.kept.is_empty()
    }

    fn push(&mut self, point: (Seconds, Kelvin)) {
        let Some(anchor) = self.kept.last().copied() else {
            self.kept.push(point);
            self.door = (f64::NEG_INFINITY, f64::INFINITY);
            return;
        };
        let before = self.candidate.unwrap_or(anchor);
        if point.0 <= before.0 {
            return;
        }
        let slope = (point.1 - anchor.1) / (point.0 - anchor.0);
        let anchor = if slope < self.door.0 || slope > self.door.1 {
            self.kept.push(before);
            self.door = (f64::NEG_INFINITY, f64::INFINITY);
            before
        } else {
            anchor
        };
        let run = point.0 - anchor.0;
        self.door.0 = self.door.0.max((point.1 - STRAIGHT - anchor.1) / run);
        self.door.1 = self.door.1.min((point.1 + STRAIGHT - anchor.1) / run);
        self.candidate = Some(point);
    }

    fn finish(mut self) -> Vec<(Seconds, Kelvin)> {
        if let Some(last) = self.candidate.filter(|last| self.kept.last().is_none_or(|kept| last.0 > kept.0)) {
            self.kept.push(last);
        }
        self.kept
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_line_keeps_few_points_and_stays_near_all() -> Result<(), ModelError> {
        let curve = |time: f64| 300.0 + 500.0 * (1.0 - (-time).exp()) * (1.0 + 0.1 * (3.0 * time).sin());
        let points: Vec<_> = (0..20_000).map(|index| f64::from(index) * 5e-4).map(|time| (time, curve(time))).collect();
        let mut line = Line::default();
        points.iter().for_each(|point| line.push(*point));
        let kept = line.finish();
        assert!(kept.len() < 2000, "{}", kept.len());
        let course = FaceCourse::new(kept, None, 0.0)?;
        let worst = points.iter().map(|point| (course.at(point.0) - point.1).abs()).fold(0.0, f64::max);
        assert!(worst <= 1.000_001 * STRAIGHT, "{worst}");
        Ok(())
    }
}
