//! One way in which the forecast may turn out: a displaced track, another strength, another size.
//!
//! Errors are first-order autoregressive on nodes 12 h apart: z0 = e0, zk = phi z(k-1) + sqrt(1 - phi^2) ek,
//! with e from the standard normal distribution, for each of along, cross, intensity and size; an error is
//! deviation x z + bias.

use crate::arrival::course::{Course, Step};
use crate::arrival::keyed::{BLOCK, Component, Keyed};
use crate::arrival::landfall::History;
use crate::wind::climatology::radius_of_greatest_wind_nmi;
use crate::wind::field::Vortex;
use crate::wind::sphere::{EARTH_RADIUS_NMI, Vector, displaced, dot, plus};
use crate::wind::structure::{Change, Expected};
use std::cell::OnceCell;

/// The innovations of one block of scenarios: for each node and component, one number for each scenario.
#[derive(Clone, Debug)]
pub struct Draws {
    nodes: Vec<[Vec<f64>; 4]>,
}

impl Draws {
    /// Block number `block` (scenarios from `block * BLOCK` on) for a course.
    #[must_use]
    pub fn of(course: &Course, keyed: Keyed, block: usize) -> Draws {
        let nodes = (0..course.serial.len())
            .map(|node| Component::ALL.map(|component| keyed.normals(component, node, block)))
            .collect();
        Draws { nodes }
    }

    /// Standard errors at the nodes for the scenario `index` (counted over all blocks).
    fn standard_errors(&self, course: &Course, index: usize, out: &mut Vec<[f64; 4]>) {
        out.clear();
        let mut last = [0.0; 4];
        for (node, (serial, drawn)) in course.serial.iter().zip(&self.nodes).enumerate() {
            let mut fresh = [0.0; 4];
            for (e, numbers) in fresh.iter_mut().zip(drawn) {
                *e = numbers.get(index % BLOCK).copied().unwrap_or(0.0);
            }
            let rho = course.intensity_with_size;
            let [intensity, size] = [Component::Intensity.index(), Component::Size.index()];
            fresh[size] = rho * fresh[intensity] + f64::sqrt(1.0 - rho * rho) * fresh[size];
            for ((z, e), phi) in last.iter_mut().zip(fresh).zip(serial) {
                *z = if node == 0 { e } else { phi * *z + f64::sqrt(1.0 - phi * phi) * e };
            }
            out.push(last);
        }
    }
}

/// The least size of a storm as a multiple of its forecast. Our choice.
const LEAST_SIZE: f64 = 0.05;

/// How a storm is to be at one step.
#[derive(Clone, Copy, Debug)]
struct State {
    centre: Vector,
    change: Change,
}

impl State {
    /// `land` is what the scenario's own way over land makes of the forecast's wind.
    fn of(step: &Step, storm: &Expected, land: f64, [along, cross, intensity, size]: [f64; 4]) -> State {
        State {
            centre: displaced(step.centre, step.along, step.cross, along, cross),
            change: Change {
                wind_kt: (storm.wind_kt * land + intensity).clamp(0.0, 250.0),
                size: (1.0 + size).max(LEAST_SIZE),
            },
        }
    }

    /// A bound of the reach of 34 kt or of the core, n mi. Much cheaper than the reach itself, it keeps far places out of the inner loop.
    fn bound_nmi(&self, storm: &Expected) -> f64 {
        let core =
            storm.mean_gale_ratio * self.change.size * radius_of_greatest_wind_nmi(0.0, storm.latitude);
        storm.bound_nmi(&self.change).max(core)
    }
}

/// The storm at one stop of the course.
#[derive(Clone, Copy, Debug)]
struct Stop {
    centre: Vector,
    /// A bound of the reach of 34 kt, in radians.
    bound: f64,
    /// Square of the chord beyond which a place cannot meet 34 kt on the way to the next stop.
    far2: f64,
}

/// A realised storm at each step of a course. One value is refilled for every scenario; what lies between stops is
/// only worked out where it is looked at.
#[derive(Clone, Debug, Default)]
pub struct Scenario {
    /// Standard errors at the nodes; none for the forecast's own track.
    errors: Vec<[f64; 4]>,
    stops: Vec<Stop>,
    /// The greatest bound of the reach of 34 kt, and the longest way from stop to stop, in radians.
    widest: f64,
    fastest: f64,
    vortices: Vec<OnceCell<Vortex>>,
    /// At each step the factor on the forecast's wind by the scenario's own way over land; empty far from land.
    land: Vec<f64>,
}

impl Scenario {
    /// Fills in the scenario `index`.
    pub fn draw(&mut self, course: &Course, draws: &Draws, index: usize) {
        draws.standard_errors(course, index, &mut self.errors);
        self.fill(course);
    }

