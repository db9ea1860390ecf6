//! The library as a whole, and the mechanics, against values from outside this program.

use std::collections::BTreeSet;

use super::kind::{CompressionBasis, Hazard, Kind};
use super::overrides::FibreOverrides;
use super::{Fibre, FindError, Mechanism, Record, library};

fn record(id: &str) -> &'static Record {
    library().find(id).unwrap()
}

fn fibre(id: &str) -> Fibre {
    record(id).fibre().unwrap()
}

fn plain(diameter_um: f64, modulus_gpa: f64, strength_gpa: f64) -> Fibre {
    Fibre::from_values(&FibreOverrides {
        kind: Some(Kind::Brittle),
        diameter_mm: Some(diameter_um / 1000.0),
        density_g_cm3: Some(1.0),
        modulus_mpa: Some(modulus_gpa * 1000.0),
        strength_mpa: Some(strength_gpa * 1000.0),
        ..FibreOverrides::default()
    })
    .unwrap()
}

/// Smallest radii computed from the same handbook figures outside this program (arithmetic by hand, R = E d / (2 s) to four
/// decimals): fibre, R_min in mm, and, where a compressive strength is known, the radius in mm at which the compressed side
/// reaches it as it stands, without the factor for bending (three decimals).
const RADII: [(&str, f64, Option<f64>); 26] = [
    ("e-glass", 0.1493, None),
    ("s-glass", 0.1106, None),
    ("ar-glass", 0.2965, None),
    ("d-glass", 0.075, None),
    ("quartz", 0.0982, None),
    ("basalt", 0.2755, None),
    ("carbon-pan-sm", 0.2064, Some(0.403)),
    ("carbon-pan-im", 0.1336, Some(0.334)),
    ("carbon-pan-hm", 0.2321, Some(0.650)),
    ("carbon-pitch-hm", 0.8333, Some(3.571)),
    ("carbon-pitch-uhm", 1.0833, Some(8.667)),
    ("aramid-std", 0.149, Some(0.960)),
    ("aramid-hm", 0.23, Some(1.150)),
    ("aramid-copolymer", 0.1297, Some(1.103)),
    ("uhmwpe", 0.3117, Some(2.750)),
    ("pbo", 0.2793, Some(5.400)),
    ("lcp-polyarylate", 0.2677, Some(2.856)),
    ("alumina", 0.7327, Some(0.297)),
    ("mullite-alumina", 0.7429, None),
    ("aluminosilicate", 0.5156, None),
    ("sic-oxygen", 0.5, None),
    ("sic-low-oxygen", 0.5786, None),
    ("sic-stoichiometric", 0.7944, None),
    ("sic-cvd-mono", 8.1159, None),
    ("boron-mono", 5.7143, Some(3.390)),
    ("flax", 0.36, Some(0.450)),
];

#[test]
fn radii_match_those_computed_outside() {
    for (id, min_radius_mm, onset_mm) in RADII {
        let fibre = fibre(id);
        let found = fibre.min_elastic_radius_mm();
        assert!((found - min_radius_mm).abs() <= 0.500_1e-4, "{id}: {found}");
        let onset = fibre
            .compression()
            .map(|compression| fibre.radius_at_stress_mm(compression.strength_mpa));
        match (onset, onset_mm) {
            (Some(found), Some(given)) => {
                assert!((found - given).abs() <= 0.500_1e-3, "{id}: {found}");
            }
            (found, given) => assert_eq!(found.is_some(), given.is_some(), "{id}"),
        }
    }
}

/// Common practice, no source: radii that are usually quoted for type I carbon, type II carbon and glass.
#[test]
fn radii_of_common_practice() {
    for (diameter_um, modulus_gpa, strength_gpa, said) in [
        (8.0, 390.0, 2.2, "0.71"),
        (8.0, 250.0, 2.7, "0.37"),
        (11.0, 75.0, 3.5, "0.12"),
    ] {
        let radius_mm = plain(diameter_um, modulus_gpa, strength_gpa).min_elastic_radius_mm();
        assert_eq!(format!("{radius_mm:.2}"), said);
    }
}

/// The mooring rope table (`mooring-rope-table`) prints specific values in N/tex, which is GPa/(g/cm3): standard para-aramid
/// 49 N/tex for 70.6 GPa at 1.44 g/cm3, PBO 2.54 N/tex for 4.0 GPa (two digits) at 1.56 g/cm3.
#[test]
fn specific_values_match_a_published_table() {
    let mut aramid = fibre("aramid-std");
    assert_eq!(aramid.density_g_cm3, 1.44);
    assert!((aramid.specific_modulus_mj_kg() - 50.0).abs() < 1e-9);
    aramid.modulus_mpa = 70_600.0;
    assert_eq!(format!("{:.0}", aramid.specific_modulus_mj_kg()), "49");
    let mut pbo = fibre("pbo");
    pbo.strength_mpa = 2.54 * 1.56 * 1000.0;
    assert!((pbo.specific_strength_mj_kg() - 2.54).abs() < 1e-12);
    assert_eq!(format!("{:.1}", pbo.strength_mpa / 1000.0), "4.0");
}

