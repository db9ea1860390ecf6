//! Reports: what was found, for people and for programs. They compute nothing.
//!
//! | file | what is in it |
//! | --- | --- |
//! | `check` | the one report of `check`, from which all formats are printed; its fields are the JSON contract |
//! | `bend`, `bend_words` | one bend: its part of the contract, and it in words |
//! | `broken` | broken filaments to expect |
//! | `limits` | how far a spec may go |
//! | `compare` | the report of a comparison, in all formats |
//! | `text`, `markdown`, `json` | the formats |
//! | `table` | tables in text |
//! | `cautions` | what every report warns of, by fibre |
//! | `problems` | problems of a spec with the line and a mark under the place |
//! | `fibres`, `weaves`, `routes` | listings of the library, of the named weaves and of the ready routes |

mod bend;
mod bend_words;
mod broken;
mod cautions;
mod check;
mod compare;
mod fibres;
mod json;
mod limits;
mod markdown;
mod problems;
mod routes;
mod table;
mod text;
mod weaves;

pub use bend::{BendRow, LimitRow};
pub use broken::{BrokenReport, StepRow};
pub use cautions::cautions;
pub use check::{
    Advice, CheckReport, ClothReport, SensitivityRow, Setting, SpecReport, SystemReport,
};
pub use compare::{
    BriefRow, CompareCsv, CompareReport, Merit, VariantRow, VaryCell, VaryColumn, WovenRow,
};
pub use fibres::{fibre_text, fibres_json, fibres_text};
pub use json::to_json;
pub use limits::{LimitsReport, LimitsRow};
pub use markdown::markdown;
pub use problems::{jammed, problems};
pub use routes::{route_text, routes_json, routes_text};
pub use text::text;
pub use weaves::{weave_text, weaves_json, weaves_text};
