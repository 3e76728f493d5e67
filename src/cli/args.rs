//! The arguments as typed. Help that teaches stands here.

use crate::report::plot::Glyphs;
use clap::{Args, Parser, Subcommand, ValueEnum};
use std::path::PathBuf;

const ABOUT: &str = "Decide how a spacecraft arrives at a moon or planet";

// Paragraphs in one line each: the help is wrapped to the terminal it is shown in.
const LONG_ABOUT: &str = "\
Decide how a spacecraft arrives at a moon or planet: which target orbit, how low to brake, in one burn, two or three, with which engine and margin.

stoop holds one scenario, recomputes every cost as knobs are turned, draws what every target altitude costs by each way of arriving, marks the cheapest altitude and the crossovers where another way starts to pay, and writes the brief for the review.

The ways: direct is one burn at the periapsis of the target orbit; dip brakes low into an ellipse that reaches the target apoapsis and raises the periapsis there; loop brakes low into a long ellipse, changes plane and raises the periapsis far out, and comes back to brake into the target. Without a terminal `stoop` prints the brief as plain text.";

const AFTER: &str = "\
Examples:
  stoop                                      the explorer on a built-in scenario
  stoop new > mine.ron && stoop mine.ron     a scenario of your own
  stoop brief mine.ron --set target-altitude=9000 --format markdown
  stoop sweep mine.ron --over thrust --from 20 --to 400 --format csv
  stoop check mine.ron                       recompute it by other routes

Exit codes: 0 answered; 1 answered, but nothing is flyable (check: or a computation disagrees); 2 cannot run. Errors go to standard error as sentences; a closed pipe ends quietly with 0.

Cautions: for concept and preliminary design only. Commanded manoeuvres need verified flight-dynamics software and review by qualified people. The rules of the launching state and agency on planetary protection and orbital debris apply.";

const BRIEF_HELP: &str = "\
Examples:
  stoop brief mine.ron
  stoop brief mine.ron --set brake-altitude=best --set \"thrust=22 N\"
  stoop brief - --format json < mine.ron
  stoop brief mine.ron --format markdown --output brief.md

The brief ends with the scenario as it was asked, settings included: saved as a file it gives the same digits again.

Exit codes: 0 answered; 1 answered, but nothing is flyable; 2 cannot run.";

const SWEEP_HELP: &str = "\
Examples:
  stoop sweep mine.ron --over target-altitude --log
  stoop sweep mine.ron --over isp --from 220 --to 330 --points 12 --format csv
  stoop sweep mine.ron --over target-altitude --log --format svg --output c.svg
  stoop sweep mine.ron --over target-altitude --log \\
      --and thrust --and-from 20 --and-to 400

Without --from and --to, target-altitude goes over the whole sensible range, floor to cap; every other knob needs both. `stoop knobs` lists the knobs.

Exit codes: 0 answered; 1 nothing is flyable anywhere; 2 cannot run.";

const CHECK_HELP: &str = "\
Examples:
  stoop check mine.ron
  stoop check mine.ron --set target-altitude=9000

Every figure stands beside the same figure found by another route, with the difference and what is allowed.

Exit codes: 0 sound and all agree; 1 sound, but nothing is flyable or a computation disagrees; 2 the file has faults, or it cannot be read.";

const NEW_HELP: &str = "\
Examples:
  stoop new > mine.ron
  stoop new --output mine.ron      (a file that is there already is left as it is)";

const BODIES_HELP: &str = "\
Examples:
  stoop bodies
  stoop bodies --format json";

const KNOBS_HELP: &str = "\
Examples:
  stoop knobs
  stoop knobs --format json      (with the column of each knob in CSV and JSON)";

/// The command line.
#[derive(Debug, Parser)]
#[command(name = "stoop", version, about = ABOUT, long_about = LONG_ABOUT, after_help = AFTER, args_conflicts_with_subcommands = true)]
pub struct Cli {
    /// What to do; without it the explorer opens.
    #[command(subcommand)]
    pub command: Option<Command>,
    /// The explorer's own arguments.
    #[command(flatten)]
    pub explore: ExploreArgs,
}

/// Arguments of the explorer.
#[derive(Debug, Args)]
pub struct ExploreArgs {
    /// Scenario file, or - for standard input; without it the built-in scenario opens
    pub file: Option<PathBuf>,
    /// Set a knob first, like target-altitude=9000 or "thrust=22 N"; repeatable, applied in order
    #[arg(long, value_name = "KNOB=VALUE")]
    pub set: Vec<String>,
    /// Symbols of curves
    #[arg(long, value_enum, default_value_t = GlyphsArg::Ascii)]
    pub glyphs: GlyphsArg,
}

/// Symbols on the command line.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum GlyphsArg {
    /// 7-bit only, the same everywhere
    Ascii,
    /// Denser symbols, where the font has them
    Fine,
}

