//! The report of a comparison: one row for each variant, in text, Markdown, JSON and CSV.

use super::check::{ClothReport, SpecReport};
use super::markdown;
use super::table::table;
use crate::flow::Outcome;
use crate::judge::State;
use crate::quantity::{rounded, significant};
use crate::spec::Spec;
use serde_json::{Value, json};
use std::borrow::Cow;
use std::cmp::Reverse;
use std::io;

/// What was varied, as the head of a column.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct VaryColumn {
    /// The key.
    pub key: String,
    /// The unit its values share; empty for words and numbers.
    pub unit: String,
}

/// One value of a varied key.
#[derive(Debug, Clone, PartialEq)]
pub struct VaryCell {
    /// As a person wrote it.
    pub text: String,
    /// The number, where it is one in the column's unit.
    pub number: Option<f64>,
}

/// What became of a variant that can be woven.
#[derive(Debug, Clone, PartialEq)]
pub struct WovenRow {
    /// Worst state.
    pub verdict: State,
    /// Whether a check fails.
    pub fails: bool,
    /// Reserve of the bend that decides.
    pub reserve: Option<f64>,
    /// The bend that decides.
    pub place: String,
    /// The cloth's numbers.
    pub cloth: ClothReport,
}

/// One variant.
#[derive(Debug, Clone, PartialEq)]
pub struct VariantRow {
    /// Index of its spec.
    pub spec: usize,
    /// Its values, one for each column.
    pub values: Vec<VaryCell>,
    /// What became of it; `None` where there is no cloth.
    pub woven: Option<WovenRow>,
    /// What it is called then: `jammed`, or `unsolved` where the stiff path was not found.
    pub without: &'static str,
    /// Whether a neighbour along an axis fails where this holds, or the other way round.
    pub edge: bool,
}

/// A comparison.
#[derive(Debug, Clone, PartialEq)]
pub struct CompareReport {
    /// The specs compared.
    pub specs: Vec<SpecReport>,
    /// The keys varied.
    pub vary: Vec<VaryColumn>,
    /// The variants in order.
    pub variants: Vec<VariantRow>,
    /// Index of the best that does not fail.
    pub best: Option<usize>,
}

/// How good a variant is: the less bad state first, then the larger reserve. Only those that do not fail have one.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Merit(Reverse<State>, f64);

impl Eq for Merit {}

impl PartialOrd for Merit {
    fn partial_cmp(&self, other: &Self) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Merit {
    fn cmp(&self, other: &Self) -> std::cmp::Ordering {
        self.0.cmp(&other.0).then(self.1.total_cmp(&other.1))
    }
}

impl WovenRow {
    /// What is told of a variant.
    pub fn new(spec: &Spec, outcome: &Outcome) -> Self {
        let worst = outcome.worst_finding(spec.require.refuse_kinks);
        Self {
            verdict: outcome.verdict(),
            fails: outcome.fails(spec, false),
            reserve: worst.and_then(|finding| finding.deciding_reserve()),
            place: worst.map_or_else(String::new, |finding| {
                format!("{} ({})", finding.place, finding.stage.word())
            }),
            cloth: ClothReport::new(spec, &outcome.cloth),
        }
    }

    /// How good it is; `None` where it fails.
    pub fn merit(&self) -> Option<Merit> {
        (!self.fails).then_some(Merit(
            Reverse(self.verdict),
            rounded(self.reserve.unwrap_or(f64::INFINITY)),
        ))
    }
}

impl VariantRow {
    fn verdict(&self) -> &'static str {
        self.woven
            .as_ref()
            .map_or(self.without, |woven| woven.verdict.word())
    }
}

impl CompareReport {
    /// The report, its best found: the first of equals.
    pub fn new(specs: Vec<SpecReport>, vary: Vec<VaryColumn>, variants: Vec<VariantRow>) -> Self {
        let merit = |index: &usize| variants[*index].woven.as_ref().and_then(WovenRow::merit);
        let best = (0..variants.len())
            .rev()
            .filter(|index| merit(index).is_some())
            .max_by_key(merit);
        Self {
            specs,
            vary,
            variants,
            best,
        }
    }

    fn head(&self) -> Vec<String> {
        let mut head = vec![String::new()];
        if self.specs.len() > 1 {
            head.push("spec".into());
        }
        head.extend(self.vary.iter().map(|column| {
            let unit = if column.unit.is_empty() {
                String::new()
            } else {
                format!(" {}", column.unit)
            };
            // The first word of a key only says which table it stands in.
            let key = column
                .key
                .split_once('.')
                .map_or(column.key.as_str(), |(_, key)| key);
            format!("{key}{unit}")
        }));
        let fixed = [
            "verdict",
            "reserve",
            "decides",
            "crimp % warp, weft",
            "mm",
            "g/m2",
            "cover %",
        ];
        head.extend(fixed.map(str::to_owned));
        head
    }

