//! Specs side by side, and a spec over a grid of values of its keys.
//!
//! Every variant is the spec's document with its values replaced, read and run as `check` would. Variants are
//! computed on all cores in blocks and handed on in order: first spec first, the first axis slowest. Memory holds
//! one block, however large the grid; what is kept of a variant is the caller's to say.

use super::vary::Axis;
use crate::flow::{Outcome, run};
use crate::pattern::Weaves;
use crate::spec::{Document, Problem, SetError, Spec};
use crate::weave::ClothError;
use rayon::prelude::*;

/// Variants computed together.
const BLOCK: usize = 8192;

/// The variants to be compared: every spec with every combination of the axes' values.
#[derive(Debug, Clone)]
pub struct Grid {
    documents: Vec<Document>,
    axes: Vec<Axis>,
}

/// One variant's place in the grid.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Place {
    /// Which spec.
    pub spec: usize,
    /// Which value of each axis.
    pub values: Vec<usize>,
}

/// What became of a variant.
#[derive(Debug, Clone, PartialEq)]
pub enum Told<T> {
    /// It can be woven; what the caller kept of it.
    Woven(T),
    /// Its yarns do not fit or do not interlace.
    Jammed,
    /// No path or balance of its stiff yarns was found.
    Unsolved,
}

/// Why a grid cannot be compared.
#[derive(Debug, Clone, PartialEq)]
pub enum GridError {
    /// A key that a spec does not have.
    Set(SetError),
    /// A variant that is no valid spec.
    Wrong {
        /// Which.
        place: Place,
        /// What is wrong with it.
        problems: Vec<Problem>,
    },
}

impl Grid {
    /// The grid of these specs and axes.
    pub fn new(documents: Vec<Document>, axes: Vec<Axis>) -> Self {
        Self { documents, axes }
    }

    /// The specs.
    pub fn documents(&self) -> &[Document] {
        &self.documents
    }

    /// The axes.
    pub fn axes(&self) -> &[Axis] {
        &self.axes
    }

    /// How many variants there are.
    pub fn len(&self) -> usize {
        let combinations: usize = self
            .axes
            .iter()
            .map(|axis| axis.values.len())
            .fold(1, usize::saturating_mul);
        self.documents.len().saturating_mul(combinations)
    }

    /// Whether there are none.
    pub fn is_empty(&self) -> bool {
        self.len() == 0
    }

    /// The place of a variant by its number.
    pub fn place(&self, mut number: usize) -> Place {
        let mut values = vec![0; self.axes.len()];
        for (value, axis) in values.iter_mut().zip(&self.axes).rev() {
            *value = number % axis.values.len();
            number /= axis.values.len();
        }
        Place {
            spec: number,
            values,
        }
    }

    /// Numbers of the next variant along each axis.
    pub fn neighbours(&self, number: usize) -> Vec<usize> {
        let place = self.place(number);
        let mut stride = 1;
        let mut next = Vec::with_capacity(self.axes.len());
        for (value, axis) in place.values.iter().zip(&self.axes).rev() {
            if value + 1 < axis.values.len() {
                next.push(number + stride);
            }
            stride *= axis.values.len();
        }
        next
    }

    /// Computes every variant and hands it on in order. `tell` says what is kept of one; `take` gets it and may stop
    /// the whole by returning false.
    ///
    /// # Errors
    /// The first variant that is no valid spec; one whose yarns do not fit is jammed, not wrong.
    pub fn compare<T: Send>(
        &self,
        weaves: &Weaves,
        tell: impl Fn(&Spec, &Outcome) -> T + Sync,
        mut take: impl FnMut(usize, Told<T>) -> bool,
    ) -> Result<(), GridError> {
        let count = self.len();
        let mut from = 0;
        while from < count {
            let to = (from + BLOCK).min(count);
            let block: Result<Vec<Told<T>>, GridError> = (from..to)
                .into_par_iter()
                .map_init(
                    || self.documents.clone(),
                    |documents, number| self.variant(documents, number, weaves, &tell),
                )
                .collect();
            for (offset, told) in block?.into_iter().enumerate() {
                if !take(from + offset, told) {
                    return Ok(());
                }
            }
            from = to;
        }
        Ok(())
    }

