//! Random numbers that depend on what they are for, not on when or where they are drawn.
//!
//! Each number is a hash of storm, component, lead node and scenario. So the same forecast issued again gives
//! the same answer, scenarios of two advisories of one storm are comparable one by one, and neither the
//! number of threads nor the order of the questions matters.

/// Scenarios are drawn in blocks of this many; within a block each node's numbers are spread evenly (one in
/// each thousandth), which makes shares and quantiles steadier than independent draws would (Latin hypercube
/// sampling: McKay, Beckman & Conover 1979, Technometrics 21:239-245).
pub const BLOCK: usize = 1000;

/// The bits that hold a scenario's number within its block.
const NUMBER: u64 = 1023;

/// What a number disturbs.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Component {
    /// The centre, along its motion.
    Along,
    /// The centre, across its motion.
    Cross,
    /// The greatest wind.
    Intensity,
    /// The wind radii.
    Size,
}

impl Component {
    /// All four, in the order in which arrays hold them.
    pub const ALL: [Component; 4] =
        [Component::Along, Component::Cross, Component::Intensity, Component::Size];

    /// Its place in such arrays.
    #[must_use]
    pub fn index(self) -> usize {
        match self {
            Component::Along => 0,
            Component::Cross => 1,
            Component::Intensity => 2,
            Component::Size => 3,
        }
    }
}

/// The source of all numbers for one storm.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Keyed(u64);

impl Keyed {
    /// The numbers of the storm with this name or number; letter case and outer blanks do not matter.
    #[must_use]
    pub fn storm(name: &str) -> Keyed {
        // FNV-1a, 64 bits (Fowler, Noll & Vo; constants of the published reference).
        let hash = name.trim().bytes().fold(0xcbf2_9ce4_8422_2325_u64, |h, b| {
            (h ^ u64::from(b.to_ascii_uppercase())).wrapping_mul(0x0100_0000_01b3)
        });
        Keyed(mixed(hash))
    }

    /// Standard normal numbers for one block of scenarios, one component, one lead node.
    #[must_use]
    pub fn normals(self, component: Component, node: usize, block: usize) -> Vec<f64> {
        let stream = mixed(mixed(self.0 ^ (component.index() as u64 + 1)) ^ ((node as u64 + 1) << 20));
        let first = block * BLOCK;
        let hash = |i: usize| mixed(stream ^ (((first + i) as u64) << 1));
        // Ranking hashes gives each scenario of the block its own thousandth, in random order. The hash's last bits
        // make room for the scenario, as single numbers are sorted faster than pairs.
        let mut order: Vec<u64> = (0..BLOCK).map(|i| (hash(i) & !NUMBER) | i as u64).collect();
        order.sort_unstable();
        let mut normals = vec![0.0; BLOCK];
        for (rank, ordered) in order.into_iter().enumerate() {
            let scenario = (ordered & NUMBER) as usize;
            let within = (mixed(hash(scenario) ^ 1) >> 11) as f64 + 0.5;
            let share = (rank as f64 + within / (1_u64 << 53) as f64) / BLOCK as f64;
            if let Some(out) = normals.get_mut(scenario) {
                *out = normal_quantile(share);
            }
        }
        normals
    }
}