/// Closed forms of beam theory: stress is moment times half the diameter over the second moment of area; a doubled diameter
/// has sixteen times the rigidity and four times the area; the radius at the strength has the strength as its stress.
#[test]
fn beam_theory_holds_together() {
    let thin = plain(10.0, 100.0, 2.0);
    let thick = thin.clone().with_diameter_mm(0.02);
    let second_moment_mm4 = std::f64::consts::PI * 0.01_f64.powi(4) / 64.0;
    let k_per_mm = 3.0;
    let stress_mpa = thin.bending_moment_n_mm(k_per_mm) * 0.005 / second_moment_mm4;
    assert!((thin.bending_stress_mpa(k_per_mm) / stress_mpa - 1.0).abs() < 1e-12);
    let rigidities = thick.filament_rigidity_n_mm2() / thin.filament_rigidity_n_mm2();
    assert!((rigidities - 16.0).abs() < 1e-9);
    assert!((thick.filament_area_mm2() / thin.filament_area_mm2() - 4.0).abs() < 1e-12);
    // pi 0.01^2 / 4, and pi 1e5 0.01^4 / 64, by hand.
    assert!((thin.filament_area_mm2() - 7.853_981_6e-5).abs() < 1e-12);
    assert!((thin.filament_rigidity_n_mm2() - 4.908_738_5e-5).abs() < 1e-12);
    let limit_mpa = thin.bending_stress_mpa(1.0 / thin.min_elastic_radius_mm());
    assert!((limit_mpa - 2000.0).abs() < 1e-9);
}

/// A compressive strength read in bending stands as it is; a uniaxial one is doubled (Attwood et al. 2015, Fawaz et al. 1992).
/// With it standard PAN carbon breaks on the tension side, as observed, and pitch carbon on the compressed side.
#[test]
fn the_bending_factor_is_for_uniaxial_figures_only() {
    assert_eq!(
        record("flax").compression_basis,
        Some(CompressionBasis::Bending)
    );
    assert_eq!(
        fibre("flax").compressive_strength_in_bending_mpa(),
        Some(1200.0)
    );
    assert_eq!(
        fibre("uhmwpe").compressive_strength_in_bending_mpa(),
        Some(680.0)
    );
    let pan = fibre("carbon-pan-sm");
    assert_eq!(pan.bend_radius_mm(), pan.min_elastic_radius_mm());
    let pitch = fibre("carbon-pitch-uhm");
    // 780 GPa, 10 um, 0.9 GPa.
    assert!((pitch.bend_radius_mm() - 4.333_333).abs() < 1e-6);
}

#[test]
fn each_kind_has_the_radii_that_belong_to_it() {
    let aramid = fibre("aramid-hm");
    // 115 GPa, 12 um, 1.2 GPa.
    assert!((aramid.kink_radius_mm().unwrap() - 0.575).abs() < 1e-12);
    assert_eq!(aramid.yield_radius_mm(), None);
    assert_eq!(aramid.bend_radius_mm(), aramid.min_elastic_radius_mm());
    assert_eq!(
        aramid.unmarked_radius_mm(),
        aramid.kink_radius_mm().unwrap()
    );
    let wire = fibre("stainless-annealed");
    // 195 GPa, 100 um, 0.25 GPa; break at 30 %.
    assert!((wire.yield_radius_mm().unwrap() - 39.0).abs() < 1e-9);
    assert!((wire.bend_radius_mm() - 0.1 / 0.6).abs() < 1e-12);
    assert_eq!(wire.kink_radius_mm(), None);
    assert_eq!(wire.compression(), None);
    let glass = fibre("e-glass");
    assert_eq!(glass.kink_radius_mm(), None);
    assert_eq!(glass.unmarked_radius_mm(), glass.min_elastic_radius_mm());
    // Known only as a lower bound: no limit.
    assert_eq!(glass.compression(), None);
}

