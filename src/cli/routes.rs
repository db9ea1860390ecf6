//! `routes`: the ready routes, or everything known of one.

use super::Status;
use super::out::Streams;
use clap::{Args, ValueEnum};
use lissom::report;
use lissom::route::{self, FindRouteError, Route};
use std::path::PathBuf;

#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Format {
    /// For the terminal
    Text,
    /// For programs
    Json,
}

#[derive(Debug, Args)]
pub(super) struct Routes {
    /// A name, such as `rapier-weaving`
    name: Option<String>,
    /// How to report
    #[arg(long, value_enum, default_value_t = Format::Text)]
    format: Format,
    /// Write the listing into a file, whole or not at all
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
}

impl Routes {
    pub(super) fn run(self, streams: &Streams) -> Status {
        let chosen: Vec<&Route> = match &self.name {
            None => route::iter().filter_map(Result::ok).collect(),
            Some(name) => match route::find(name) {
                Ok(route) => vec![route],
                Err(error) => {
                    let near = match &error {
                        FindRouteError::Unknown {
                            nearest: Some(near),
                            ..
                        } => format!("; did you mean `{near}`?"),
                        _ => String::new(),
                    };
                    streams.complain(format_args!(
                        "error: {error}{near}\n`lissom routes` lists them\n"
                    ));
                    return Status::WrongInput;
                }
            },
        };
        let text = match (self.format, chosen.as_slice()) {
            (Format::Json, chosen) => match report::to_json(&[report::routes_json(chosen)]) {
                Ok(text) => text,
                Err(error) => {
                    streams.complain(format_args!("error: the listing is no JSON: {error}\n"));
                    return Status::Machine;
                }
            },
            (Format::Text, [route]) if self.name.is_some() => report::route_text(route),
            (Format::Text, chosen) => report::routes_text(chosen),
        };
        streams.give(&text, self.out.as_deref(), Status::Fine)
    }
}
