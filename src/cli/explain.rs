//! `explain`: the method behind a finding's code.

use super::Status;
use super::out::Streams;
use clap::Args;
use lissom::judge::{Code, explain};

#[derive(Debug, Args)]
pub(super) struct Explain {
    /// A code from a report, such as `kink-onset`; without one, all codes are listed
    code: Option<String>,
}

impl Explain {
    pub(super) fn run(self, streams: &Streams) -> Status {
        let Some(wanted) = self.code else {
            let list: String = Code::ALL
                .iter()
                .map(|code| format!("{:<22} {}\n", code.word(), explain(*code).title))
                .collect();
            return streams.give(&list, None, Status::Fine);
        };
        match Code::ALL.iter().find(|code| code.word() == wanted) {
            Some(code) => {
                let told = explain(*code);
                let paragraphs: Vec<String> = told.text.split("\n\n").map(folded).collect();
                let text = format!(
                    "{}: {}\n\n{}\n",
                    code.word(),
                    told.title,
                    paragraphs.join("\n\n")
                );
                streams.give(&text, None, Status::Fine)
            }
            None => {
                let all: Vec<&str> = Code::ALL.iter().map(|code| code.word()).collect();
                streams.complain(format_args!(
                    "error: no code is called `{wanted}`; the codes are {}\n",
                    all.join(", ")
                ));
                Status::WrongInput
            }
        }
    }
}

/// Folds a paragraph; a formula, indented, stays as it is.
fn folded(paragraph: &str) -> String {
    let lines: Vec<String> = paragraph
        .lines()
        .map(|line| {
            if line.starts_with(' ') {
                line.to_owned()
            } else {
                textwrap::fill(line, 100)
            }
        })
        .collect();
    lines.join("\n")
}
