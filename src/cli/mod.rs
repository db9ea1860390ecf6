//! The command line: one file per command; each joins studies and reports.

mod check;
mod compare;
mod explain;
mod fibres;
mod limits;
mod new;
mod out;
mod routes;
mod weaves;

use clap::{Parser, Subcommand};
use std::process::ExitCode;

/// How a command ended; the number is the exit status.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Status {
    /// Nothing failed.
    Fine = 0,
    /// Something fails.
    Fails = 1,
    /// The input is wrong; nothing was written.
    WrongInput = 2,
    /// The machine failed: a file cannot be read or written.
    Machine = 3,
}

/// Holds every bend of a woven technical cloth against what its fibres stand.
#[derive(Debug, Parser)]
#[command(
    name = "lissom",
    version,
    max_term_width = 100,
    arg_required_else_help = true
)]
struct Arguments {
    /// When to colour the output
    #[arg(long, global = true, value_enum, default_value_t = out::Colour::Auto)]
    color: out::Colour,
    #[command(subcommand)]
    command: Command,
}

#[derive(Debug, Subcommand)]
enum Command {
    /// Check one or several specs: what breaks, kinks or yields, by what margin, where
    Check(check::Check),
    /// Lay specs side by side, or one over a grid of values of its keys
    Compare(compare::Compare),
    /// How far a spec may go: smallest radii, largest tensions, tightest setts that still hold
    Limits(limits::Limits),
    /// List the fibres, or show everything known of one
    Fibres(fibres::Fibres),
    /// List the named weaves, or draw one on point paper
    Weaves(weaves::Weaves),
    /// List the ready routes, or show what the yarn runs over on one, with sources
    Routes(routes::Routes),
    /// Write a commented spec to start from
    New(new::New),
    /// Tell the method behind a finding's code
    Explain(explain::Explain),
}

/// Reads the arguments and runs the command.
pub(crate) fn run() -> ExitCode {
    let arguments = match Arguments::try_parse() {
        Ok(arguments) => arguments,
        Err(error) => {
            // Help and version are answers; everything else is wrong input.
            let status = if error.use_stderr() {
                Status::WrongInput
            } else {
                Status::Fine
            };
            let _ = error.print();
            return ExitCode::from(status as u8);
        }
    };
    let streams = out::Streams::new(arguments.color);
    let status = match arguments.command {
        Command::Check(command) => command.run(&streams),
        Command::Compare(command) => command.run(&streams),
        Command::Limits(command) => command.run(&streams),
        Command::Fibres(command) => command.run(&streams),
        Command::Weaves(command) => command.run(&streams),
        Command::Routes(command) => command.run(&streams),
        Command::New(command) => command.run(&streams),
        Command::Explain(command) => command.run(&streams),
    };
    ExitCode::from(status as u8)
}