impl From<GlyphsArg> for Glyphs {
    fn from(arg: GlyphsArg) -> Self {
        match arg {
            GlyphsArg::Ascii => Glyphs::Ascii,
            GlyphsArg::Fine => Glyphs::Fine,
        }
    }
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// The verdict, the ways side by side, burns, landmarks, warnings, sources and the cost curve
    #[command(after_help = BRIEF_HELP)]
    Brief(BriefArgs),
    /// A curve over one knob, or a map over two
    #[command(after_help = SWEEP_HELP)]
    Sweep(SweepArgs),
    /// Is the file sound, and do independent computations agree
    #[command(after_help = CHECK_HELP)]
    Check(CheckArgs),
    /// A commented scenario to start from
    #[command(after_help = NEW_HELP)]
    New(NewArgs),
    /// The catalogue of bodies with the source of every value
    #[command(after_help = BODIES_HELP)]
    Bodies(ListArgs),
    /// Every knob: name, unit, range, meaning
    #[command(after_help = KNOBS_HELP)]
    Knobs(ListArgs),
}

/// A scenario and what is set in it.
#[derive(Debug, Args)]
pub struct SourceArgs {
    /// Scenario file, or - for standard input
    pub file: PathBuf,
    /// Set a knob first, like target-altitude=9000 or "thrust=22 N"; repeatable, applied in order
    #[arg(long, value_name = "KNOB=VALUE")]
    pub set: Vec<String>,
}

/// Where the result goes.
#[derive(Debug, Args)]
pub struct OutputArgs {
    /// Write to this file, whole or not at all, instead of standard output
    #[arg(long, value_name = "PATH")]
    pub output: Option<PathBuf>,
}

/// Arguments of `brief`.
#[derive(Debug, Args)]
pub struct BriefArgs {
    #[command(flatten)]
    #[allow(missing_docs)]
    pub source: SourceArgs,
    /// Form of the result
    #[arg(long, value_enum, default_value_t = BriefFormat::Text)]
    pub format: BriefFormat,
    /// Symbols of the curve in text
    #[arg(long, value_enum, default_value_t = GlyphsArg::Ascii)]
    pub glyphs: GlyphsArg,
    #[command(flatten)]
    #[allow(missing_docs)]
    pub output: OutputArgs,
}

/// Forms of the brief.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
#[allow(missing_docs)]
pub enum BriefFormat {
    Text,
    Markdown,
    Json,
}

/// Arguments of `sweep`.
#[derive(Debug, Args)]
pub struct SweepArgs {
    #[command(flatten)]
    #[allow(missing_docs)]
    pub source: SourceArgs,
    /// The knob to sweep, by its name in `stoop knobs`
    #[arg(long, value_name = "KNOB")]
    pub over: String,
    /// First value, with its unit if you like
    #[arg(long, value_name = "A", allow_hyphen_values = true)]
    pub from: Option<String>,
    /// Last value
    #[arg(long, value_name = "B", allow_hyphen_values = true)]
    pub to: Option<String>,
    /// How many values
    #[arg(long, value_name = "N", default_value_t = 50)]
    pub points: usize,
    /// Evenly spaced in the logarithm
    #[arg(long)]
    pub log: bool,
    /// A second knob, for a map
    #[arg(long, value_name = "KNOB2")]
    pub and: Option<String>,
    /// First value of the second knob
    #[arg(long, value_name = "A2", allow_hyphen_values = true, requires = "and")]
    pub and_from: Option<String>,
    /// Last value of the second knob
    #[arg(long, value_name = "B2", allow_hyphen_values = true, requires = "and")]
    pub and_to: Option<String>,
    /// How many values of the second knob
    #[arg(long, value_name = "N2", default_value_t = 20)]
    pub and_points: usize,
    /// The second knob evenly spaced in the logarithm
    #[arg(long, requires = "and")]
    pub and_log: bool,
    /// Form of the result
    #[arg(long, value_enum, default_value_t = SweepFormat::Text)]
    pub format: SweepFormat,
    #[command(flatten)]
    #[allow(missing_docs)]
    pub output: OutputArgs,
}

/// Forms of a sweep.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
#[allow(missing_docs)]
pub enum SweepFormat {
    Text,
    Csv,
    Json,
    Svg,
}

/// Arguments of `check`.
#[derive(Debug, Args)]
pub struct CheckArgs {
    #[command(flatten)]
    #[allow(missing_docs)]
    pub source: SourceArgs,
    #[command(flatten)]
    #[allow(missing_docs)]
    pub output: OutputArgs,
}

/// Arguments of `new`.
#[derive(Debug, Args)]
pub struct NewArgs {
    #[command(flatten)]
    #[allow(missing_docs)]
    pub output: OutputArgs,
}

/// Arguments of `bodies` and `knobs`.
#[derive(Debug, Args)]
pub struct ListArgs {
    /// Form of the result
    #[arg(long, value_enum, default_value_t = ListFormat::Text)]
    pub format: ListFormat,
    #[command(flatten)]
    #[allow(missing_docs)]
    pub output: OutputArgs,
}

/// Forms of the lists.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
#[allow(missing_docs)]
pub enum ListFormat {
    Text,
    Json,
}