#[test]
fn every_record_reads_and_is_a_fibre() {
    let records: Vec<&Record> = library().iter().map(|record| record.unwrap()).collect();
    assert!(records.len() >= 28, "{}", records.len());
    for record in records {
        let fibre = record.fibre().unwrap();
        assert_eq!(fibre.kind(), record.kind, "{}", record.id);
        assert!(fibre.friction_on_guide.is_some(), "{}", record.id);
        assert!(fibre.max_temp_c.is_some(), "{}", record.id);
        assert!(
            fibre.bend_radius_mm() <= fibre.unmarked_radius_mm(),
            "{}",
            record.id
        );
        if let Mechanism::Fibrillar { compression, .. } = fibre.mechanism {
            assert!(
                compression.in_bending_mpa() < fibre.strength_mpa,
                "{}",
                record.id
            );
        }
    }
}

#[test]
fn the_index_repeats_the_files() {
    for (entry, record) in super::entries::ENTRIES.iter().zip(library().iter()) {
        let record = record.unwrap();
        assert_eq!(entry.id, record.id);
        assert_eq!(entry.name, record.name);
    }
}

#[test]
fn ids_are_unique_and_kebab_case_and_no_id_is_another_name() {
    let mut seen = BTreeSet::new();
    for entry in &super::entries::ENTRIES {
        let words_are_plain = entry.id.split('-').all(|word| {
            !word.is_empty()
                && word
                    .chars()
                    .all(|letter| letter.is_ascii_lowercase() || letter.is_ascii_digit())
        });
        assert!(words_are_plain, "{}", entry.id);
        let spellings = BTreeSet::from([entry.id, entry.name].map(super::library::bare));
        for spelling in spellings {
            assert!(
                seen.insert(spelling),
                "{} is not told from another",
                entry.id
            );
        }
    }
}

#[test]
fn names_are_found_loosely() {
    for query in ["e-glass", "E-glass", "E glass", "e_glass", " EGLASS "] {
        assert_eq!(record(query).id, "e-glass", "{query}");
    }
    assert_eq!(record("pan carbon standard modulus").id, "carbon-pan-sm");
    assert_eq!(
        record("Stainless-steel wire, soft annealed").id,
        "stainless-annealed"
    );
}

#[test]
fn a_name_that_is_not_there_gets_the_nearest() {
    for (query, nearest) in [
        ("carbon-pan-ms", Some("carbon-pan-sm")),
        ("alumnia", Some("alumina")),
        ("copper anneal", Some("copper-annealed")),
        ("para-aramid", Some("aramid-std")),
        ("cotton wool", None),
        ("", None),
    ] {
        assert_eq!(library().nearest(query), nearest, "{query}");
    }
    let Err(error) = library().find("alumnia") else {
        panic!("a misspelt name was found");
    };
    assert_eq!(
        error.to_string(),
        "no fibre is called `alumnia`; did you mean `alumina`?"
    );
    let unknown = FindError::Unknown {
        query: "cotton wool".to_owned(),
        nearest: None,
    };
    assert_eq!(library().find("cotton wool"), Err(unknown));
}

/// Names are made of generic words alone. A name with a word that is not here is either a new generic word, to be added, or a
/// brand, which has no place in the library.
#[test]
fn names_are_generic() {
    const WORDS: &str = "6 alkali alloy alpha alumina aluminium aluminoborosilicate aluminosilicate annealed ar aramid \
        aromatic austenitic basalt boron brass bronze bundle carbon containing continuous copolymer copper \
        core cvd d degummed dielectric drawn e elementary fibre fine first flax fused generation glass hard \
        high intermediate lcp low magnesium meta modulus molybdenum monofilament mulberry mullite near \
        nickel on oxygen pan para pbo phosphor pitch polyamide polyarylate polycrystalline polyester \
        polypropylene quartz resistant s second sic silica silk soft stainless standard steel stoichiometric \
        strength tenacity third tungsten uhmwpe ultra wire";
    let words: BTreeSet<&str> = WORDS.split_whitespace().collect();
    for entry in &super::entries::ENTRIES {
        let name = entry.name.to_lowercase();
        for word in name.split(|letter: char| !letter.is_alphanumeric()) {
            assert!(word.is_empty() || words.contains(word), "{word}");
        }
        assert!(!entry.text.contains(['\u{ae}', '\u{2122}']), "{}", entry.id);
    }
}

#[test]
fn cautions_go_with_the_material() {
    assert_eq!(fibre("carbon-pitch-hm").hazard, Hazard::ConductiveCarbon);
    assert_eq!(fibre("quartz").hazard, Hazard::Glass);
    assert_eq!(fibre("sic-oxygen").hazard, Hazard::Ceramic);
    assert_eq!(fibre("tungsten").hazard, Hazard::Wire);
    assert_eq!(fibre("pbo").hazard, Hazard::OrganicDust);
    assert_eq!(fibre("polyester-ht").hazard, Hazard::NoHazard);
}
