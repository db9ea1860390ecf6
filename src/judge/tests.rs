//! The judge on bends made by hand.

use super::*;
use crate::bend::{Crown, Easing, Flanks, Meets, Stage, Stretch, SystemName};
use crate::fibre::{Fibre, library};
use crate::yarn::{Count as YarnCount, CountGiven, Shape, Vary, YarnForm};

fn fibre(name: &str) -> Fibre {
    library().find(name).unwrap().fibre().unwrap()
}

/// A yarn of this fibre, 0.2 mm thick and 1 mm wide.
pub(super) fn yarn(name: &str, filaments: u32, um: f64) -> Yarn {
    let fibre = fibre(name);
    let given = CountGiven {
        linear_density_tex: None,
        filaments: Some(filaments),
        filament_diameter_mm: Some(um * 1e-3),
    };
    let form = YarnForm {
        shape: (filaments > 1).then_some(Shape::Lens),
        width_mm: (filaments > 1).then_some(1.0),
        thickness_mm: (filaments > 1).then_some(0.2),
        ..YarnForm::default()
    };
    Yarn {
        name: "y".into(),
        count: YarnCount::resolve(given, fibre.diameter_mm, fibre.density_g_cm3).unwrap(),
        fibre,
        twist_per_mm: 0.0,
        twist_direction: None,
        form,
        binding: 0.0,
        bending_rigidity_n_mm2: None,
        tension_spread: 1.0,
        designated_diameter_mm: None,
    }
}

pub(super) fn bend(radius_mm: f64, pull_n: f64) -> Bend {
    Bend {
        place: "by hand".into(),
        stage: Stage::Weaving,
        system: SystemName::Warp,
        profile: vec![Stretch {
            length_mm: 1.0,
            lies_on_mm: Some(radius_mm),
            easing: Easing::Held,
        }],
        added_per_mm: 0.0,
        pull_n,
        temperature_c: None,
        meets: Meets::All,
        governed_by: 0..1,
        heated_by: None,
    }
}

/// A reserve of 2, and no filament counted.
const HOLDING: Required<'_> = Required {
    reserve: 2.0,
    count: Count::Leave,
};

fn judged(bend: &Bend, yarn: Yarn) -> Finding {
    let laid = yarn.laid_at(2.0, Vary::default()).unwrap();
    judge(bend, &Arc::new(yarn), &laid, HOLDING).0
}

/// E-glass, 9 um, on R = 0.5: the innermost axis lies 4.5 um above: s_b = 73 000 x 0.009/(2 x 0.5045) = 651.1 MPa;
/// 2 N on 1000 filaments: 31.44 MPa; reserve 2200/682.6 = 3.223 (hand calculation).
#[test]
fn brittle_fracture_by_hand() {
    let finding = judged(&bend(0.5, 2.0), yarn("e-glass", 1000, 9.0));
    assert_eq!(finding.filament.position, Position::Inside);
    assert!((finding.radius_mm().unwrap() - 0.5045).abs() < 1e-9);
    assert!((finding.bending_stress_mpa() - 651.14).abs() < 0.01);
    assert!((finding.filament.axial_stress_mpa - 31.438).abs() < 0.001);
    assert!((finding.reserve().unwrap() - 3.2231).abs() < 1e-3);
    assert_eq!(
        (finding.state, finding.limit),
        (State::Holds, Some(Limit::Fracture))
    );
    assert_eq!(
        finding.judged.checks[1], None,
        "no compressive strength is known"
    );
    // At the limit radius the reserve is 1.
    let limit = finding.limit_radius_mm().unwrap();
    let there = judged(&bend(limit - 0.0045, 2.0), yarn("e-glass", 1000, 9.0));
    assert!((there.reserve().unwrap() - 1.0).abs() < 1e-9);
}

