//! The words of a judgement: states, limits, and the stable codes of their methods.

/// What becomes of the fibre, from best to worst.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum State {
    /// The reserve is at least the one required.
    Holds,
    /// The reserve is at least 1 and below the one required.
    Close,
    /// Kink bands form; damaged, not broken.
    Kinks,
    /// The bend stays.
    Yields,
    /// More filaments break than the spec allows.
    Sheds,
    /// The yarn is hotter than its fibre stands.
    Overheats,
    /// It breaks.
    Breaks,
}

impl State {
    /// The word in reports.
    pub fn word(self) -> &'static str {
        match self {
            Self::Holds => "holds",
            Self::Close => "close",
            Self::Kinks => "kinks",
            Self::Yields => "yields",
            Self::Sheds => "sheds",
            Self::Overheats => "overheats",
            Self::Breaks => "breaks",
        }
    }
}

/// What limits a bend.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Limit {
    /// Fracture on the tension side.
    Fracture,
    /// Fracture on the compressed side.
    Compression,
    /// Onset of kink bands.
    Kink,
    /// Compressive strain of a kinked fibre.
    KinkStrain,
    /// Yield.
    Yield,
    /// Strain at break.
    Strain,
    /// Temperature in air.
    Temperature,
    /// Broken filaments per metre of yarn.
    Filaments,
}

impl Limit {
    /// The word in reports.
    pub fn word(self) -> &'static str {
        match self {
            Self::Fracture => "fracture",
            Self::Compression => "compression",
            Self::Kink | Self::KinkStrain => "kink",
            Self::Yield => "yield",
            Self::Strain => "strain",
            Self::Temperature => "temperature",
            Self::Filaments => "filaments",
        }
    }

    /// Whether its figures are strains rather than stresses.
    pub fn is_strain(self) -> bool {
        matches!(self, Self::Strain | Self::KinkStrain)
    }

    /// The state below a reserve of 1.
    pub(super) fn failed(self) -> State {
        match self {
            Self::Fracture | Self::Compression | Self::Strain => State::Breaks,
            Self::Kink | Self::KinkStrain => State::Kinks,
            Self::Yield => State::Yields,
            Self::Temperature => State::Overheats,
            Self::Filaments => State::Sheds,
        }
    }

    /// The stable code of the method.
    pub fn code(self) -> Code {
        match self {
            Self::Fracture => Code::TensionFracture,
            Self::Compression => Code::CompressionFracture,
            Self::Kink => Code::KinkOnset,
            Self::KinkStrain => Code::KinkStrain,
            Self::Yield => Code::YieldOnset,
            Self::Strain => Code::StrainAtBreak,
            Self::Temperature => Code::OverTemperature,
            Self::Filaments => Code::BrokenFilaments,
        }
    }
}

/// The stable name of the method behind a finding; `lissom explain CODE` tells it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Code {
    /// No limit applies: neither bent nor pulled.
    NoLimit,
    /// Fracture on the tension side.
    TensionFracture,
    /// Fracture on the compressed side.
    CompressionFracture,
    /// Onset of kink bands.
    KinkOnset,
    /// Compressive strain of a kinked fibre over 3 %.
    KinkStrain,
    /// Onset of yield.
    YieldOnset,
    /// Strain at break of a ductile fibre.
    StrainAtBreak,
    /// Hotter than the fibre stands.
    OverTemperature,
    /// More filaments break than the spec allows.
    BrokenFilaments,
    /// Yarns that cannot interlace.
    Jammed,
}

impl Code {
    /// Every code, in the order of the documents.
    pub const ALL: [Self; 10] = [
        Self::TensionFracture,
        Self::CompressionFracture,
        Self::KinkOnset,
        Self::KinkStrain,
        Self::YieldOnset,
        Self::StrainAtBreak,
        Self::OverTemperature,
        Self::BrokenFilaments,
        Self::NoLimit,
        Self::Jammed,
    ];

    /// The code as printed.
    pub fn word(self) -> &'static str {
        match self {
            Self::NoLimit => "no-limit",
            Self::TensionFracture => "tension-fracture",
            Self::CompressionFracture => "compression-fracture",
            Self::KinkOnset => "kink-onset",
            Self::KinkStrain => "kink-strain",
            Self::YieldOnset => "yield-onset",
            Self::StrainAtBreak => "strain-at-break",
            Self::OverTemperature => "over-temperature",
            Self::BrokenFilaments => "broken-filaments",
            Self::Jammed => "jammed",
        }
    }
}
