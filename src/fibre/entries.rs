//! The files of the library, compiled in. One file for each fibre, so that a spec pays only for the records it names.

/// One file of the library: what it takes to find a record without reading it.
pub(super) struct Entry {
    pub(super) id: &'static str,
    pub(super) name: &'static str,
    pub(super) text: &'static str,
}

macro_rules! entry {
    ($id:literal, $name:literal) => {
        Entry {
            id: $id,
            name: $name,
            text: include_str!(concat!("data/", $id, ".toml")),
        }
    };
}

/// In the order of a listing: by family. Ids and names repeat those in the files; a test holds them equal.
pub(super) static ENTRIES: [Entry; COUNT] = [
    entry!("e-glass", "E-glass"),
    entry!("s-glass", "S-glass (high strength)"),
    entry!("ar-glass", "AR-glass (alkali resistant)"),
    entry!("d-glass", "D-glass / low-dielectric glass"),
    entry!("quartz", "Quartz (fused silica)"),
    entry!("basalt", "Basalt (continuous)"),
    entry!("carbon-pan-sm", "PAN carbon, standard modulus"),
    entry!("carbon-pan-im", "PAN carbon, intermediate modulus"),
    entry!("carbon-pan-hm", "PAN carbon, high modulus"),
    entry!("carbon-pitch-hm", "Pitch carbon, high modulus"),
    entry!("carbon-pitch-uhm", "Pitch carbon, ultra-high modulus"),
    entry!("aramid-std", "Para-aramid, standard modulus"),
    entry!("aramid-hm", "Para-aramid, high modulus"),
    entry!("aramid-copolymer", "Para-aramid copolymer"),
    entry!("meta-aramid", "Meta-aramid"),
    entry!("uhmwpe", "UHMWPE"),
    entry!("pbo", "PBO"),
    entry!("lcp-polyarylate", "LCP polyarylate (aromatic polyester)"),
    entry!("alumina", "Alumina (continuous, polycrystalline alpha)"),
    entry!("mullite-alumina", "Mullite-alumina"),
    entry!("aluminosilicate", "Aluminoborosilicate / aluminosilicate"),
    entry!("sic-oxygen", "SiC, oxygen-containing (first generation)"),
    entry!("sic-low-oxygen", "SiC, low oxygen (second generation)"),
    entry!(
        "sic-stoichiometric",
        "SiC, near-stoichiometric (third generation)"
    ),
    entry!("sic-cvd-mono", "SiC, CVD monofilament on carbon core"),
    entry!("boron-mono", "Boron monofilament on tungsten core"),
    entry!(
        "stainless",
        "Stainless steel fine fibre (austenitic, bundle drawn)"
    ),
    entry!("tungsten", "Tungsten wire (drawn)"),
    entry!("polyester-ht", "High-tenacity polyester"),
    entry!("pa66-ht", "Polyamide 6.6, high tenacity"),
    entry!("pp-ht", "Polypropylene, high tenacity"),
    entry!("flax", "Flax (elementary fibre)"),
    entry!("silk", "Silk (mulberry, degummed)"),
    entry!("stainless-annealed", "Stainless steel wire, soft annealed"),
    entry!("stainless-hard-drawn", "Stainless steel wire, hard drawn"),
    entry!("copper-annealed", "Copper wire, soft annealed"),
    entry!("phosphor-bronze-annealed", "Phosphor bronze wire, annealed"),
    entry!("brass-annealed", "Brass wire, annealed"),
    entry!("nickel-annealed", "Nickel wire, annealed"),
    entry!(
        "aluminium-magnesium-annealed",
        "Aluminium-magnesium alloy wire, annealed"
    ),
    entry!("molybdenum-drawn", "Molybdenum wire, drawn"),
];

/// Number of records.
pub(super) const COUNT: usize = 41;
