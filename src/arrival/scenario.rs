//! One way in which the forecast may turn out: a displaced track, another strength, another size.
//!
//! Errors are first-order autoregressive on nodes 12 h apart: z0 = e0, zk = phi z(k-1) + sqrt(1 - phi^2) ek,
//! with e from the standard normal distribution, for each of along, cross, intensity and size; an error is
//! deviation x z + bias.

use crate::arrival::course::{Course, Step};
use crate::arrival::keyed::{BLOCK, Component, Keyed};
use crate::wind::field::Vortex;
use crate::wind::sphere::{EARTH_RADIUS_NMI, Vector, displaced, dot, plus};

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

/// One step of a scenario: how the storm is to be there.
#[derive(Clone, Copy, Debug)]
struct State {
    centre: Vector,
    wind_kt: f64,
    /// Natural logarithm of the size error.
    log_size: f64,
    /// Square of the way to the next centre, in radians.
    way2: f64,
    /// Square of the chord beyond which a place cannot meet 34 kt within the hour that follows.
    far2: f64,
}

/// A realised storm at each step of a course. One value is refilled for every scenario.
#[derive(Clone, Debug, Default)]
pub struct Scenario {
    errors: Vec<[f64; 4]>,
    states: Vec<State>,
    /// The greatest bound of the reach of 34 kt, and the longest way of the centre in an hour, in radians.
    widest: f64,
    fastest: f64,
    vortices: Vec<Option<Vortex>>,
}

impl Scenario {
    /// Fills in the scenario `index`.
    pub fn draw(&mut self, course: &Course, draws: &Draws, index: usize) {
        let mut errors = std::mem::take(&mut self.errors);
        draws.standard_errors(course, index, &mut errors);
        self.fill(course, |step, node| {
            let z = |node: usize| errors.get(node).copied().unwrap_or_default();
            let (now, next) = (z(node), z(node + 1));
            std::array::from_fn(|i| step.from_node[i] * now[i] + step.from_next[i] * next[i] + step.bias[i])
        });
        self.errors = errors;
    }

    /// Fills in the forecast itself, without any error.
    pub fn single_track(&mut self, course: &Course) {
        self.fill(course, |_, _| [0.0; 4]);
    }

    fn fill(&mut self, course: &Course, error: impl Fn(&Step, usize) -> [f64; 4]) {
        self.states.clear();
        for stretch in &course.stretches {
            let range = stretch.first..stretch.end;
            let (Some(steps), Some(storms)) = (course.steps.get(range.clone()), course.storms.get(range))
            else {
                continue;
            };
            for (step, storm) in steps.iter().zip(storms) {
                let [along, cross, intensity, size] = error(step, stretch.node);
                let centre = displaced(step.centre, step.along, step.cross, along, cross);
                if let Some(last) = self.states.last_mut() {
                    let moved = plus(centre, -1.0, last.centre);
                    last.way2 = dot(moved, moved);
                }
                let wind_kt = (storm.expected.wind_kt + intensity).clamp(0.0, 250.0);
                self.states.push(State { centre, wind_kt, log_size: size, way2: 0.0, far2: 0.0 });
            }
        }
        self.bound(course);
        self.vortices.clear();
        self.vortices.resize(course.steps.len(), None);
    }

    /// How near the storm must come to a place, with one bound for all steps of a stretch.
    fn bound(&mut self, course: &Course) {
        self.widest = 0.0;
        // Never nothing: a storm that stands still is looked at again after a day or so.
        self.fastest = 1.0 / EARTH_RADIUS_NMI;
        for stretch in &course.stretches {
            let (mut wind_kt, mut log_size, mut way2) = (0.0, f64::MIN, 0.0);
            // The last hour ends with the first step of the next stretch.
            for state in self.states.iter().take(stretch.end + 1).skip(stretch.first) {
                wind_kt = f64::max(wind_kt, state.wind_kt);
                log_size = f64::max(log_size, state.log_size);
                way2 = f64::max(way2, state.way2);
            }
            let bound = libm::exp(log_size) * stretch.bound_nmi(wind_kt) / EARTH_RADIUS_NMI;
            let way = f64::sqrt(way2);
            self.widest = self.widest.max(bound);
            self.fastest = self.fastest.max(way);
            for state in self.states.iter_mut().take(stretch.end).skip(stretch.first) {
                state.far2 = (bound + way) * (bound + way);
            }
        }
    }

    /// For how many hours from step `k` on no wind can reach `place`, when it reaches at most `widening` times as
    /// far as 34 kt; 0 if it may in the hour after `k`.
    #[must_use]
    pub fn hours_out_of_reach(&self, k: usize, place: Vector, widening: f64) -> usize {
        let Some(state) = self.states.get(k) else { return 1 };
        let between = plus(place, -1.0, state.centre);
        let distance2 = dot(between, between);
        if distance2 <= state.far2 * widening * widening {
            return 0;
        }
        // However it goes on, the storm needs this long to come near enough.
        let hours = (f64::sqrt(distance2) - self.widest * widening) / self.fastest;
        (hours as usize).max(1)
    }

    /// Makes sure that the realised storms at step `k` and at the next are there; they are made when first
    /// needed.
    pub fn prepare(&mut self, course: &Course, k: usize) {
        for at in [k, k + 1] {
            if let (Some(kept), Some(state), Some(storm)) =
                (self.vortices.get_mut(at), self.states.get(at), course.storms.get(at))
                && kept.is_none()
            {
                let size = libm::exp(state.log_size);
                *kept = Some(Vortex::realised(storm, state.centre, state.wind_kt, size));
            }
        }
    }

    /// The realised storm at step `k`; `None` if it was not prepared.
    #[must_use]
    pub fn vortex(&self, k: usize) -> Option<&Vortex> {
        self.vortices.get(k)?.as_ref()
    }
}
