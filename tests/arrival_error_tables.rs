//! Reading forecast-error tables: the shipped one, and each finding that a faulty one provokes.
#![allow(clippy::unwrap_used, reason = "helpers of tests may fail loudly")]

use snugdown::arrival::basin::Basin;
use snugdown::arrival::errors::ErrorTables;
use snugdown::arrival::errors_reader::read_error_tables;
use snugdown::finding::fault::Finding;
use snugdown::finding::source::SourceText;

const SHIPPED: &str = include_str!("../rules/forecast-errors.toml");

const FITTED: &str = include_str!("../rules/forecast-errors-2006-2015.toml");

const SMALL: &str = r#"[[table]]
name = "mine"
basins = ["AL"]
sources = ["made up"]
lead_h = [0, 12]
along_nmi = [10, 20]
cross_nmi = [10, 20]
intensity_kt = [4, 6]
size_share = [0.2, 0.3]
along_bias_nmi = [0, -4]
along_serial = [0.7, 0.7]
cross_serial = [0.7, 0.7]
intensity_serial = [0.7, 0.7]
size_serial = [0.7, 0.7]
radii_relaxation_h = 36
accuracy_usual_nmi = 15
accuracy_power = 1
accuracy_fades_h = 12
intensity_with_size = 0
size_follows_intensity = 0.5
[elsewhere]
table = "mine"
widen = 1.25
"#;

fn read(text: &str) -> Result<ErrorTables, Vec<Finding>> {
    read_error_tables(&SourceText::new("errors.toml", text))
}

/// What a change to the small table is told: line and code of each finding.
fn told(from: &str, to: &str) -> Vec<(usize, &'static str)> {
    assert!(SMALL.contains(from), "{from}");
    let findings = read(&SMALL.replacen(from, to, 1)).unwrap_err();
    findings.iter().map(|finding| (finding.place.line, finding.code)).collect()
}

#[test]
fn the_shipped_tables_are_read_and_hold_for_their_basins() {
    let tables = read(SHIPPED).unwrap();
    let basins: Vec<Basin> = tables.tables().iter().flat_map(|(basins, _)| basins.clone()).collect();
    assert_eq!(basins, [Basin::Atlantic, Basin::EastPacific, Basin::CentralPacific, Basin::WestPacific]);
    for (_, table) in tables.tables() {
        assert!(!table.sources().is_empty());
        // Spreads grow with lead.
        for pair in [0.0, 12.0, 24.0, 36.0, 48.0, 60.0, 72.0, 96.0, 120.0].windows(2) {
            let (a, b) = (table.at(pair[0]).deviation, table.at(pair[1]).deviation);
            assert!(a.iter().zip(b).all(|(a, b)| *a <= b), "{} {pair:?}", table.name());
        }
    }
}

#[test]
fn the_shipped_atlantic_spreads_imply_the_published_mean_errors() {
    // Published five-year means 2021-2025: track 33.6, 55.9, 86.4, 124.9, 181.0 n mi and wind 7.1, 9.9, 11.6,
    // 13.3, 14.7 kt at 24, 48, 72, 96, 120 h. The track sigmas come from another reckoning of the same years
    // (along and cross apart): within 6 %.
    let tables = read(SHIPPED).unwrap();
    let table = &tables.tables()[0].1;
    let half_pi = std::f64::consts::FRAC_PI_2;
    for (lead, track, wind) in
        [(24.0, 33.6, 7.1), (48.0, 55.9, 9.9), (72.0, 86.4, 11.6), (96.0, 124.9, 13.3), (120.0, 181.0, 14.7)]
    {
        let [along, cross, intensity, _] = table.at(lead).deviation;
        let mean = ((along * along + cross * cross) / 2.0).sqrt() * half_pi.sqrt();
        assert!((mean / track - 1.0).abs() < 0.06, "{lead} h: {mean}");
        assert!((intensity / half_pi.sqrt() / wind - 1.0).abs() < 0.01, "{lead} h: {intensity}");
    }
}

#[test]
fn a_column_left_out_where_it_may_be_is_zero_and_one_given_is_used() {
    let tables = read(SMALL).unwrap();
    let row = tables.tables()[0].1.at(12.0);
    assert!((row.bias[0] + 4.0).abs() < 1e-12 && row.bias[1].abs() < 1e-12);
}

#[test]
fn seas_outside_the_fit_say_so_wherever_their_odds_are() {
    let tables = read(SHIPPED).unwrap();
    for (basins, table) in tables.tables() {
        let says = table.notes().iter().any(|note| note.starts_with("not fitted here"));
        assert_eq!(says, !basins.contains(&Basin::Atlantic), "{}", table.name());
    }
}

#[test]
fn the_fitted_table_beside_the_shipped_one_is_read_and_scatters_more() {
    let (shipped, fitted) = (read(SHIPPED).unwrap(), read(FITTED).unwrap());
    let [of_today, of_then] = [&shipped, &fitted].map(|tables| tables.tables()[0].1.at(48.0).deviation);
    assert!(of_then[0] > of_today[0] && of_then[1] > of_today[1] && of_then[2] > of_today[2]);
}

#[test]
fn each_fault_has_its_code_and_place() {
    assert_eq!(told("along_nmi = [10, 20]", "along_nmi = [10, nan]"), [(6, "arrival-errors-range")]);
    assert_eq!(told("size_serial = [0.7, 0.7]", "size_serial = [0.7, 1.7]"), [(14, "arrival-errors-range")]);
    assert_eq!(told("accuracy_power = 1", "accuracy_power = 9"), [(17, "arrival-errors-range")]);
    assert_eq!(told("[elsewhere]", "along_by_wind = -3\n[elsewhere]"), [(21, "arrival-errors-range")]);
    assert_eq!(told("widen = 1.25", "widen = 0.5"), [(23, "arrival-errors-range")]);
    assert_eq!(told("cross_nmi = [10, 20]", "cross_nmi = [10]"), [(7, "arrival-errors-length")]);
    assert_eq!(told("lead_h = [0, 12]", "lead_h = [12, 0]"), [(5, "arrival-errors-leads")]);
    assert_eq!(told("\"AL\"", "\"XX\""), [(3, "arrival-errors-basin")]);
    assert_eq!(told("\"AL\"", "\"AL\", \"AL\""), [(3, "arrival-errors-basin")]);
    assert_eq!(told("table = \"mine\"", "table = \"nine\""), [(22, "arrival-errors-elsewhere")]);
    assert_eq!(told("along_nmi", "along_miles"), [(6, "arrival-errors-unreadable")]);
    assert_eq!(told("[elsewhere]", "[elsewhere"), [(21, "arrival-errors-unreadable")]);
}

#[test]
fn two_tables_of_one_name_are_told() {
    let twice = format!("{}{SMALL}", SMALL.split("[elsewhere]").next().unwrap().replace("\"AL\"", "\"EP\""));
    let findings = read(&twice).unwrap_err();
    assert_eq!(findings.iter().map(|f| f.code).collect::<Vec<_>>(), ["arrival-errors-name"]);
}

#[test]
fn all_faults_are_told_at_once_in_order() {
    let faulty =
        SMALL.replacen("[4, 6]", "[-4, 6]", 1).replacen("= 36", "= 0", 1).replacen("\"AL\"", "\"ZZ\"", 1);
    let lines: Vec<usize> = read(&faulty).unwrap_err().iter().map(|f| f.place.line).collect();
    assert_eq!(lines, [3, 8, 15]);
}
