//! The fibre library for people and programs.

use super::table::{folded, table};
use crate::fibre::{Fibre, Figure, How, Mechanism, Record, Statement, source_id, sources};
use crate::judge::break_bend;
use crate::quantity::{plain, rounded, significant};
use serde_json::{Map, Value, json};
use std::fmt::Write as _;

/// The listing, in the order given.
pub fn fibres_text(fibres: &[(&Record, Fibre)]) -> String {
    let head = [
        "fibre", "kind", "d um", "E GPa", "s GPa", "g/cm3", "E/rho", "s/rho", "whole mm",
        "clean mm",
    ];
    let rows = fibres.iter().map(|(record, fibre)| {
        vec![
            record.id.clone(),
            fibre.kind().word().to_owned(),
            plain(1e3 * fibre.diameter_mm, 3),
            plain(fibre.modulus_mpa / 1e3, 3),
            plain(fibre.strength_mpa / 1e3, 3),
            plain(fibre.density_g_cm3, 3),
            significant(fibre.specific_modulus_mj_kg(), 3),
            significant(fibre.specific_strength_mj_kg(), 3),
            significant(fibre.bend_radius_mm(), 3),
            significant(fibre.unmarked_radius_mm(), 3),
        ]
    });
    format!(
        "{}\n\n\
         whole: smallest radius at which one filament of the usual diameter stays whole without pull; the list is\n\
         sorted by it. clean: smallest radius without kink bands or yield. s: tensile strength. E/rho and s/rho in\n\
         MJ/kg (GPa per g/cm3, N/tex).\n\
         `lissom fibres NAME` shows everything known of a fibre, with sources.\n",
        table(head, rows, &[2, 3, 4, 5, 6, 7, 8, 9])
    )
}

/// The listing as JSON.
pub fn fibres_json(fibres: &[(&Record, Fibre)]) -> Value {
    let list = fibres.iter().map(|(record, fibre)| {
        let mut object = Map::new();
        let mut put = |key: &str, value: Value| {
            object.insert(key.to_owned(), value);
        };
        put("name", json!(record.name));
        put("id", json!(record.id));
        put("family", json!(record.family));
        put("kind", json!(record.kind.word()));
        put(
            "filament_diameter_um",
            json!(rounded(1e3 * fibre.diameter_mm)),
        );
        put("modulus_gpa", json!(rounded(fibre.modulus_mpa / 1e3)));
        put("strength_gpa", json!(rounded(fibre.strength_mpa / 1e3)));
        put("strength_basis", json!(record.strength_basis.word()));
        put("density_g_cm3", json!(fibre.density_g_cm3));
        put(
            "min_radius_mm",
            json!(rounded(fibre.min_elastic_radius_mm())),
        );
        put("whole_radius_mm", json!(rounded(fibre.bend_radius_mm())));
        put(
            "unmarked_radius_mm",
            json!(rounded(fibre.unmarked_radius_mm())),
        );
        put(
            "specific_modulus",
            json!(rounded(fibre.specific_modulus_mj_kg())),
        );
        put(
            "specific_strength",
            json!(rounded(fibre.specific_strength_mj_kg())),
        );
        if let Some(weibull) = fibre.weibull {
            put("weibull_modulus", json!(weibull.modulus));
        }
        if let Some(compression) = fibre.compression() {
            put(
                "compressive_strength_gpa",
                json!(rounded(compression.strength_mpa / 1e3)),
            );
            put("compression_basis", json!(compression.basis.word()));
        }
        if let Some(limit) = fibre.max_temp_c {
            put("max_temperature_c", json!(limit));
        }
        let figures: Map<String, Value> = record
            .figures()
            .map(|(key, figure)| {
                (
                    key.to_owned(),
                    json!({ "how": word(figure.how), "source": figure.source }),
                )
            })
            .collect();
        put("sources", Value::Object(figures));
        Value::Object(object)
    });
    Value::Array(list.collect())
}

fn word(how: How) -> &'static str {
    match how {
        How::Read => "read",
        How::Derived => "derived",
        How::Memory => "from memory",
    }
}

fn origin(how: How, source: &[String], check_in: &[String]) -> String {
    let from = match how {
        How::Read => format!("read in {}", source.join("; ")),
        How::Derived => format!("derived from {}", source.join("; ")),
        How::Memory => "from memory".to_owned(),
    };
    if check_in.is_empty() {
        from
    } else {
        format!("{from}; to be checked in {}", check_in.join("; "))
    }
}