/// Pitch carbon: 0.45 GPa uniaxial counts 0.9 GPa in bending; the pull spares the compressed side.
#[test]
fn compression_governs_pitch_carbon_and_pull_spares_it() {
    let loose = judged(&bend(5.0, 0.0), yarn("carbon-pitch-uhm", 1000, 10.0));
    let applied = 780_000.0 * 0.010 / (2.0 * 5.005);
    assert_eq!(loose.limit, Some(Limit::Compression));
    assert!((loose.reserve().unwrap() - 900.0 / applied).abs() < 1e-6);
    let pulled = judged(&bend(5.0, 8.0), yarn("carbon-pitch-uhm", 1000, 10.0));
    let stress = 8.0 / (1000.0 * std::f64::consts::PI / 4.0 * 1e-4);
    let compression = pulled
        .judged
        .checks
        .iter()
        .flatten()
        .find(|c| c.limit == Limit::Compression)
        .unwrap();
    assert!((compression.applied - (applied - stress)).abs() < 1e-6);
    // Pulled harder than bent, nothing is compressed.
    let hard = judged(&bend(500.0, 60.0), yarn("carbon-pitch-uhm", 1000, 10.0));
    assert!(
        hard.judged
            .checks
            .iter()
            .flatten()
            .all(|check| check.limit == Limit::Fracture)
    );
}

/// Aramid: kinks at E d k/2 = 0.9 GPa (0.45 uniaxial, twice in bending), later fails past 3 % of compressive strain.
#[test]
fn fibrillar_fibres_kink_and_fail_past_three_per_cent() {
    let at = |radius: f64| judged(&bend(radius, 0.0), yarn("aramid-std", 1000, 12.0));
    let kink_radius = 72_000.0 * 0.012 / (2.0 * 900.0);
    let before = at(kink_radius + 0.01);
    assert_eq!((before.state, before.code), (State::Close, Code::KinkOnset));
    let after = at(kink_radius - 0.03);
    assert_eq!((after.state, after.code), (State::Kinks, Code::KinkOnset));
    assert!(!after.fails(false, false) && after.fails(true, false) && after.fails(false, true));
    let crushed = at(0.12);
    assert_eq!(
        (crushed.state, crushed.code),
        (State::Kinks, Code::KinkStrain)
    );
    assert!(crushed.fails(false, false));
    // The kinked tension side is spared: it still holds where E d/(2 R) is above the strength.
    let sharp = at(0.135);
    let elastic = sharp.bending_stress_mpa();
    let tension = sharp
        .judged
        .checks
        .iter()
        .flatten()
        .find(|c| c.limit == Limit::Fracture)
        .unwrap();
    assert!(
        elastic > 2_900.0 && tension.applied < 0.9 * elastic,
        "{elastic} {}",
        tension.applied
    );
}

/// Soft wire 0.1 mm on 1 mm: strain 0.05/1.05 = 0.047 62; yields (0.25 GPa), breaks at 30 %.
#[test]
fn ductile_fibres_yield_and_break_by_strain() {
    let finding = judged(&bend(1.0, 0.0), yarn("stainless-annealed", 1, 100.0));
    assert_eq!(
        (finding.state, finding.limit),
        (State::Yields, Some(Limit::Yield))
    );
    assert_eq!(finding.filament.position, Position::Single);
    let strain = finding
        .judged
        .checks
        .iter()
        .flatten()
        .find(|c| c.limit == Limit::Strain)
        .unwrap();
    assert!((strain.applied - 0.05 / 1.05).abs() < 1e-9);
    assert!((strain.reserve() - 0.3 * 1.05 / 0.05).abs() < 1e-6);
    assert!(!finding.fails(false, false) && finding.fails(false, true));
    let broken = judged(&bend(0.05, 0.0), yarn("stainless-annealed", 1, 100.0));
    assert_eq!(
        (broken.state, broken.limit),
        (State::Breaks, Some(Limit::Strain))
    );
}

/// Free filaments: the innermost governs. Fully bonded: the outermost, strained by y k as well.
#[test]
fn binding_moves_the_worst_filament_outwards() {
    let mut bonded = yarn("carbon-pan-sm", 3000, 7.0);
    bonded.binding = 1.0;
    let finding = judged(&bend(20.0, 0.0), bonded);
    let (k, y) = (1.0 / 20.1, 0.1 - 0.0035);
    let of_filament = k / (1.0 + k * y);
    let stress = 230_000.0 * (0.0035 * of_filament + y * k);
    assert_eq!(finding.limit, Some(Limit::Fracture));
    let total = finding.filament.axial_stress_mpa + finding.bending_stress_mpa();
    assert!((total / stress - 1.0).abs() < 1e-9, "{total} {stress}");
    assert_eq!(finding.filament.position, Position::Outside);
    let free = judged(&bend(20.0, 0.0), yarn("carbon-pan-sm", 3000, 7.0));
    assert_eq!(free.filament.position, Position::Inside);
    assert!(free.reserve().unwrap() > 20.0 * finding.reserve().unwrap());
}

