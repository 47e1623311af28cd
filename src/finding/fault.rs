//! One finding: an open code, a place, what was found, what is allowed, what to do.

use std::fmt;

/// How much a finding matters.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Severity {
    /// The file cannot be used as it is; exit code 3.
    Error,
    /// It can be used, but somebody should look; never changes the exit code.
    Warning,
}

impl fmt::Display for Severity {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Severity::Error => "error",
            Severity::Warning => "warning",
        })
    }
}

/// Where in a file: one-based line and column, counted in characters, and the bytes [start, end) they come from.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Place {
    /// The file's name as the user gave it.
    pub file: String,
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
    /// First byte.
    pub start: usize,
    /// First byte after.
    pub end: usize,
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}:{}:{}", self.file, self.line, self.column)
    }
}

/// A fault in somebody's file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Finding {
    /// `<room>-<what>`, never reused: `port-unknown-berth`. The room that finds it owns the code.
    pub code: &'static str,
    /// Error or warning.
    pub severity: Severity,
    /// Where.
    pub place: Place,
    /// What was found: `berth "B7" is not listed`.
    pub found: String,
    /// What is allowed: `berths are B1 to B6`; empty if that goes without saying.
    pub allowed: String,
    /// What to do: `correct the name or add the berth`.
    pub to_do: String,
}

impl Finding {
    /// An error.
    #[must_use]
    pub fn error(
        code: &'static str,
        place: Place,
        found: impl Into<String>,
        allowed: impl Into<String>,
        to_do: impl Into<String>,
    ) -> Finding {
        Finding {
            code,
            severity: Severity::Error,
            place,
            found: found.into(),
            allowed: allowed.into(),
            to_do: to_do.into(),
        }
    }

    /// A warning.
    #[must_use]
    pub fn warning(
        code: &'static str,
        place: Place,
        found: impl Into<String>,
        allowed: impl Into<String>,
        to_do: impl Into<String>,
    ) -> Finding {
        Finding { severity: Severity::Warning, ..Finding::error(code, place, found, allowed, to_do) }
    }
}

impl fmt::Display for Finding {
    /// `port.toml:14:9 port-unknown-berth: berth "B7" is not listed; berths are B1 to B6; correct the name`.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} {}", self.place, self.code)?;
        if self.severity == Severity::Warning {
            write!(f, " (warning)")?;
        }
        write!(f, ": {}", self.found)?;
        for part in [&self.allowed, &self.to_do] {
            if !part.is_empty() {
                write!(f, "; {part}")?;
            }
        }
        Ok(())
    }
}

/// Whether any of `findings` is an error.
#[must_use]
pub fn has_error(findings: &[Finding]) -> bool {
    findings.iter().any(|finding| finding.severity == Severity::Error)
}

/// Orders findings by file, place and code, and drops exact repeats.
pub fn sort_findings(findings: &mut Vec<Finding>) {
    findings.sort_by(|a, b| (&a.place, a.code, &a.found).cmp(&(&b.place, b.code, &b.found)));
    findings.dedup();
}

/// "did you mean" for a misspelt name: the nearest of `known`, if it is near enough to be a slip of the hand.
///
/// ```
/// use snugdown::finding::fault::nearest;
/// assert_eq!(nearest("pilto", ["pilot", "tug"]), Some("pilot"));
/// assert_eq!(nearest("crane", ["pilot", "tug"]), None);
/// ```
#[must_use]
pub fn nearest<'a>(wrong: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let allowed = (wrong.chars().count() / 3).max(1);
    known
        .into_iter()
        .map(|name| (strsim::damerau_levenshtein(&wrong.to_lowercase(), &name.to_lowercase()), name))
        .filter(|(distance, _)| *distance <= allowed)
        .min()
        .map(|(_, name)| name)
}

/// "did you mean "pilot"?" if a known name is near the wrong one, else `otherwise`.
#[must_use]
pub fn did_you_mean<'a>(wrong: &str, known: impl IntoIterator<Item = &'a str>, otherwise: &str) -> String {
    nearest(wrong, known).map_or_else(|| otherwise.to_owned(), |name| format!("did you mean \"{name}\"?"))
}

/// Names in quotation marks, with commas; a long list is cut with its count.
#[must_use]
pub fn quoted(names: &[&str]) -> String {
    const MOST: usize = 20;
    let shown: Vec<String> = names.iter().take(MOST).map(|name| format!("\"{name}\"")).collect();
    let more = names.len().saturating_sub(MOST);
    if more > 0 { format!("{} and {more} more", shown.join(", ")) } else { shown.join(", ") }
}
