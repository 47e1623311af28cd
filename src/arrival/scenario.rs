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

/// A realised storm at each step of a course. One value is refilled for every scenario.
#[derive(Clone, Debug, Default)]
pub struct Scenario {
    errors: Vec<[f64; 4]>,
    centres: Vec<Vector>,
    winds_kt: Vec<f64>,
    sizes: Vec<f64>,
    /// Square of the chord beyond which a place cannot meet 34 kt within the hour after a step.
    far2: Vec<f64>,
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
        self.fill(course, |step, i| {
            let (now, next) = step.weights[i];
            let z = |node: usize| errors.get(node).map_or(0.0, |z| z[i]);
            step.deviation[i] * (now * z(step.node) + next * z(step.node + 1)) + step.bias[i]
        });
        self.errors = errors;
    }

    /// Fills in the forecast itself, without any error.
    pub fn single_track(&mut self, course: &Course) {
        self.fill(course, |_, _| 0.0);
    }

    fn fill(&mut self, course: &Course, error: impl Fn(&Step, usize) -> f64) {
        let [along, cross, intensity, size] = Component::ALL.map(Component::index);
        self.centres.clear();
        self.winds_kt.clear();
        self.sizes.clear();
        let mut bounds = Vec::with_capacity(course.steps.len());
        for step in &course.steps {
            let wind = (step.expected.wind_kt + error(step, intensity)).clamp(0.0, 250.0);
            let scale = libm::exp(error(step, size));
            self.centres.push(displaced(
                step.centre,
                step.along,
                step.cross,
                error(step, along),
                error(step, cross),
            ));
            self.winds_kt.push(wind);
            self.sizes.push(scale);
            bounds.push(scale * step.bound_nmi(wind));
        }
        self.far2.clear();
        self.widest = bounds.iter().copied().fold(0.0, f64::max) / EARTH_RADIUS_NMI;
        // Never nothing: a storm that stands still is looked at again after a day or so.
        self.fastest = 1.0 / EARTH_RADIUS_NMI;
        for (centres, reach) in self.centres.windows(2).zip(bounds.windows(2)) {
            let ([from, to], [a, b]) = (centres, reach) else { continue };
            let moved = plus(*to, -1.0, *from);
            let way = f64::sqrt(dot(moved, moved));
            let far = a.max(*b) / EARTH_RADIUS_NMI + way;
            self.fastest = self.fastest.max(way);
            self.far2.push(far * far);
        }
        let last = bounds.last().copied().unwrap_or(0.0) / EARTH_RADIUS_NMI;
        self.far2.push(last * last);
        self.vortices.clear();
        self.vortices.resize(course.steps.len(), None);
    }

    /// For how many hours from step `k` on no wind can reach `place`, when it reaches at most `widening` times as
    /// far as 34 kt; 0 if it may in the hour after `k`.
    #[must_use]
    pub fn hours_out_of_reach(&self, k: usize, place: Vector, widening: f64) -> usize {
        let (Some(centre), Some(far2)) = (self.centres.get(k), self.far2.get(k)) else { return 1 };
        let between = plus(place, -1.0, *centre);
        let distance2 = dot(between, between);
        if distance2 <= far2 * widening * widening {
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
            let (Some(kept), Some(step)) = (self.vortices.get_mut(at), course.steps.get(at)) else {
                continue;
            };
            let state = (self.centres.get(at), self.winds_kt.get(at), self.sizes.get(at));
            if let (None, (Some(centre), Some(wind), Some(size))) = (&kept, state) {
                *kept = Some(Vortex::realised(&step.expected, *centre, *wind, *size));
            }
        }
    }

    /// The realised storm at step `k`; `None` if it was not prepared.
    #[must_use]
    pub fn vortex(&self, k: usize) -> Option<&Vortex> {
        self.vortices.get(k)?.as_ref()
    }
}