    fn variant<T>(
        &self,
        documents: &mut [Document],
        number: usize,
        weaves: &Weaves,
        tell: &(impl Fn(&Spec, &Outcome) -> T + Sync),
    ) -> Result<Told<T>, GridError> {
        let place = self.place(number);
        let document = &mut documents[place.spec];
        for (value, axis) in place.values.iter().zip(&self.axes) {
            document
                .set(&axis.key, &axis.values[*value].put)
                .map_err(GridError::Set)?;
        }
        let spec = match document.spec(weaves) {
            Ok(spec) => spec,
            Err(problems) if problems.iter().all(|problem| problem.crowded) => {
                return Ok(Told::Jammed);
            }
            Err(problems) => return Err(GridError::Wrong { place, problems }),
        };
        match run(&spec, 1.0) {
            Ok(outcome) => Ok(Told::Woven(tell(&spec, &outcome))),
            Err(
                ClothError::Jammed
                | ClothError::Lay { .. }
                | ClothError::Thickness { .. }
                | ClothError::Corner { .. },
            ) => Ok(Told::Jammed),
            Err(
                ClothError::NoPath { .. }
                | ClothError::NoBalance { .. }
                | ClothError::NoOtherState { .. },
            ) => Ok(Told::Unsolved),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::span::SourceText;

    const SPEC: &str = "name = \"t\"\n[yarn.y]\nfibre = \"e-glass\"\nlinear_density = \"68 tex\"\nfilaments = 400\n[weave]\n\
        pattern = \"plain\"\nwarp = { yarn = \"y\", sett = \"12 /cm\" }\nweft = { yarn = \"y\", sett = \"10 /cm\" }\n";

    fn grid(vary: &[&str]) -> Grid {
        let document = Document::parse(SourceText::new("t", SPEC)).unwrap();
        Grid::new(
            vec![document],
            vary.iter().map(|text| Axis::parse(text).unwrap()).collect(),
        )
    }

    fn all<T: Send>(grid: &Grid, tell: impl Fn(&Spec, &Outcome) -> T + Sync) -> Vec<Told<T>> {
        let mut rows = Vec::new();
        grid.compare(&Weaves::builtin(), tell, |number, told| {
            assert_eq!(number, rows.len(), "in order");
            rows.push(told);
            true
        })
        .unwrap();
        rows
    }

    #[test]
    fn places_and_neighbours_agree() {
        let grid = grid(&[
            "weave.warp.sett=10..14 /cm step 2",
            "weave.weft.sett=8,9 /cm",
        ]);
        assert_eq!(grid.len(), 6);
        assert_eq!(grid.place(3).values, [1, 1]);
        assert_eq!(grid.neighbours(0), [1, 2]);
        assert_eq!(grid.neighbours(5), Vec::<usize>::new());
    }

    /// Each variant is what a check of the changed text would give, whatever thread computed it.
    #[test]
    fn variants_are_single_runs_in_order() {
        let grid = grid(&[
            "weave.warp.sett=8..20 /cm step 0.01",
            "weave.pattern=plain,satin-8",
        ]);
        let rows = all(&grid, |spec, outcome| {
            (spec.weave.warp.sett_per_mm, outcome.cloth.warp.crimp)
        });
        assert_eq!(rows.len(), 2402);
        for number in [0, 1, 777, 1500, 2401] {
            let place = grid.place(number);
            let sett = &grid.axes()[0].values[place.values[0]].text;
            let pattern = &grid.axes()[1].values[place.values[1]].text;
            let text = SPEC
                .replace("12 /cm", &format!("{sett} /cm"))
                .replace("\"plain\"", &format!("\"{pattern}\""));
            let spec = Spec::read(SourceText::new("t", text), &Weaves::builtin()).unwrap();
            let outcome = run(&spec, 1.0).unwrap();
            assert_eq!(
                rows[number],
                Told::Woven((spec.weave.warp.sett_per_mm, outcome.cloth.warp.crimp))
            );
        }
    }

    /// Tex is kept and the filaments follow, whether the yarn's own key or its fibre's is varied.
    #[test]
    fn a_varied_filament_diameter_keeps_tex_and_frees_the_count() {
        for key in [
            "fibre.e-glass.filament_diameter",
            "yarn.y.filament_diameter",
        ] {
            let grid = grid(&[&format!("{key}=5,9,13 um")]);
            let rows = all(&grid, |spec, _| {
                let count = spec.weave.warp.yarn.count;
                (count.filaments, count.linear_density_tex)
            });
            // 68 tex at 2.54 g/cm3: 26.77e-3 mm2 over pi d²/4.
            for (row, filaments) in rows.iter().zip([1363, 421, 202]) {
                assert_eq!(*row, Told::Woven((filaments, 68.0)), "{key}");
            }
        }
    }

    #[test]
    fn jammed_variants_stay_and_wrong_ones_are_errors() {
        let jammed = grid(&["weave.warp.sett=12,60,400 /cm"]);
        let rows = all(&jammed, |_, _| ());
        assert_eq!(rows, [Told::Woven(()), Told::Jammed, Told::Jammed]);
        let wrong = grid(&["weave.pattern=plain,satin 8 step 4"]);
        let error = wrong
            .compare(&Weaves::builtin(), |_, _| (), |_, _| true)
            .unwrap_err();
        assert!(
            matches!(error, GridError::Wrong { ref place, .. } if place.values == [1]),
            "{error:?}"
        );
        let missing = grid(&["passage.heald.radius=1,2 mm"]);
        assert!(matches!(
            missing.compare(&Weaves::builtin(), |_, _| (), |_, _| true),
            Err(GridError::Set(SetError::NoSuch { .. }))
        ));
    }
}
