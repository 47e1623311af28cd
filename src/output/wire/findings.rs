//! Findings in JSON.

use crate::finding::fault::{Finding, Severity};
use crate::output::wire::value::SCHEMA;
use serde::{Deserialize, Serialize};

/// All findings.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct FindingsOut {
    /// Version of this form.
    pub schema: u32,
    /// "findings".
    pub kind: String,
    /// How many are errors.
    pub errors: usize,
    /// How many are warnings.
    pub warnings: usize,
    /// The findings by file and place.
    pub findings: Vec<FindingOut>,
}

/// One finding.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct FindingOut {
    /// `<room>-<what>`.
    pub code: String,
    /// "error" or "warning".
    pub severity: String,
    /// The file.
    pub file: String,
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
    /// What was found.
    pub found: String,
    /// What is allowed; empty if that goes without saying.
    pub allowed: String,
    /// What to do.
    pub to_do: String,
}

/// Findings in their JSON form.
#[must_use]
pub fn findings_out(findings: &[Finding]) -> FindingsOut {
    let errors = findings.iter().filter(|finding| finding.severity == Severity::Error).count();
    let one = |finding: &Finding| FindingOut {
        code: finding.code.to_owned(),
        severity: finding.severity.to_string(),
        file: finding.place.file.clone(),
        line: finding.place.line,
        column: finding.place.column,
        found: finding.found.clone(),
        allowed: finding.allowed.clone(),
        to_do: finding.to_do.clone(),
    };
    FindingsOut {
        schema: SCHEMA,
        kind: "findings".to_owned(),
        errors,
        warnings: findings.len() - errors,
        findings: findings.iter().map(one).collect(),
    }
}
