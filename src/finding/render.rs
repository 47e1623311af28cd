//! Findings for people: one line each, or with the source line under it.

use crate::finding::fault::{Finding, Severity};
use crate::finding::source::SourceText;
use annotate_snippets::{AnnotationKind, Group, Level, Renderer, Snippet};

/// All findings, each with its source line when `sources` holds the file; ends with a count.
///
/// Colour is never written here; the command line decides about that.
#[must_use]
pub fn with_source(findings: &[Finding], sources: &[SourceText]) -> String {
    let mut text: String = findings
        .iter()
        .map(|finding| {
            let source = sources.iter().find(|source| source.name() == finding.place.file);
            let mut block =
                source.map_or_else(|| finding.to_string(), |source| one_with_source(finding, source));
            block.push_str("\n\n");
            block
        })
        .collect();
    text.push_str(&count(findings));
    text.push('\n');
    text
}

fn one_with_source(finding: &Finding, source: &SourceText) -> String {
    // A very long line (a web page, a flattened text) would bury the finding: the plain form serves better.
    let line_is_long = source.text().lines().nth(finding.place.line - 1).is_some_and(|line| line.len() > 200);
    if line_is_long {
        return finding.to_string();
    }
    let level = match finding.severity {
        Severity::Error => Level::ERROR,
        Severity::Warning => Level::WARNING,
    };
    let title = format!("{}: {}", finding.code, finding.found);
    let mut group = Group::with_title(level.primary_title(&title)).element(
        Snippet::source(source.text()).path(source.name()).annotation(
            AnnotationKind::Primary.span(finding.place.start..finding.place.end).label(&finding.allowed),
        ),
    );
    if !finding.to_do.is_empty() {
        group = group.element(Level::HELP.message(&finding.to_do));
    }
    Renderer::plain().render(&[group])
}

/// "2 errors, 1 warning".
#[must_use]
pub fn count(findings: &[Finding]) -> String {
    let errors = findings.iter().filter(|finding| finding.severity == Severity::Error).count();
    let warnings = findings.len() - errors;
    let plural = |n: usize, word: &str| format!("{n} {word}{}", if n == 1 { "" } else { "s" });
    format!("{}, {}", plural(errors, "error"), plural(warnings, "warning"))
}