    /// Fills in the forecast itself, without any error.
    pub fn single_track(&mut self, course: &Course) {
        self.errors.clear();
        self.fill(course);
    }

    /// The errors along, across, in intensity and size at a step.
    fn error(&self, step: &Step) -> [f64; 4] {
        match (self.errors.get(step.node), self.errors.get(step.node + 1)) {
            (Some(now), Some(next)) => std::array::from_fn(|i| {
                step.from_node[i] * now[i] + step.from_next[i] * next[i] + step.bias[i]
            }),
            _ => [0.0; 4],
        }
    }

    fn state<'a>(&self, course: &'a Course, k: usize) -> Option<(State, &'a Expected)> {
        let (step, storm) = (course.steps.get(k)?, course.storms.get(k)?);
        let land = self.land.get(k).copied().unwrap_or(1.0);
        Some((State::of(step, storm, land, self.error(step)), storm))
    }

    fn fill(&mut self, course: &Course) {
        self.vortices.clear();
        self.vortices.resize_with(course.steps.len(), OnceCell::new);
        self.stops.clear();
        self.cross_land(course);
        self.widest = 0.0;
        // Never nothing: a storm that stands still is looked at again after a day or so.
        self.fastest = 1.0 / EARTH_RADIUS_NMI;
        for k in &course.stops {
            let Some((state, storm)) = self.state(course, *k) else { continue };
            let bound = state.bound_nmi(storm) / EARTH_RADIUS_NMI;
            self.widest = self.widest.max(bound);
            if let Some(last) = self.stops.last_mut() {
                let moved = plus(state.centre, -1.0, last.centre);
                let way = f64::sqrt(dot(moved, moved));
                self.fastest = self.fastest.max(way);
                let far = bound.max(last.bound) + way;
                last.far2 = far * far;
            }
            self.stops.push(Stop { centre: state.centre, bound, far2: bound * bound });
        }
    }

    /// The factors of land, worked out at the stops and linear between them; from the end of the forecast on they stay.
    fn cross_land(&mut self, course: &Course) {
        self.land.clear();
        let Some(landfall) = &course.land else { return };
        let mut history = History::new();
        let mut last = (0, 1.0);
        for k in course.stops.iter().copied().take_while(|k| *k <= course.end) {
            let Some(step) = course.steps.get(k) else { break };
            let [along, cross, ..] = self.error(step);
            let centre = displaced(step.centre, step.along, step.cross, along, cross);
            let factor = landfall.factor(&mut history, course.waypoint(step, centre));
            let (from, before) = if k == 0 { (0, factor) } else { last };
            for between in from..k {
                let share = (between - from) as f64 / (k - from) as f64;
                self.land.push(before + (factor - before) * share);
            }
            last = (k, factor);
        }
        self.land.resize(course.steps.len(), last.1);
    }

    /// For how many stops from number `stop` on no wind can reach `place`, when it reaches at most `widening` times
    /// as far as 34 kt; 0 if it may there, at the next stop or on the way.
    #[must_use]
    pub fn stops_out_of_reach(&self, stop: usize, place: Vector, widening: f64) -> usize {
        let Some(here) = self.stops.get(stop) else { return 1 };
        let from_here = plus(place, -1.0, here.centre);
        let distance2 = dot(from_here, from_here);
        if distance2 > here.far2 * widening * widening {
            // However it goes on, the storm needs this long to come near enough.
            let stops = (f64::sqrt(distance2) - self.widest * widening) / self.fastest;
            return (stops as usize).max(1);
        }
        let Some(next) = self.stops.get(stop + 1) else { return 0 };
        let from_next = plus(place, -1.0, next.centre);
        let reach = here.bound.max(next.bound) * widening;
        let nearer2 = distance2.min(dot(from_next, from_next));
        let moved = plus(next.centre, -1.0, here.centre);
        let passes = dot(from_here, moved) > 0.0 && dot(from_next, moved) < 0.0;
        usize::from(nearer2 > reach * reach && !passes)
    }

    /// The centre at step `k`, and the mean reach of 34 kt (n mi) that a storm of this strength and size has, or would
    /// have were it of gale force; `None` beyond the last step.
    #[must_use]
    pub fn gale_reach_nmi(&self, course: &Course, k: usize) -> Option<(Vector, f64)> {
        let (state, storm) = self.state(course, k)?;
        Some((state.centre, storm.mean_gale_nmi(&state.change)))
    }

    /// The realised storm at step `k`; `None` beyond the last step.
    #[must_use]
    pub fn vortex(&self, course: &Course, k: usize) -> Option<&Vortex> {
        let kept = self.vortices.get(k)?;
        if let Some(vortex) = kept.get() {
            return Some(vortex);
        }
        let (state, storm) = self.state(course, k)?;
        Some(kept.get_or_init(|| Vortex::realised(storm, state.centre, &state.change)))
    }
}