    fn cells(&self, index: usize, row: &VariantRow) -> Vec<String> {
        let mark = match (self.best == Some(index), row.edge) {
            (true, true) => "best, edge",
            (true, false) => "best",
            (false, true) => "edge",
            (false, false) => "",
        };
        let mut cells = vec![mark.to_owned()];
        if self.specs.len() > 1 {
            cells.push(
                self.specs
                    .get(row.spec)
                    .map_or_else(String::new, |spec| spec.name.clone()),
            );
        }
        cells.extend(row.values.iter().map(|value| value.text.clone()));
        cells.push(row.verdict().to_owned());
        let Some(woven) = &row.woven else {
            cells.extend(["-"; 6].map(str::to_owned));
            return cells;
        };
        let cloth = &woven.cloth;
        let percent = |share: f64| significant(100.0 * share, 3);
        cells.push(
            woven
                .reserve
                .map_or_else(|| "-".to_owned(), |r| significant(r, 3)),
        );
        cells.push(woven.place.clone());
        cells.push(format!(
            "{}, {}",
            percent(cloth.warp.crimp),
            percent(cloth.weft.crimp)
        ));
        cells.push(significant(cloth.thickness_mm, 3));
        cells.push(significant(cloth.areal_mass_g_m2, 4));
        cells.push(percent(cloth.cover));
        cells
    }

    fn rows(&self) -> impl Iterator<Item = Vec<String>> + '_ {
        self.variants
            .iter()
            .enumerate()
            .map(|(index, row)| self.cells(index, row))
    }

    /// What the marks mean, and what stands out.
    fn closing(&self) -> String {
        let best = match self.best {
            Some(_) => "best: the largest reserve in the best state of those that do not fail",
            None => "none of them holds",
        };
        format!(
            "{best}; edge: the next along a key fails where this does not, or the other way round"
        )
    }

    /// For the terminal.
    pub fn text(&self) -> String {
        let mut out = table(self.head(), self.rows(), &[]);
        out.push_str(&format!("\n\n{}\n", self.closing()));
        out
    }

    /// For attaching and comparing by line.
    pub fn markdown(&self) -> String {
        let mut out = String::from("# Comparison\n\n");
        for spec in &self.specs {
            out.push_str(&format!(
                "- {}, SHA-256 {}\n",
                markdown::escaped(&spec.name),
                spec.sha256
            ));
        }
        out.push('\n');
        let line = |cells: Vec<String>| {
            let cells: Vec<String> = cells.iter().map(|cell| markdown::escaped(cell)).collect();
            format!("| {} |\n", cells.join(" | "))
        };
        let head = self.head();
        let columns = head.len();
        out.push_str(&line(head));
        out.push_str(&format!("|{}\n", " --- |".repeat(columns)));
        for row in self.rows() {
            out.push_str(&line(row));
        }
        out.push_str(&format!("\n{}\n", self.closing()));
        out
    }

    /// For programs: the contract's keys, and `edge`, `place`, `fails`; with several specs also `specs` and each
    /// variant's index `spec`.
    pub fn json(&self) -> Value {
        let several = self.specs.len() > 1;
        let variants: Vec<Value> = self
            .variants
            .iter()
            .map(|row| {
                let values: Vec<Value> = row
                    .values
                    .iter()
                    .map(|cell| {
                        cell.number
                            .map_or_else(|| json!(cell.text), |number| json!(number))
                    })
                    .collect();
                let mut object = serde_json::Map::new();
                if several {
                    object.insert("spec".into(), json!(row.spec));
                }
                object.insert("values".into(), json!(values));
                object.insert("verdict".into(), json!(row.verdict()));
                object.insert("jammed".into(), json!(row.verdict() == "jammed"));
                object.insert("edge".into(), json!(row.edge));
                if let Some(woven) = &row.woven {
                    object.insert("fails".into(), json!(woven.fails));
                    if let Some(reserve) = woven.reserve {
                        object.insert("reserve".into(), json!(rounded(reserve)));
                    }
                    object.insert("place".into(), json!(woven.place));
                    object.insert("cloth".into(), json!(woven.cloth));
                }
                Value::Object(object)
            })
            .collect();
        let vary: Vec<Value> = self
            .vary
            .iter()
            .map(|column| json!({ "key": column.key, "unit": column.unit }))
            .collect();
        let mut report = json!({
            "lissom": env!("CARGO_PKG_VERSION"),
            "spec": self.specs.first(),
            "vary": vary,
            "variants": variants,
        });
        if let Some(object) = report.as_object_mut() {
            if several {
                object.insert("specs".into(), json!(self.specs));
            }
            if let Some(best) = self.best {
                object.insert("best".into(), json!(best));
            }
        }
        report
    }
}

