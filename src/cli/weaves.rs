//! `weaves`: the named weaves, or one of them on point paper.

use super::Status;
use super::check::load_weaves;
use super::out::Streams;
use clap::{Args, ValueEnum};
use lissom::pattern::{Marks, Weave};
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
pub(super) struct Weaves {
    /// A name or words, such as `satin-8` or `twill 2/2 z`
    name: Option<String>,
    /// How to report
    #[arg(long, value_enum, default_value_t = Format::Text)]
    format: Format,
    /// Draw with letters only
    #[arg(long)]
    ascii: bool,
    /// A folder of weave patterns of your own
    #[arg(long, value_name = "FOLDER")]
    weaves: Option<PathBuf>,
    /// Write the listing into a file, whole or not at all
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
}

impl Weaves {
    pub(super) fn run(self, streams: &Streams) -> Status {
        let weaves = match load_weaves(self.weaves.as_deref(), streams) {
            Ok(weaves) => weaves,
            Err(status) => return status,
        };
        let chosen: Vec<Weave> = match &self.name {
            None => weaves.iter().collect(),
            Some(name) => match weaves.find(name) {
                Some(weave) => vec![weave],
                None => match weaves.pattern(name) {
                    Ok(pattern) => vec![Weave {
                        name: name.clone(),
                        title: "from its words".into(),
                        sentence: "Built from its numbers; no file of its own.".into(),
                        pattern,
                    }],
                    Err(error) => {
                        streams.complain(format_args!(
                            "error: {error}\n`lissom weaves` lists the named ones\n"
                        ));
                        return Status::WrongInput;
                    }
                },
            },
        };
        let marks = if self.ascii {
            Marks::Ascii
        } else {
            Marks::Blocks
        };
        let text = match (self.format, chosen.as_slice()) {
            (Format::Json, chosen) => match report::to_json(&[report::weaves_json(chosen)]) {
                Ok(text) => text,
                Err(error) => {
                    streams.complain(format_args!("error: the listing is no JSON: {error}\n"));
                    return Status::Machine;
                }
            },
            (Format::Text, [weave]) if self.name.is_some() => report::weave_text(weave, marks),
            (Format::Text, chosen) => report::weaves_text(chosen),
        };
        streams.give(&text, self.out.as_deref(), Status::Fine)
    }
}
