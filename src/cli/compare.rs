//! `compare`: specs side by side, or one over a grid of values of its keys.

use super::Status;
use super::check::{load_weaves, read_source};
use super::out::Streams;
use clap::{Args, ValueEnum};
use indicatif::{ProgressBar, ProgressStyle};
use lissom::pattern::Weaves;
use lissom::report::{
    self, BriefRow, CompareCsv, CompareReport, SpecReport, VariantRow, VaryCell, VaryColumn,
    WovenRow,
};
use lissom::spec::Document;
use lissom::study::{Axis, Grid, GridError, Told};
use std::io::{BufWriter, ErrorKind, IsTerminal, Write};
use std::path::PathBuf;

#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Format {
    /// For the terminal
    Text,
    /// For attaching and comparing by line
    Markdown,
    /// For spreadsheets, row by row: for grids of any size
    Csv,
    /// For programs
    Json,
}

/// Beyond this a table is for programs: CSV takes any number.
const MOST_ROWS: usize = 200_000;
/// Grids smaller than this are done before a bar is seen.
const WORTH_A_BAR: usize = 20_000;

const AFTER_HELP: &str = "\
Values: a list `5,7,9,11 um`, words `plain,twill-2-2`, or a range `10..24 /cm step 2`.
Keys: all that a spec may have, by their tables: weave.pattern, weave.warp.sett, yarn.NAME.width,
fibre.NAME.filament_diameter, passage.NAME.radius, tool.NAME.radius, require.reserve.
A varied filament diameter keeps the linear density, where the spec gives it, and frees the count.";

#[derive(Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub(super) struct Compare {
    /// Spec files; `-` is standard input
    #[arg(required = true, value_name = "SPEC")]
    specs: Vec<PathBuf>,
    /// A key and its values; several make a grid
    #[arg(long = "vary", value_name = "KEY=VALUES")]
    vary: Vec<String>,
    /// How to report
    #[arg(long, value_enum, default_value_t = Format::Text)]
    format: Format,
    /// Write the report into a file, whole or not at all
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
    /// Threads to compute with; all cores where left out
    #[arg(long, value_name = "N")]
    threads: Option<usize>,
    /// A folder of weave patterns of your own
    #[arg(long, value_name = "FOLDER")]
    weaves: Option<PathBuf>,
}

impl Compare {
    pub(super) fn run(self, streams: &Streams) -> Status {
        match self.try_run(streams) {
            Ok(status) | Err(status) => status,
        }
    }

    fn try_run(self, streams: &Streams) -> Result<Status, Status> {
        streams.keep_specs(self.out.as_deref(), &self.specs)?;
        let weaves = load_weaves(self.weaves.as_deref(), streams)?;
        if let Some(threads) = self.threads {
            // Fails only where a pool is there already, which then serves.
            let _ = rayon::ThreadPoolBuilder::new()
                .num_threads(threads)
                .build_global();
        }
        let axes = self.axes(streams)?;
        let (documents, specs) = self.documents(&weaves, streams)?;
        let columns: Vec<VaryColumn> = axes
            .iter()
            .map(|axis| VaryColumn {
                key: axis.key.text.clone(),
                unit: axis.unit.clone(),
            })
            .collect();
        let grid = Grid::new(documents, axes);
        if self.format == Format::Csv {
            return self.csv(&grid, &weaves, &specs, &columns, streams);
        }
        if grid.len() > MOST_ROWS {
            streams.complain(format_args!(
                "error: {} variants are more than {MOST_ROWS}; `--format csv` takes any number\n",
                grid.len()
            ));
            return Err(Status::WrongInput);
        }
        let report = self.collected(&grid, &weaves, specs, columns, streams)?;
        let text = match self.format {
            Format::Text | Format::Csv => report.text(),
            Format::Markdown => report.markdown(),
            Format::Json => report::to_json(&[report.json()]).map_err(|error| {
                streams.complain(format_args!("error: the report is no JSON: {error}\n"));
                Status::Machine
            })?,
        };
        Ok(streams.give(&text, self.out.as_deref(), Status::Fine))
    }

    fn axes(&self, streams: &Streams) -> Result<Vec<Axis>, Status> {
        let mut axes: Vec<Axis> = Vec::new();
        let mut wrong = false;
        for text in &self.vary {
            match Axis::parse(text) {
                Ok(axis) if axes.iter().any(|other| other.key == axis.key) => {
                    streams.complain(format_args!(
                        "error: --vary {}: the key is varied twice\n",
                        axis.key.text
                    ));
                    wrong = true;
                }
                Ok(axis) => axes.push(axis),
                Err(error) => {
                    streams.complain(format_args!("error: --vary {error}\n"));
                    wrong = true;
                }
            }
        }
        if wrong {
            Err(Status::WrongInput)
        } else {
            Ok(axes)
        }
    }

    /// The specs, each valid as it stands.
    fn documents(
        &self,
        weaves: &Weaves,
        streams: &Streams,
    ) -> Result<(Vec<Document>, Vec<SpecReport>), Status> {
        let mut documents = Vec::new();
        let mut specs = Vec::new();
        let mut trouble = Status::Fine;
        for path in &self.specs {
            let source = match read_source(path, streams) {
                Ok(source) => source,
                Err(status) => {
                    trouble = trouble.max(status);
                    continue;
                }
            };
            let read = Document::parse(source.clone())
                .and_then(|document| document.spec(weaves).map(|spec| (document, spec)));
            match read {
                Ok((document, spec)) => {
                    specs.push(SpecReport::new(&spec));
                    documents.push(document);
                }
                Err(problems) => {
                    streams.complain(report::problems(&source, &problems));
                    trouble = trouble.max(Status::WrongInput);
                }
            }
        }
        if trouble == Status::Fine {
            Ok((documents, specs))
        } else {
            Err(trouble)
        }
    }