/// What CSV keeps of a variant that can be woven.
#[derive(Debug, Clone, PartialEq)]
pub struct BriefRow {
    verdict: State,
    fails: bool,
    reserve: Option<f64>,
    place: Cow<'static, str>,
    /// As written: reserve, crimp of warp and weft, thickness mm, mass g/m2, cover, fibre share. Written where it is
    /// computed, on its own core.
    numbers: [String; 7],
}

impl BriefRow {
    /// What is told of a variant.
    pub fn new(spec: &Spec, outcome: &Outcome) -> Self {
        let worst = outcome.worst_finding(spec.require.refuse_kinks);
        let cloth = &outcome.cloth;
        let reserve = worst.and_then(|finding| finding.deciding_reserve());
        let digits = |number: f64| significant(number, 6);
        Self {
            verdict: outcome.verdict(),
            fails: outcome.fails(spec, false),
            reserve,
            place: worst.map_or(Cow::Borrowed(""), |finding| finding.place.clone()),
            numbers: [
                reserve.map_or_else(String::new, digits),
                digits(cloth.warp.crimp),
                digits(cloth.weft.crimp),
                digits(cloth.thickness_mm),
                digits(cloth.areal_mass_g_m2),
                digits(cloth.cover),
                digits(cloth.fibre_volume_fraction),
            ],
        }
    }

    /// How good it is; `None` where it fails.
    pub fn merit(&self) -> Option<Merit> {
        (!self.fails).then_some(Merit(
            Reverse(self.verdict),
            rounded(self.reserve.unwrap_or(f64::INFINITY)),
        ))
    }
}

/// Rows as CSV, one by one: memory does not grow with their number.
pub struct CompareCsv<W: io::Write> {
    writer: csv::Writer<W>,
    specs: Vec<String>,
}

impl<W: io::Write> CompareCsv<W> {
    /// Starts with the head: a column for each varied key with its unit, and fixed ones.
    ///
    /// # Errors
    /// Where it cannot be written.
    pub fn new(to: W, specs: &[SpecReport], vary: &[VaryColumn]) -> csv::Result<Self> {
        let mut this = Self {
            writer: csv::Writer::from_writer(to),
            specs: specs.iter().map(|spec| spec.name.clone()).collect(),
        };
        this.writer.write_field("spec")?;
        for column in vary {
            let unit = if column.unit.is_empty() {
                String::new()
            } else {
                format!(" [{}]", column.unit)
            };
            this.writer.write_field(format!("{}{unit}", column.key))?;
        }
        this.writer.write_record([
            "verdict",
            "fails",
            "reserve",
            "place",
            "warp_crimp",
            "weft_crimp",
            "thickness_mm",
            "areal_mass_g_m2",
            "cover",
            "fibre_volume_fraction",
        ])?;
        Ok(this)
    }

    /// Writes one variant; those without a cloth have no numbers, only the word for it.
    ///
    /// # Errors
    /// Where it cannot be written.
    pub fn row<'v>(
        &mut self,
        spec: usize,
        values: impl Iterator<Item = &'v str>,
        woven: Result<&BriefRow, &str>,
    ) -> csv::Result<()> {
        self.writer
            .write_field(self.specs.get(spec).map_or("", String::as_str))?;
        for value in values {
            self.writer.write_field(value)?;
        }
        let woven = match woven {
            Ok(woven) => woven,
            Err(without) => {
                return self
                    .writer
                    .write_record([without, "", "", "", "", "", "", "", "", ""]);
            }
        };
        self.writer.write_field(woven.verdict.word())?;
        self.writer
            .write_field(if woven.fails { "true" } else { "false" })?;
        let [reserve, numbers @ ..] = &woven.numbers;
        self.writer.write_field(reserve)?;
        self.writer.write_field(woven.place.as_ref())?;
        for number in numbers {
            self.writer.write_field(number)?;
        }
        self.writer.write_record(None::<&[u8]>)
    }

    /// Hands everything written on.
    ///
    /// # Errors
    /// Where it cannot be written.
    pub fn finish(mut self) -> io::Result<()> {
        self.writer.flush()
    }
}
