//! `check`: one or several specs, held against what their fibres stand.

use super::Status;
use super::out::Streams;
use clap::{Args, ValueEnum};
use lissom::flow::{self, Outcome};
use lissom::pattern::{WeaveFileError, Weaves};
use lissom::report::{self, Advice, CheckReport, Setting};
use lissom::span::SourceText;
use lissom::spec::{Document, Problem, Spec};
use lissom::study::{advice, rigidity, sensitivity};
use lissom::weave::Jammed;
use std::io::{self, Read};
use std::path::{Path, PathBuf};

#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Format {
    /// For the terminal
    Text,
    /// For attaching and comparing by line
    Markdown,
    /// For programs
    Json,
}

const EXIT_STATUS: &str = "\
Exit status:
  0  nothing failed
  1  something breaks or overheats, or kinks where the spec refuses kinks or past 3 % of
     compressive strain; with --strict also what yields, kinks or is close
  2  the input is wrong; nothing is written
  3  a file cannot be read or written";

#[derive(Debug, Args)]
#[command(after_help = EXIT_STATUS)]
pub(super) struct Check {
    /// Spec files; `-` is standard input
    #[arg(required = true, value_name = "SPEC")]
    specs: Vec<PathBuf>,
    /// How to report
    #[arg(long, value_enum, default_value_t = Format::Text)]
    format: Format,
    /// Write the report into a file, whole or not at all
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
    /// Fail also on what yields, kinks or is close
    #[arg(long)]
    strict: bool,
    /// A folder of weave patterns of your own
    #[arg(long, value_name = "FOLDER")]
    weaves: Option<PathBuf>,
}

impl Check {
    pub(super) fn run(self, streams: &Streams) -> Status {
        if let Err(status) = streams.keep_specs(self.out.as_deref(), &self.specs) {
            return status;
        }
        let weaves = match load_weaves(self.weaves.as_deref(), streams) {
            Ok(weaves) => weaves,
            Err(status) => return status,
        };
        let mut reports = Vec::new();
        let mut trouble = Status::Fine;
        for path in &self.specs {
            match self.check(path, &weaves, streams) {
                Ok(report) => reports.push(report),
                Err(status) => trouble = trouble.max(status),
            }
        }
        // One wrong spec of several: nothing is written of the others either.
        if trouble != Status::Fine {
            return trouble;
        }
        let failed = reports.iter().any(|report| report.fails);
        let done = if failed { Status::Fails } else { Status::Fine };
        let text = match self.format {
            Format::Text => joined(&reports, report::text),
            Format::Markdown => joined(&reports, report::markdown),
            Format::Json => match report::to_json(&reports) {
                Ok(text) => text,
                Err(error) => {
                    streams.complain(format_args!("error: the report is no JSON: {error}\n"));
                    return Status::Machine;
                }
            },
        };
        streams.give(&text, self.out.as_deref(), done)
    }

    fn check(
        &self,
        path: &Path,
        weaves: &Weaves,
        streams: &Streams,
    ) -> Result<CheckReport, Status> {
        let (document, spec, outcome) = read_checked(path, weaves, streams)?;
        let (variations, stiffer) =
            rayon::join(|| sensitivity(&spec, &outcome.cloth), || rigidity(&spec));
        let proposals = advice(&document, weaves, &spec, &outcome)
            .into_iter()
            .map(|proposal| Advice {
                place: proposal.place,
                text: proposal.text,
                set: settings(proposal.set),
            });
        Ok(CheckReport::new(
            &spec,
            &outcome,
            &variations,
            &stiffer,
            &flow::broken(&spec, &outcome),
            proposals.collect(),
            self.strict,
        ))
    }
}

/// Keys and values as the report has them.
pub(super) fn settings(set: Vec<(String, String)>) -> Vec<Setting> {
    set.into_iter()
        .map(|(key, value)| Setting { key, value })
        .collect()
}

/// Reads a spec and runs it; what is wrong with it has been said.
pub(super) fn read_checked(
    path: &Path,
    weaves: &Weaves,
    streams: &Streams,
) -> Result<(Document, Spec, Outcome), Status> {
    let source = read_source(path, streams)?;
    let wrong = |problems: &[Problem]| {
        streams.complain(report::problems(&source, problems));
        Status::WrongInput
    };
    let document = Document::parse(source.clone()).map_err(|problems| wrong(&problems))?;
    let spec = document.spec(weaves).map_err(|problems| wrong(&problems))?;
    let outcome = flow::run_counted(&spec).map_err(|why| {
        let jammed = Jammed::new(&spec.weave, why);
        wrong(&[report::jammed(&spec, &jammed)])
    })?;
    Ok((document, spec, outcome))
}

fn joined(reports: &[CheckReport], print: impl Fn(&CheckReport) -> String) -> String {
    let texts: Vec<String> = reports.iter().map(print).collect();
    texts.join("\n")
}

/// The built-in weaves, and those of a folder.
pub(super) fn load_weaves(folder: Option<&Path>, streams: &Streams) -> Result<Weaves, Status> {
    match folder {
        None => Ok(Weaves::builtin()),
        Some(folder) => Weaves::with_folder(folder).map_err(|errors| {
            let unread = |problem: &WeaveFileError| matches!(problem, WeaveFileError::Io { .. });
            for problem in &errors.problems {
                streams.complain(format_args!("error: --weaves {problem}\n"));
            }
            if errors.problems.iter().all(unread) {
                Status::Machine
            } else {
                Status::WrongInput
            }
        }),
    }
}

/// Reads a spec's text; `-` is standard input.
pub(super) fn read_source(path: &Path, streams: &Streams) -> Result<SourceText, Status> {
    let (name, bytes) = if path.as_os_str() == "-" {
        let mut bytes = Vec::new();
        (
            "<stdin>".to_owned(),
            io::stdin().lock().read_to_end(&mut bytes).map(|_| bytes),
        )
    } else {
        (path.display().to_string(), std::fs::read(path))
    };
    let bytes = bytes.map_err(|error| {
        streams.complain(format_args!("error: {name} cannot be read: {error}\n"));
        Status::Machine
    })?;
    match String::from_utf8(bytes) {
        Ok(text) => Ok(SourceText::new(name, text)),
        Err(error) => {
            let at = error.utf8_error().valid_up_to();
            let line = error.as_bytes()[..at]
                .iter()
                .filter(|byte| **byte == b'\n')
                .count()
                + 1;
            streams.complain(format_args!(
                "error: {name}, line {line}: this is no UTF-8 text; save the file as UTF-8\n"
            ));
            Err(Status::WrongInput)
        }
    }
}