    fn collected(
        &self,
        grid: &Grid,
        weaves: &Weaves,
        specs: Vec<SpecReport>,
        columns: Vec<VaryColumn>,
        streams: &Streams,
    ) -> Result<CompareReport, Status> {
        let bar = bar(grid.len());
        let mut rows: Vec<VariantRow> = Vec::with_capacity(grid.len());
        let done = grid.compare(weaves, WovenRow::new, |number, told| {
            let place = grid.place(number);
            let cell = |(value, axis): (&usize, &Axis)| VaryCell {
                text: axis.values[*value].text.clone(),
                number: axis.values[*value].number,
            };
            rows.push(VariantRow {
                spec: place.spec,
                values: place.values.iter().zip(grid.axes()).map(cell).collect(),
                without: if matches!(told, Told::Unsolved) {
                    "unsolved"
                } else {
                    "jammed"
                },
                woven: match told {
                    Told::Woven(row) => Some(row),
                    Told::Jammed | Told::Unsolved => None,
                },
                edge: false,
            });
            bar.inc(1);
            true
        });
        bar.finish_and_clear();
        done.map_err(|error| complain_of(grid, &error, streams))?;
        // A jammed cloth cannot be woven: to the designer it fails.
        let fails: Vec<bool> = rows
            .iter()
            .map(|row| row.woven.as_ref().is_none_or(|woven| woven.fails))
            .collect();
        for number in 0..rows.len() {
            for next in grid.neighbours(number) {
                if fails[number] != fails[next] {
                    rows[number].edge = true;
                    rows[next].edge = true;
                }
            }
        }
        Ok(CompareReport::new(specs, columns, rows))
    }

    fn csv(
        &self,
        grid: &Grid,
        weaves: &Weaves,
        specs: &[SpecReport],
        columns: &[VaryColumn],
        streams: &Streams,
    ) -> Result<Status, Status> {
        let failed = |error: &dyn std::fmt::Display| {
            let place = self
                .out
                .as_ref()
                .map_or("standard output".into(), |path| path.display().to_string());
            streams.complain(format_args!("error: {place} cannot be written: {error}\n"));
            Status::Machine
        };
        let file = self
            .out
            .as_deref()
            .map(super::out::NewFile::beside)
            .transpose()
            .map_err(|e| failed(&e))?;
        let to: Box<dyn Write> = match &file {
            Some(file) => Box::new(BufWriter::new(file.writer().map_err(|e| failed(&e))?)),
            None => Box::new(BufWriter::new(std::io::stdout().lock())),
        };
        let mut csv = CompareCsv::new(to, specs, columns).map_err(|e| failed(&e))?;
        let bar = bar(grid.len());
        let mut stopped = None;
        let mut best = None;
        let done = grid.compare(weaves, BriefRow::new, |number, told| {
            let place = grid.place(number);
            let values = place
                .values
                .iter()
                .zip(grid.axes())
                .map(|(value, axis)| axis.values[*value].text.as_str());
            let row = match &told {
                Told::Woven(row) => Ok(row),
                Told::Jammed => Err("jammed"),
                Told::Unsolved => Err("unsolved"),
            };
            if let Some(merit) = row.ok().and_then(BriefRow::merit)
                && best.as_ref().is_none_or(|(so_far, _)| merit > *so_far)
            {
                best = Some((merit, number));
            }
            bar.inc(1);
            stopped = csv.row(place.spec, values, row).err();
            stopped.is_none()
        });
        bar.finish_and_clear();
        done.map_err(|error| complain_of(grid, &error, streams))?;
        let flushed = match stopped {
            Some(error) => match error.into_kind() {
                csv::ErrorKind::Io(error) => Err(error),
                other => Err(std::io::Error::other(format!("{other:?}"))),
            },
            None => csv.finish(),
        };
        match flushed {
            Err(error) if error.kind() == ErrorKind::BrokenPipe => return Ok(Status::Fine),
            Err(error) => return Err(failed(&error)),
            Ok(()) => {}
        }
        if let Some(file) = file {
            file.keep().map_err(|e| failed(&e))?;
        }
        if let Some((_, number)) = best {
            streams.complain(format_args!(
                "best: row {} (`{}`)\n",
                number + 1,
                name(grid, &grid.place(number))
            ));
        }
        Ok(Status::Fine)
    }
}

/// The values of a variant in words.
fn name(grid: &Grid, place: &lissom::study::Place) -> String {
    let values: Vec<String> = place
        .values
        .iter()
        .zip(grid.axes())
        .map(|(value, axis)| {
            format!(
                "{}={} {}",
                axis.key.text, axis.values[*value].text, axis.unit
            )
            .trim_end()
            .to_owned()
        })
        .collect();
    values.join(", ")
}

fn complain_of(grid: &Grid, error: &GridError, streams: &Streams) -> Status {
    match error {
        GridError::Set(error) => streams.complain(format_args!("error: --vary {error}\n")),
        GridError::Wrong { place, problems } => {
            let source = grid.documents()[place.spec].source();
            streams.complain(format_args!("in the variant {}:\n\n", name(grid, place)));
            streams.complain(report::problems(source, problems));
        }
    }
    Status::WrongInput
}

/// A bar on a terminal for long grids, none in a pipe.
fn bar(count: usize) -> ProgressBar {
    if count < WORTH_A_BAR || !std::io::stderr().is_terminal() {
        return ProgressBar::hidden();
    }
    let bar = ProgressBar::new(count as u64);
    if let Ok(style) = ProgressStyle::with_template("{bar:30} {pos} of {len} variants, {eta} left")
    {
        bar.set_style(style);
    }
    bar
}