/// A knife edge: only the filament's own stiffness under its pull decides, 4 sqrt(strain) sin(theta/4).
#[test]
fn over_a_knife_edge_stiffness_caps_the_curvature() {
    let mut edge = bend(0.0, 3.0);
    edge.profile[0].easing = Easing::LongArms { turn_rad: 1.0 };
    let glass = yarn("e-glass", 1000, 9.0);
    let strain = glass.axial_stress_mpa(3.0) / 73_000.0;
    let finding = judged(&edge, glass);
    let bending_strain = finding.bending_stress_mpa() / 73_000.0;
    assert!((bending_strain - 4.0 * strain.sqrt() * 0.25f64.sin()).abs() < 1e-12);
    // Without pull nothing says how it gets round: it is taken to lie on, and breaks.
    edge.pull_n = 0.0;
    assert_eq!(
        judged(&edge, yarn("e-glass", 1000, 9.0)).state,
        State::Breaks
    );
    // A round guide larger than that is lain on.
    let mut guide = bend(5.0, 3.0);
    guide.profile[0].easing = Easing::LongArms { turn_rad: 1.0 };
    assert!(
        (judged(&guide, yarn("e-glass", 1000, 9.0))
            .radius_mm()
            .unwrap()
            - 5.0045)
            .abs()
            < 1e-9
    );
}

/// The crown law takes the smaller of both curvatures, and a corner's curvature comes on top.
#[test]
fn crowns_ease_and_corners_add() {
    let mut crown = bend(0.05, 0.5);
    crown.profile[0].easing = Easing::Crown(Crown {
        drop_mm: 0.05,
        arm_mm: 0.3,
        flanks: Flanks::Both,
    });
    let wire = || yarn("stainless-annealed", 1, 100.0);
    let eased = judged(&crown, wire());
    assert!(eased.radius_mm().unwrap() > 0.1 && eased.filament.free_per_mm.unwrap() < 10.0);
    let alone = eased.filament.curvature_per_mm;
    crown.added_per_mm = 0.25;
    assert!((judged(&crown, wire()).filament.curvature_per_mm - alone - 0.25).abs() < 1e-12);
}

/// On a corner's inner face the crown's curvature and the corner's lie opposite: what is left is judged by its size. By
/// hand: a wire of 0.1 mm lying on 0.95 mm is bent to 1/mm; 0.25 less leaves 0.75, 1.5 less 0.5 to the other side. Of a yarn
/// 0.2 mm thick on 1.9 mm the outermost filament is then bent most: 1/(1.9 + 0.2 - d/2) against 2/mm.
#[test]
fn opposite_bends_take_off_and_are_judged_by_their_size() {
    let with = |radius: f64, added: f64, of: Yarn| {
        let mut crown = bend(radius, 0.0);
        crown.added_per_mm = added;
        judged(&crown, of).filament
    };
    let wire = |added| with(0.95, added, yarn("stainless-annealed", 1, 100.0)).curvature_per_mm;
    assert!((wire(-0.25) - 0.75).abs() < 1e-12 && (wire(-1.5) - 0.5).abs() < 1e-12);
    let tow = with(1.9, -2.0, yarn("e-glass", 1000, 9.0));
    assert_eq!(tow.position, Position::Outside);
    assert!((tow.curvature_per_mm - (2.0 - 1.0 / (2.1 - 0.0045))).abs() < 1e-12);
}

/// A twisted yarn bent to the other side is the same helix.
#[test]
fn a_twisted_yarn_is_bent_alike_to_both_sides() {
    let mut twisted = yarn("e-glass", 1000, 9.0);
    twisted.twist_per_mm = 0.1;
    let of = |radius: Option<f64>, added: f64| {
        let mut corner = bend(1.0, 0.0);
        corner.profile[0].lies_on_mm = radius;
        corner.added_per_mm = added;
        judged(&corner, twisted.clone()).filament.curvature_per_mm
    };
    // The centreline at 2 mm: lying on 1.9, or straight and bent back by a corner of 2 mm.
    assert!((of(Some(1.9), 0.0) - of(None, -0.5)).abs() < 1e-12);
}

