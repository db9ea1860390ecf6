//! `limits`: how far a spec may go before something stops holding.

use super::Status;
use super::check::{load_weaves, read_checked, settings};
use super::out::Streams;
use clap::{Args, ValueEnum};
use lissom::report::{self, LimitsReport, LimitsRow, SpecReport};
use lissom::study::{Bound, Found, limits, values_of};
use std::path::PathBuf;

#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Format {
    /// For the terminal
    Text,
    /// For attaching and comparing by line
    Markdown,
    /// For programs
    Json,
}

#[derive(Debug, Args)]
pub(super) struct Limits {
    /// Spec file; `-` is standard input
    #[arg(value_name = "SPEC")]
    spec: PathBuf,
    /// How to report
    #[arg(long, value_enum, default_value_t = Format::Text)]
    format: Format,
    /// Write the report into a file, whole or not at all
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
    /// A folder of weave patterns of your own
    #[arg(long, value_name = "FOLDER")]
    weaves: Option<PathBuf>,
}

impl Limits {
    pub(super) fn run(self, streams: &Streams) -> Status {
        let specs = std::slice::from_ref(&self.spec);
        if let Err(status) = streams.keep_specs(self.out.as_deref(), specs) {
            return status;
        }
        let weaves = match load_weaves(self.weaves.as_deref(), streams) {
            Ok(weaves) => weaves,
            Err(status) => return status,
        };
        let (document, spec, outcome) = match read_checked(&self.spec, &weaves, streams) {
            Ok(read) => read,
            Err(status) => return status,
        };
        let report = LimitsReport {
            lissom: env!("CARGO_PKG_VERSION"),
            spec: SpecReport::new(&spec),
            reserve: spec.require.reserve,
            limits: limits(&document, &weaves, &spec, &outcome)
                .into_iter()
                .map(row)
                .collect(),
        };
        let text = match self.format {
            Format::Text => report.text(),
            Format::Markdown => report.markdown(),
            Format::Json => match report::to_json(&[report]) {
                Ok(text) => text,
                Err(error) => {
                    streams.complain(format_args!("error: the report is no JSON: {error}\n"));
                    return Status::Machine;
                }
            },
        };
        streams.give(&text, self.out.as_deref(), Status::Fine)
    }
}

fn row(bound: Bound) -> LimitsRow {
    LimitsRow {
        place: bound.place,
        what: bound.what,
        today: bound.today,
        limit: match bound.found {
            Found::Holds { .. } => values_of(&bound.set),
            Found::Everywhere => "holds throughout".to_owned(),
            Found::Nowhere => "nothing in reach holds".to_owned(),
        },
        set: settings(bound.set),
    }
}
