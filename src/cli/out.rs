//! Where results and errors go: standard output or a file written whole or not at all; colour by terminal.

use super::Status;
use anstream::{AutoStream, ColorChoice};
use clap::ValueEnum;
use std::fmt::Display;
use std::fs;
use std::io::{self, ErrorKind, Write};
use std::path::{Path, PathBuf};

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

    /// Refuses to let results take the place of what they are about.
    pub(super) fn keep_specs(&self, out: Option<&Path>, specs: &[PathBuf]) -> Result<(), Status> {
        let out = out.and_then(|out| out.canonicalize().ok());
        let same = |spec: &&PathBuf| out.is_some() && spec.canonicalize().ok() == out;
        match specs.iter().find(same) {
            None => Ok(()),
            Some(spec) => {
                self.complain(format_args!(
                    "error: --out would overwrite the spec {}; name another file\n",
                    spec.display()
                ));
                Err(Status::WrongInput)
            }
        }
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

/// Writes a file whole or not at all.
fn write_whole(path: &Path, bytes: &[u8]) -> io::Result<()> {
    let file = NewFile::beside(path)?;
    file.writer()?.write_all(bytes)?;
    file.keep()
}

/// What is being written in place of a file: beside it first, then moved over it. A link is followed; what is no file
/// (a pipe, a device) is written to.
#[derive(Debug)]
pub(super) enum NewFile {
    /// Written beside, to be moved.
    Beside(tempfile::NamedTempFile, PathBuf),
    /// Written to as it is.
    There(fs::File),
}

impl NewFile {
    pub(super) fn beside(path: &Path) -> io::Result<Self> {
        let target = match fs::metadata(path) {
            Ok(there) if !there.is_file() => {
                return Ok(Self::There(fs::OpenOptions::new().write(true).open(path)?));
            }
            Ok(_) => fs::canonicalize(path)?,
            Err(_) => path.to_path_buf(),
        };
        let file = beside(&target)?;
        if let Ok(old) = fs::metadata(&target) {
            fs::set_permissions(file.path(), old.permissions())?;
        }
        Ok(Self::Beside(file, target))
    }

    /// Where to write.
    pub(super) fn writer(&self) -> io::Result<fs::File> {
        match self {
            Self::Beside(file, _) => file.as_file().try_clone(),
            Self::There(file) => file.try_clone(),
        }
    }

    /// Puts it in its place, when all of it is written.
    pub(super) fn keep(self) -> io::Result<()> {
        if let Self::Beside(file, target) = self {
            file.as_file().sync_all()?;
            file.persist(target)?;
        }
        Ok(())
    }
}

/// Writes a new file whole or not at all; refuses where there is one.
pub(super) fn write_new(path: &Path, bytes: &[u8]) -> io::Result<()> {
    let mut file = beside(path)?;
    file.write_all(bytes)?;
    file.as_file().sync_all()?;
    file.persist_noclobber(path)?;
    Ok(())
}

/// A file beside `path` with the rights any new file gets.
fn beside(path: &Path) -> io::Result<tempfile::NamedTempFile> {
    let folder = match path.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    };
    let mut options = tempfile::Builder::new();
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        // The process's mask takes off what others may not.
        options.permissions(fs::Permissions::from_mode(0o666));
    }
    // The name of what could not be made beside it tells the person nothing.
    options.tempfile_in(folder).map_err(|error| {
        let kind = error.kind();
        io::Error::new(kind, format!("{kind} ({})", folder.display()))
    })
}
