//! The tidal constituents: their names, speeds and arguments.

use crate::tide::astronomy::{Astronomy, Nodal};
use crate::tide::error::TideError;

/// A tidal constituent, by its name in the IHO's list.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
#[expect(missing_docs, reason = "each variant is the name itself")]
pub enum Constituent {
    M2,
    S2,
    N2,
    K2,
    K1,
    O1,
    P1,
    Q1,
    M4,
    MS4,
    MN4,
    M6,
    Nu2,
    Mu2,
    TwoN2,
    L2,
    T2,
    S1,
    Mm,
    Mf,
    MSf,
    Ssa,
    Sa,
}

/// What defines a constituent.
struct Row {
    name: &'static str,
    /// Multiples of t15, s, h, p and p1 in the argument V.
    multiples: [i8; 5],
    /// Degrees added to V.
    plus: f64,
    nodal: Nodal,
}

impl Constituent {
    /// All constituents known here.
    pub const ALL: [Constituent; 23] = [
        Constituent::M2,
        Constituent::S2,
        Constituent::N2,
        Constituent::K2,
        Constituent::K1,
        Constituent::O1,
        Constituent::P1,
        Constituent::Q1,
        Constituent::M4,
        Constituent::MS4,
        Constituent::MN4,
        Constituent::M6,
        Constituent::Nu2,
        Constituent::Mu2,
        Constituent::TwoN2,
        Constituent::L2,
        Constituent::T2,
        Constituent::S1,
        Constituent::Mm,
        Constituent::Mf,
        Constituent::MSf,
        Constituent::Ssa,
        Constituent::Sa,
    ];

    /// The constituent of a name, "M2" or "2N2"; small letters will do.
    ///
    /// # Errors
    /// [`TideError::UnknownConstituent`], with the names known.
    pub fn named(name: &str) -> Result<Constituent, TideError> {
        let wanted = name.trim();
        Constituent::ALL.into_iter().find(|known| known.name().eq_ignore_ascii_case(wanted)).ok_or_else(
            || TideError::UnknownConstituent {
                name: name.to_owned(),
                known: Constituent::ALL.map(Constituent::name).join(", "),
            },
        )
    }

    /// Its name in capitals, as files write it.
    #[must_use]
    pub fn name(self) -> &'static str {
        self.row().name
    }

    /// How fast its argument grows, in degrees an hour.
    #[must_use]
    pub fn speed(self) -> f64 {
        self.row().multiples.iter().zip(Astronomy::RATES).map(|(times, rate)| f64::from(*times) * rate).sum()
    }

    /// Its argument V in degrees (not reduced to a circle) for the longitudes at an instant.
    #[must_use]
    pub fn argument(self, at: &Astronomy) -> f64 {
        let row = self.row();
        let longitudes = [at.t15, at.s, at.h, at.p, at.p1];
        row.plus + row.multiples.iter().zip(longitudes).map(|(times, x)| f64::from(*times) * x).sum::<f64>()
    }

    /// How the moon's node changes it.
    #[must_use]
    pub fn nodal(self) -> Nodal {
        self.row().nodal
    }

    /// Arguments after Schureman (1940) and the IHO's list, hours counted from midnight UTC (Schureman counts the sun's
    /// hour angle from noon: a constituent once a day differs by 180 degrees).
    ///
    /// SA follows the IHO: V = h. Constants fitted with V = h - p1, as some libraries do, must be converted first.
    fn row(self) -> Row {
        let row = |name, multiples, plus, nodal| Row { name, multiples, plus, nodal };
        match self {
            Constituent::M2 => row("M2", [2, -2, 2, 0, 0], 0.0, Nodal::M2(1)),
            Constituent::S2 => row("S2", [2, 0, 0, 0, 0], 0.0, Nodal::Steady),
            Constituent::N2 => row("N2", [2, -3, 2, 1, 0], 0.0, Nodal::M2(1)),
            Constituent::K2 => row("K2", [2, 0, 2, 0, 0], 0.0, Nodal::K2),
            Constituent::K1 => row("K1", [1, 0, 1, 0, 0], 90.0, Nodal::K1),
            Constituent::O1 => row("O1", [1, -2, 1, 0, 0], -90.0, Nodal::O1),
            Constituent::P1 => row("P1", [1, 0, -1, 0, 0], -90.0, Nodal::Steady),
            Constituent::Q1 => row("Q1", [1, -3, 1, 1, 0], -90.0, Nodal::O1),
            Constituent::M4 => row("M4", [4, -4, 4, 0, 0], 0.0, Nodal::M2(2)),
            Constituent::MS4 => row("MS4", [4, -2, 2, 0, 0], 0.0, Nodal::M2(1)),
            Constituent::MN4 => row("MN4", [4, -5, 4, 1, 0], 0.0, Nodal::M2(2)),
            Constituent::M6 => row("M6", [6, -6, 6, 0, 0], 0.0, Nodal::M2(3)),
            Constituent::Nu2 => row("NU2", [2, -3, 4, -1, 0], 0.0, Nodal::M2(1)),
            Constituent::Mu2 => row("MU2", [2, -4, 4, 0, 0], 0.0, Nodal::M2(1)),
            Constituent::TwoN2 => row("2N2", [2, -4, 2, 2, 0], 0.0, Nodal::M2(1)),
            Constituent::L2 => row("L2", [2, -1, 2, -1, 0], 180.0, Nodal::L2),
            Constituent::T2 => row("T2", [2, 0, -1, 0, 1], 0.0, Nodal::Steady),
            Constituent::S1 => row("S1", [1, 0, 0, 0, 0], 180.0, Nodal::Steady),
            Constituent::Mm => row("MM", [0, 1, 0, -1, 0], 0.0, Nodal::Mm),
            Constituent::Mf => row("MF", [0, 2, 0, 0, 0], 0.0, Nodal::Mf),
            Constituent::MSf => row("MSF", [0, 2, -2, 0, 0], 0.0, Nodal::M2(-1)),
            Constituent::Ssa => row("SSA", [0, 0, 2, 0, 0], 0.0, Nodal::Steady),
            Constituent::Sa => row("SA", [0, 0, 1, 0, 0], 0.0, Nodal::Steady),
        }
    }
}
