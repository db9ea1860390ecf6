//! `fibres`: the library, or everything known of one fibre.

use super::Status;
use super::out::Streams;
use clap::{Args, ValueEnum};
use lissom::fibre::{Fibre, Record, library};
use lissom::report;
use std::path::PathBuf;

#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Format {
    /// For the terminal
    Text,
    /// For programs
    Json,
}

#[derive(Debug, Args)]
pub(super) struct Fibres {
    /// An id or a full name, such as `e-glass`
    name: Option<String>,
    /// How to report
    #[arg(long, value_enum, default_value_t = Format::Text)]
    format: Format,
    /// Write the listing into a file, whole or not at all
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
}

impl Fibres {
    pub(super) fn run(self, streams: &Streams) -> Status {
        let chosen = match &self.name {
            Some(name) => match library().find(name) {
                Ok(record) => vec![record],
                Err(error) => {
                    streams.complain(format_args!(
                        "error: {error}\n`lissom fibres` lists the library\n"
                    ));
                    return Status::WrongInput;
                }
            },
            None => library().iter().filter_map(Result::ok).collect(),
        };
        let mut fibres: Vec<(&Record, Fibre)> = chosen
            .into_iter()
            .filter_map(|record| Some((record, record.fibre().ok()?)))
            .collect();
        fibres.sort_by(|(_, a), (_, b)| a.bend_radius_mm().total_cmp(&b.bend_radius_mm()));
        let text = match (self.format, fibres.as_slice()) {
            (Format::Json, fibres) => match report::to_json(&[report::fibres_json(fibres)]) {
                Ok(text) => text,
                Err(error) => {
                    streams.complain(format_args!("error: the listing is no JSON: {error}\n"));
                    return Status::Machine;
                }
            },
            (Format::Text, [(record, fibre)]) if self.name.is_some() => {
                report::fibre_text(record, fibre)
            }
            (Format::Text, fibres) => report::fibres_text(fibres),
        };
        streams.give(&text, self.out.as_deref(), Status::Fine)
    }
}
