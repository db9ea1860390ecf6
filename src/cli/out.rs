//! Where results and errors go: standard output or a file written whole or not at all; colour by terminal.

use super::Status;
use anstream::{AutoStream, ColorChoice};
use clap::ValueEnum;
use std::fmt::Display;
use std::fs;
use std::io::{self, ErrorKind, Write};
use std::path::Path;

/// When to colour.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub(crate) enum Colour {
    /// On a terminal
    Auto,
    /// Always
    Always,
    /// Never
    Never,
}

/// The two streams of the process.
#[derive(Debug)]
pub(crate) struct Streams {
    choice: ColorChoice,
}

impl Streams {
    pub(crate) fn new(colour: Colour) -> Self {
        Self {
            choice: match colour {
                Colour::Auto => ColorChoice::Auto,
                Colour::Always => ColorChoice::Always,
                Colour::Never => ColorChoice::Never,
            },
        }
    }

    /// Says something to the person, beside the results.
    pub(crate) fn complain(&self, text: impl Display) {
        // Where standard error is gone there is nobody left to tell.
        let _ = write!(AutoStream::new(io::stderr(), self.choice), "{text}");
    }

    /// Puts results on standard output, or whole into a file without colour; `done` is the status after.
    pub(crate) fn give(&self, text: &str, file: Option<&Path>, done: Status) -> Status {
        let given = match file {
            Some(path) => write_whole(
                path,
                anstream::adapter::strip_str(text).to_string().as_bytes(),
            ),
            None => {
                let mut stream = AutoStream::new(io::stdout().lock(), self.choice);
                match stream
                    .write_all(text.as_bytes())
                    .and_then(|()| stream.flush())
                {
                    // The reader has had enough.
                    Err(error) if error.kind() == ErrorKind::BrokenPipe => Ok(()),
                    other => other,
                }
            }
        };
        match given {
            Ok(()) => done,
            Err(error) => {
                let place =
                    file.map_or("standard output".into(), |path| path.display().to_string());
                self.complain(format_args!("error: {place} cannot be written: {error}\n"));
                Status::Machine
            }
        }
    }
}

/// Writes a file whole or not at all: beside it first, then moved over it.
pub(super) fn write_whole(path: &Path, bytes: &[u8]) -> io::Result<()> {
    let folder = match path.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    };
    let mut beside = tempfile::NamedTempFile::new_in(folder)?;
    beside.write_all(bytes)?;
    beside.as_file().sync_all()?;
    // A new file gets the rights any other would; one that is replaced keeps its own.
    let rights = match fs::metadata(path) {
        Ok(old) => Some(old.permissions()),
        Err(_) => default_rights(),
    };
    if let Some(rights) = rights {
        fs::set_permissions(beside.path(), rights)?;
    }
    beside.persist(path)?;
    Ok(())
}

/// Read by all, written by the owner; temporary files are made for the owner alone.
#[cfg(unix)]
fn default_rights() -> Option<fs::Permissions> {
    use std::os::unix::fs::PermissionsExt;
    Some(fs::Permissions::from_mode(0o644))
}

#[cfg(not(unix))]
fn default_rights() -> Option<fs::Permissions> {
    None
}