/// A stretch of a path of least energy, R = 2 mm on the centreline of a yarn 0.2 mm thick.
fn on_path(pull_n: f64) -> Bend {
    let mut bend = bend(2.0 - 0.1, pull_n);
    bend.profile[0].easing = Easing::Path {
        turn_rad: 1.0,
        crown: Crown {
            drop_mm: 0.05,
            arm_mm: 0.3,
            flanks: Flanks::Both,
        },
        section_mm: Some(0.1),
    };
    bend
}

/// On its own path a free filament of a yarn is bent k/(1 + k y) inside, at most as over an edge, never less than the yarn;
/// a single filament is the yarn and bent as its path is.
#[test]
fn on_a_path_a_filament_is_bent_as_the_yarn_or_by_itself() {
    let at = |pull: f64| judged(&on_path(pull), yarn("e-glass", 1000, 9.0)).filament;
    // No pull: nothing but the yarn's own bend.
    assert!((at(0.0).curvature_per_mm - 0.5).abs() < 1e-12);
    // Much pull: inside, y = -0.0955: 0.5/(1 - 0.5 x 0.0955).
    assert!((at(20.0).curvature_per_mm - 0.5 / (1.0 - 0.5 * 0.0955)).abs() < 1e-9);
    // Between, the edge law: 2 sqrt(T/B) sin(1/4), lying between both.
    let glass = yarn("e-glass", 1000, 9.0);
    let pull = glass.free_rigidity_n_mm2() * (0.51 / 2.0 / 0.25_f64.sin()).powi(2);
    assert!((at(pull).curvature_per_mm - 0.51).abs() < 1e-9);
    // A brittle filament of 0.2 mm, whatever its pull.
    for pull in [0.0, 10.0] {
        let mut bend = on_path(pull);
        bend.profile[0].lies_on_mm = Some(2.0 - 0.07);
        let single = judged(&bend, yarn("sic-cvd-mono", 1, 140.0));
        assert!((single.filament.curvature_per_mm - 0.5).abs() < 1e-12);
    }
}

/// A wire that yields gathers its bend up to the wire it lies on: 1/(0.1 + 0.05) with the crown's 0.05 mm over 0.3 mm.
#[test]
fn past_yield_a_wire_is_bent_more_than_its_elastic_path() {
    let wire = || yarn("stainless-annealed", 1, 100.0);
    let mut bend = on_path(0.5);
    bend.profile[0].lies_on_mm = Some(1.0 - 0.05);
    let k = judged(&bend, wire()).filament.curvature_per_mm;
    assert!(k > 1.0 && k <= 1.0 / 0.15 + 1e-12, "{k}");
    bend.profile[0].lies_on_mm = Some(1e4);
    let elastic = judged(&bend, wire()).filament.curvature_per_mm;
    assert!(elastic < 1.01e-4, "{elastic}");
}

/// With hardly any twist the filaments of a round yarn lie side by side: the mean over its section, summed here in 200 by 200
/// rings and places, against the four by four of the count.
#[test]
fn twisted_filaments_are_counted_at_their_own_radius() {
    let flaws = Flaws::of(&fibre("e-glass")).unwrap();
    let counted = |twist: f64| {
        let mut yarn = yarn("e-glass", 400, 9.0);
        yarn.twist_per_mm = twist;
        let laid = yarn.laid_at(2.0, Vary::default()).unwrap();
        let count = broken_per_m(&flaws, &bend(0.5, 0.5), &yarn, &laid);
        (count, yarn, laid.outline.thickness_mm())
    };
    let (count, yarn, thickness) = counted(1e-6);
    let surface = 0.5 * (thickness - 0.009);
    let pull = yarn.axial_stress_mpa(0.5);
    let (parts, mut sum) = (200, 0.0);
    let middle = |part: u32| (f64::from(part) + 0.5) / f64::from(parts);
    for ring in 0..parts {
        for place in 0..parts {
            let y = surface * middle(ring).sqrt() * (std::f64::consts::PI * middle(place)).cos();
            let bending = yarn.bending_stress_mpa(1.0 / (0.5 + 0.5 * thickness + y));
            sum += flaws.breaks_per_mm(pull, bending);
        }
    }
    let mean = sum / f64::from(parts * parts);
    let expected = 1e3 * 400.0 * mean;
    assert!((count / expected - 1.0).abs() < 0.01, "{count} {expected}");
    assert!(counted(0.6).0 > count, "the helix itself bends them");
}