/// Everything known of one fibre.
pub fn fibre_text(record: &Record, fibre: &Fibre) -> String {
    let mut out = String::new();
    // Writing to a String cannot fail.
    let _ = write_fibre(&mut out, record, fibre);
    out
}

fn indented(out: &mut String, text: &str) -> std::fmt::Result {
    writeln!(out, "{}", folded(text, "      ", "      "))
}

fn write_figure(out: &mut String, key: &str, figure: &Figure) -> std::fmt::Result {
    let range = match (figure.min, figure.max) {
        (Some(low), Some(high)) => format!(", {} to {}", plain(low, 4), plain(high, 4)),
        (Some(low), None) => format!(", from {}", plain(low, 4)),
        (None, Some(high)) => format!(", up to {}", plain(high, 4)),
        (None, None) => String::new(),
    };
    let gauge = figure
        .gauge_mm
        .map_or_else(String::new, |mm| format!(", gauge {} mm", plain(mm, 4)));
    writeln!(out, "  {key:<34} {}{range}{gauge}", plain(figure.value, 5))?;
    indented(out, &origin(figure.how, &figure.source, &figure.check_in))?;
    for note in [&figure.basis, &figure.note].into_iter().flatten() {
        indented(out, note)?;
    }
    Ok(())
}

fn write_statement(out: &mut String, key: &str, statement: &Statement) -> std::fmt::Result {
    writeln!(out, "  {key}")?;
    indented(out, &statement.text)?;
    indented(
        out,
        &format!(
            "({})",
            origin(statement.how, &statement.source, &statement.check_in)
        ),
    )
}

fn write_fibre(out: &mut String, record: &Record, fibre: &Fibre) -> std::fmt::Result {
    writeln!(
        out,
        "{} ({}), {}, {}",
        record.name, record.id, record.family, record.kind
    )?;
    writeln!(
        out,
        "\nRadii of one filament of {} um, without pull",
        plain(1e3 * fibre.diameter_mm, 4)
    )?;
    let radius = |out: &mut String, name: &str, mm: f64| {
        writeln!(out, "  {name:<34} {} mm", significant(mm, 3))
    };
    radius(out, "E d/(2 strength)", fibre.min_elastic_radius_mm())?;
    if let Some(mm) = fibre.kink_radius_mm() {
        radius(out, "kink bands form at", mm)?;
    }
    if let Some(mm) = fibre.yield_radius_mm() {
        radius(out, "yields at", mm)?;
    }
    if let Mechanism::Fibrillar { compression, .. } = fibre.mechanism {
        let onset = compression.in_bending_mpa();
        let bend = break_bend(fibre.strength_mpa / onset, 0.0);
        radius(
            out,
            "kinked, breaks at",
            fibre.radius_at_stress_mm(bend * onset),
        )?;
    } else {
        radius(out, "whole to", fibre.bend_radius_mm())?;
    }
    writeln!(out, "\nFigures: typical, range")?;
    for (key, figure) in record.figures() {
        write_figure(out, key, figure)?;
    }
    writeln!(
        out,
        "  strength_basis: {} ({})",
        record.strength_basis, record.strength_basis_why
    )?;
    if let (Some(basis), Some(bent)) = (
        record.compression_basis,
        fibre.compressive_strength_in_bending_mpa(),
    ) {
        writeln!(
            out,
            "  compression_basis: {basis}; {} GPa in bending",
            plain(bent / 1e3, 4)
        )?;
    }
    writeln!(out, "\nIn words")?;
    indented(out, &format!("flaws: {}", record.flaws.text))?;
    for (key, statement) in record.statements() {
        write_statement(out, key, statement)?;
    }
    write_sources(out, record)
}

fn write_sources(out: &mut String, record: &Record) -> std::fmt::Result {
    let figures = record
        .figures()
        .flat_map(|(_, figure)| figure.source.iter().chain(&figure.check_in));
    let statements = record
        .statements()
        .flat_map(|(_, said)| said.source.iter().chain(&said.check_in));
    let named: Vec<&str> = figures
        .chain(statements)
        .map(|reference| source_id(reference))
        .collect();
    writeln!(out, "\nSources")?;
    let Ok(all) = sources() else {
        return Ok(());
    };
    for source in all
        .iter()
        .filter(|source| named.contains(&source.id.as_str()))
    {
        let line = format!("[{}] {} ({:?})", source.id, source.citation, source.seen)
            .replace("(Memory)", "(from memory)");
        writeln!(out, "{}", folded(&line, "  ", "      "))?;
    }
    Ok(())
}
