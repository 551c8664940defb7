//! One station of a model through its profile, segment by segment between kinks, and what is seen on the way.

mod course;
mod decide;
mod record;
mod timeline;
mod watch;

pub use course::{Course, Moment, RunError};
pub use decide::{LastPhase, Rest, SAME};
pub use record::{Recorder, TraceRow};
pub use timeline::{LONGEST, Segment, Timeline};
pub use watch::{Crossings, Level, Peak, Quantity, Watcher};
