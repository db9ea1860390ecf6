//! From a TOML text to a valid [`Spec`], with every problem of the text found at once.
//!
//! The text is read into TOML's own tree with places (`toml`), walked with [`keys`] in hand, and turned into
//! values in the internal units. A `Spec` that exists is valid: its yarns have a count and an outline that
//! fits their spacing, its pattern is one cloth. Whether the yarns can interlace at that sett is geometry,
//! and the weave room's to say.

mod fibre;
pub mod keys;
mod problem;
mod reader;
mod way;
mod weave;
mod yarn;

pub use problem::Problem;
pub use way::{Passage, Tool};
pub use weave::{DEFAULT_PEAK, DEFAULT_REST, DEFAULT_TENSION_N_TEX, System, Weave};

use crate::pattern::Weaves;
use crate::span::SourceText;
use fibre::Fibres;
use reader::{Bound, Problems, Table};
use toml::de::DeTable;

/// Smallest reserve that counts as holding, where none is given.
pub const DEFAULT_RESERVE: f64 = 2.0;

/// What counts as holding.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Require {
    /// Smallest reserve that counts as holding.
    pub reserve: f64,
    /// Whether the spec gave it.
    pub reserve_given: bool,
    /// Whether kink bands fail the spec.
    pub refuse_kinks: bool,
}

/// A valid spec.
#[derive(Debug, Clone)]
pub struct Spec {
    /// The text it was read from.
    pub source: SourceText,
    /// What the report calls the cloth.
    pub name: String,
    /// The owner's own number.
    pub reference: Option<String>,
    /// The weave.
    pub weave: Weave,
    /// The yarns' ways, in order.
    pub passages: Vec<Passage>,
    /// The corners the cloth is laid over.
    pub tools: Vec<Tool>,
    /// What counts as holding.
    pub require: Require,
}

impl Spec {
    /// Reads a spec; patterns are looked up in `weaves`.
    ///
    /// # Errors
    /// All problems of the text, in its order. Where the text is no TOML, only those of its syntax.
    pub fn read(source: SourceText, weaves: &Weaves) -> Result<Self, Vec<Problem>> {
        let (document, errors) = DeTable::parse_recoverable(&source.text);
        if !errors.is_empty() {
            return Err(errors
                .iter()
                .map(|error| {
                    let span = error.span().unwrap_or(0..0);
                    Problem::at(
                        span,
                        format!("this is no TOML: {}", error.message().trim()),
                        "here",
                    )
                })
                .collect());
        }
        let problems = Problems::default();
        // A problem of the whole spec is marked at its first line.
        let first_line = 0..source.text.find('\n').unwrap_or(source.text.len());
        let read = {
            let table = Table::new(
                &problems,
                document.get_ref(),
                first_line,
                "the spec",
                keys::SPEC,
            );
            read_parts(&table, weaves)
        };
        match read {
            Some(parts) if problems.is_empty() => Ok(Self { source, ..parts }),
            _ => Err(problems.into_sorted()),
        }
    }
}

fn read_parts(table: &Table<'_>, weaves: &Weaves) -> Option<Spec> {
    let name = table.required(table.text("name"), "name", "\"Furnace curtain, trial 1\"");
    let reference = table.text("reference").value();
    let fibres = Fibres::read(table);
    let yarns = yarn::read_yarns(table, &fibres);
    let weave = weave::read_weave(table, &yarns, weaves);
    let passages = way::read_passages(table, weave.as_ref());
    let tools = way::read_tools(table);
    let require = read_require(table);
    Some(Spec {
        source: SourceText::new("", ""),
        name: name?.value,
        reference,
        weave: weave?,
        passages,
        tools,
        require,
    })
}

fn read_require(spec: &Table<'_>) -> Require {
    let table = spec.table("require", "[require]", keys::REQUIRE).value();
    let reserve = table.as_ref().and_then(|table| {
        table
            .number("reserve", Bound::Within(1.0, f64::MAX))
            .value()
    });
    let kinks = [("allow", false), ("refuse", true)];
    Require {
        reserve: reserve.unwrap_or(DEFAULT_RESERVE),
        reserve_given: reserve.is_some(),
        refuse_kinks: table
            .and_then(|table| table.word("kinks", &kinks).value())
            .unwrap_or(false),
    }
}
