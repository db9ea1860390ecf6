//! `new`: a commented spec to start from.

use super::Status;
use super::out::{Streams, write_new};
use clap::Args;
use std::io::ErrorKind;
use std::path::PathBuf;

/// The starter spec; a test checks it.
const STARTER: &str = include_str!("starter.toml");

#[derive(Debug, Args)]
pub(super) struct New {
    /// File to write; standard output where it is left out. A file that is there is not overwritten
    #[arg(value_name = "FILE")]
    file: Option<PathBuf>,
}

impl New {
    pub(super) fn run(self, streams: &Streams) -> Status {
        let Some(path) = self.file else {
            return streams.give(STARTER, None, Status::Fine);
        };
        match write_new(&path, STARTER.as_bytes()) {
            Ok(()) => {
                streams.complain(format_args!(
                    "wrote {path}; check it with `lissom check {path}`\n",
                    path = path.display()
                ));
                Status::Fine
            }
            Err(error) if error.kind() == ErrorKind::AlreadyExists => {
                streams.complain(format_args!(
                    "error: {} is there already; name a new file\n",
                    path.display()
                ));
                Status::WrongInput
            }
            Err(error) => {
                streams.complain(format_args!(
                    "error: {} cannot be written: {error}\n",
                    path.display()
                ));
                Status::Machine
            }
        }
    }
}