#[test]
fn twist_winds_the_surface_filament() {
    let mut twisted = yarn("e-glass", 1000, 9.0);
    twisted.twist_per_mm = 0.5;
    let finding = judged(&bend(1.0, 0.0), twisted);
    let r = 0.1 - 0.0045;
    let exact = crate::path::bent_helix_peak_per_mm(r, 0.5, 1.1);
    assert_eq!(finding.filament.position, Position::Surface);
    assert!((finding.filament.curvature_per_mm - exact).abs() < 1e-12);
}

#[test]
fn heat_is_a_finding_of_its_own() {
    let mut oven = bend(40.0, 1.0);
    oven.temperature_c = Some(301.0);
    oven.heated_by = Some(7..9);
    let glass = yarn("e-glass", 1000, 9.0);
    let laid = glass.laid_at(2.0, Vary::default()).unwrap();
    let (bent, heat) = judge(&oven, &Arc::new(glass.clone()), &laid, HOLDING);
    assert_eq!(bent.state, State::Holds);
    let heat = heat.unwrap();
    assert_eq!(
        (heat.state, heat.code, heat.reserve()),
        (State::Overheats, Code::OverTemperature, None)
    );
    assert_eq!(heat.governed_by, 7..9);
    assert!(heat.fails(false, false));
    oven.temperature_c = Some(300.0);
    assert!(judge(&oven, &Arc::new(glass), &laid, HOLDING).1.is_none());
}

#[test]
fn a_straight_yarn_without_pull_has_no_limit() {
    let mut straight = bend(1.0, 0.0);
    straight.profile.clear();
    let finding = judged(&straight, yarn("e-glass", 1000, 9.0));
    assert_eq!(
        (finding.state, finding.code, finding.reserve()),
        (State::Holds, Code::NoLimit, None)
    );
}

#[test]
fn states_rank_as_the_contract_says() {
    let order = [
        State::Holds,
        State::Close,
        State::Kinks,
        State::Yields,
        State::Overheats,
        State::Breaks,
    ];
    assert!(order.windows(2).all(|pair| pair[0] < pair[1]));
}

/// Bonded and bent hard, the innermost aramid filament is pressed as a whole: all of it yields, none is in tension.
#[test]
fn a_bonded_inner_filament_is_pressed_as_a_whole() {
    let mut bonded = yarn("aramid-std", 1000, 12.0);
    bonded.binding = 1.0;
    let finding = judged(&bend(3.0, 0.0), bonded);
    assert_eq!(
        (finding.state, finding.filament.position),
        (State::Kinks, Position::Inside)
    );
    let kink = finding
        .judged
        .checks
        .iter()
        .flatten()
        .find(|c| c.limit == Limit::Kink)
        .unwrap();
    // y = -0.094, centreline 1/3.1: 72 000 (0.006/3.006 + 0.094/3.1) = 2327 MPa (hand calculation).
    assert!((kink.applied - 2326.9).abs() < 0.5, "{}", kink.applied);
    assert!(
        finding
            .judged
            .checks
            .iter()
            .flatten()
            .all(|check| check.limit != Limit::Fracture)
    );
}

/// A bonded twisted yarn meets the inside of the bend too: pitch carbon fails there in compression. The bonded strain
/// comes of the yarn's own curvature, not of the helix: over a large guide it is small.
#[test]
fn a_bonded_twisted_yarn_meets_both_sides() {
    let mut twisted = yarn("carbon-pitch-uhm", 1000, 10.0);
    (twisted.binding, twisted.twist_per_mm) = (1.0, 0.01);
    let finding = judged(&bend(10.0, 0.0), twisted.clone());
    assert_eq!(finding.limit, Some(Limit::Compression));
    twisted.twist_per_mm = 0.4;
    let large = judged(&bend(500.0, 0.0), twisted);
    let bonded = 780_000.0 * 0.095 / 500.1;
    assert!((large.filament.axial_stress_mpa.abs() - bonded).abs() < 1e-6);
}