/// The finaliser of SplitMix64 (Steele, Lea & Flood 2014, "Fast splittable pseudorandom number generators",
/// OOPSLA): every bit of the input stirs every bit of the output.
fn mixed(x: u64) -> u64 {
    let x = x.wrapping_add(0x9e37_79b9_7f4a_7c15);
    let x = (x ^ (x >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    let x = (x ^ (x >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    x ^ (x >> 31)
}

/// The standard normal deviate below which a share `p` lies, 0 < p < 1 (held within 1e-300 of the ends).
///
/// Algorithm AS 241, routine PPND16 (Wichura 1988, Applied Statistics 37:477-484): about 1 part in 10^16.
#[must_use]
pub fn normal_quantile(p: f64) -> f64 {
    let p = p.clamp(1e-300, 1.0 - f64::EPSILON / 2.0);
    let q = p - 0.5;
    if q.abs() <= 0.425 {
        let r = 0.180_625 - q * q;
        return q * ratio(&CENTRE, r);
    }
    let tail = if q < 0.0 { p } else { 1.0 - p };
    let r = f64::sqrt(-libm::log(tail));
    let size = if r <= 5.0 { ratio(&MIDDLE, r - 1.6) } else { ratio(&TAIL, r - 5.0) };
    if q < 0.0 { -size } else { size }
}

/// Numerator and denominator coefficients, lowest power first.
type Rational = ([f64; 8], [f64; 8]);

fn ratio((top, bottom): &Rational, r: f64) -> f64 {
    let value = |c: &[f64; 8]| c.iter().rev().fold(0.0, |sum, term| sum * r + term);
    value(top) / value(bottom)
}

const CENTRE: Rational = (
    [
        3.387_132_872_796_366_5,
        1.331_416_678_917_843_8e2,
        1.971_590_950_306_551_3e3,
        1.373_169_376_550_946e4,
        4.592_195_393_154_987e4,
        6.726_577_092_700_87e4,
        3.343_057_558_358_813e4,
        2.509_080_928_730_122_7e3,
    ],
    [
        1.0,
        4.231_333_070_160_091e1,
        6.871_870_074_920_579e2,
        5.394_196_021_424_751e3,
        2.121_379_430_158_659_7e4,
        3.930_789_580_009_271e4,
        2.872_908_573_572_194_3e4,
        5.226_495_278_852_854e3,
    ],
);

const MIDDLE: Rational = (
    [
        1.423_437_110_749_683_5,
        4.630_337_846_156_546,
        5.769_497_221_460_691,
        3.647_848_324_763_204_5,
        1.270_458_252_452_368_4,
        2.417_807_251_774_506e-1,
        2.272_384_498_926_918_4e-2,
        7.745_450_142_783_414e-4,
    ],
    [
        1.0,
        2.053_191_626_637_759,
        1.676_384_830_183_803_8,
        6.897_673_349_851e-1,
        1.481_039_764_274_800_8e-1,
        1.519_866_656_361_645_7e-2,
        5.475_938_084_995_345e-4,
        1.050_750_071_644_416_9e-9,
    ],
);

const TAIL: Rational = (
    [
        6.657_904_643_501_103,
        5.463_784_911_164_114,
        1.784_826_539_917_291_3,
        2.965_605_718_285_048_7e-1,
        2.653_218_952_657_612_4e-2,
        1.242_660_947_388_078_4e-3,
        2.711_555_568_743_487_6e-5,
        2.010_334_399_292_288_1e-7,
    ],
    [
        1.0,
        5.998_322_065_558_88e-1,
        1.369_298_809_227_358e-1,
        1.487_536_129_085_061_5e-2,
        7.868_691_311_456_133e-4,
        1.846_318_317_510_054_8e-5,
        1.421_511_758_316_446e-7,
        2.044_263_103_389_939_8e-15,
    ],
);

#[cfg(test)]
mod tests {
    use super::{BLOCK, Component, Keyed, normal_quantile};
    use approx::assert_relative_eq;

    #[test]
    fn normal_quantiles_agree_with_tables_and_with_the_error_function() {
        // AS 241's own check values.
        assert_relative_eq!(normal_quantile(0.25), -0.674_489_750_196_081_7, max_relative = 1e-14);
        assert_relative_eq!(normal_quantile(0.001), -3.090_232_306_167_813_5, max_relative = 1e-14);
        assert_relative_eq!(normal_quantile(1e-20), -9.262_340_089_798_408, max_relative = 1e-14);
        for p in [1e-12, 1e-4, 0.02, 0.1, 0.3, 0.5001, 0.8, 0.95, 0.9999] {
            let back = libm::erfc(-normal_quantile(p) / std::f64::consts::SQRT_2) / 2.0;
            assert_relative_eq!(back, p, max_relative = 1e-12);
        }
    }

    #[test]
    fn each_thousandth_of_the_distribution_is_drawn_once_in_a_block() {
        let mut shares: Vec<usize> = Keyed::storm("AL122024")
            .normals(Component::Cross, 3, 2)
            .into_iter()
            .map(|z| (libm::erfc(-z / std::f64::consts::SQRT_2) / 2.0 * BLOCK as f64) as usize)
            .collect();
        shares.sort_unstable();
        assert_eq!(shares, (0..BLOCK).collect::<Vec<_>>());
    }

    #[test]
    fn nodes_components_blocks_and_storms_are_uncorrelated() {
        let base = Keyed::storm("AL122024").normals(Component::Along, 0, 0);
        let others = [
            Keyed::storm("AL122024").normals(Component::Along, 1, 0),
            Keyed::storm("AL122024").normals(Component::Cross, 0, 0),
            Keyed::storm("AL122024").normals(Component::Along, 0, 1),
            Keyed::storm("AL132024").normals(Component::Along, 0, 0),
        ];
        for other in others {
            let correlation: f64 = base.iter().zip(&other).map(|(a, b)| a * b).sum::<f64>() / BLOCK as f64;
            // Four standard deviations of a correlation among 1,000 pairs.
            assert!(correlation.abs() < 0.127, "{correlation}");
        }
    }
}