/// Easing has no jump where twist or binding begins.
#[test]
fn easing_is_continuous_at_no_twist_and_no_binding() {
    let mut edge = bend(0.0, 3.0);
    edge.profile[0].easing = Easing::LongArms { turn_rad: 1.0 };
    let free = judged(&edge, yarn("e-glass", 1000, 9.0)).reserve().unwrap();
    let mut twisted = yarn("e-glass", 1000, 9.0);
    twisted.twist_per_mm = 1e-7;
    assert!((judged(&edge, twisted).reserve().unwrap() / free - 1.0).abs() < 1e-6);
    let mut bonded = yarn("e-glass", 1000, 9.0);
    bonded.binding = 1e-9;
    assert!((judged(&edge, bonded).reserve().unwrap() / free - 1.0).abs() < 1e-6);
}

/// The most loaded filament counts twice, in its own stress and in the pull that bends it round an edge.
#[test]
fn tension_spread_is_a_larger_pull_on_one_filament() {
    let mut edge = bend(0.0, 3.0);
    edge.profile[0].easing = Easing::LongArms { turn_rad: 1.0 };
    for binding in [0.0, 0.3] {
        let mut spread = yarn("e-glass", 1000, 9.0);
        spread.binding = binding;
        let mut doubled = edge.clone();
        doubled.pull_n = 6.0;
        let twice = judged(&doubled, spread.clone()).reserve().unwrap();
        spread.tension_spread = 2.0;
        assert!((judged(&edge, spread).reserve().unwrap() / twice - 1.0).abs() < 1e-12);
    }
}

/// Past yield a wire does not stay away elastically: over a knife edge under 160 MPa it bends to more than half of the
/// strain at break, and past the onset of kinks an aramid lies on.
#[test]
fn beyond_the_elastic_a_filament_follows_what_it_is_bent_over() {
    let area = std::f64::consts::PI / 4.0 * 0.01;
    let mut edge = bend(0.0, 160.0 * area);
    edge.profile[0].easing = Easing::LongArms {
        turn_rad: 60f64.to_radians(),
    };
    let wire = judged(&edge, yarn("stainless-annealed", 1, 100.0));
    let strain = wire
        .judged
        .checks
        .iter()
        .flatten()
        .find(|c| c.limit == Limit::Strain)
        .unwrap();
    // True stress at break 0.78 GPa at ln 1.3; E_t = 530/(0.2624 - 0.0013) = 2030 MPa; 4 sqrt(160/2030) sin 15 deg = 0.2907.
    assert!(
        (strain.applied - 0.2907 - 160.0 / 195_000.0).abs() < 2e-4,
        "{}",
        strain.applied
    );
    let mut guide = bend(0.05, 3.0);
    guide.profile[0].easing = Easing::LongArms { turn_rad: 1.2 };
    let aramid = judged(&guide, yarn("pbo", 1000, 12.0));
    assert!((aramid.radius_mm().unwrap() - 0.056).abs() < 1e-9);
    assert!(aramid.fails(false, false));
}

/// Binding imposes its strain on the axis: half bonded aramid at R 1.5 mm, past 3 % though the section alone is not.
#[test]
fn binding_counts_in_the_kink_strain() {
    let mut bonded = yarn("aramid-std", 1000, 12.0);
    bonded.binding = 0.5;
    let finding = judged(&bend(1.5, 0.0), bonded);
    // Inside: 0.006/1.506 + 0.5 x 0.094/1.6 = 3.336 % (hand calculation).
    let strain = finding
        .judged
        .checks
        .iter()
        .flatten()
        .find(|c| c.limit == Limit::KinkStrain)
        .unwrap();
    assert!(
        (strain.applied - 0.033_36).abs() < 1e-4,
        "{}",
        strain.applied
    );
    assert!(finding.fails(false, false));
}
