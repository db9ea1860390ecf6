//! The method behind every code, for `lissom explain` and the documents.

use super::code::Code;

/// What a code means.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Explanation {
    /// One line.
    pub title: &'static str,
    /// The method: idea, formula, source, limits; paragraphs separated by an empty line.
    pub text: &'static str,
}

/// The method behind a code.
pub fn explain(code: Code) -> Explanation {
    match code {
        Code::TensionFracture => Explanation {
            title: "fracture on the tension side of a bent filament",
            text: "A filament of diameter d and modulus E bent to the curvature k carries the stress E d k/2 on its outside. With the pull's own stress s_a it breaks where\n\
                \n    s_a + E d k/2 = s_t        s_t: mean tensile strength\n\n\
                Reserve = s_t / (s_a + E d k/2). Without pull this is the smallest radius E d/(2 s_t).\n\n\
                Source: beam theory of Euler and Bernoulli (filaments are slender); the radius is common practice, no source. For kinked fibrillar fibres the tension side is that of the kinked section (see kink-onset).\n\n\
                Limits: a handbook strength is a mean at a gauge length of some centimetres. Some filaments are weaker, and a bend of a tenth of a millimetre is stronger; flaws are not counted here (see broken-filaments).",
        },
        Code::CompressionFracture => Explanation {
            title: "fracture on the compressed side of a bent filament",
            text: "Where the compressive strength s_c is known, the inside of the bend fails where\n\
                \n    E d k/2 - s_a = s_c        s_a: stress of the pull\n\n\
                Pitch carbon is limited so. Strength read from bending is about twice the uniaxial figure (sources in `lissom fibres NAME`), so a uniaxial figure counts twice.\n\n\
                Limits: the factor of two is a round figure from a few fibres; where nothing is compressed there is no such limit.",
        },
        Code::KinkOnset => Explanation {
            title: "kink bands on the compressed side of a fibrillar filament",
            text: "Aramid, PBO, UHMWPE and LCP yield in compression long before they break, in kink bands, where\n\
                \n    E d k/2 - s_a = s_c\n\n\
                The fibre is damaged, not broken, and flat aramid cloth is woven daily: `kinks` fails a spec only where it refuses kinks, or past 3 % of compressive strain.\n\n\
                Past the onset the section is elastic in tension and yields in compression at s_c; the neutral axis moves until the pull is balanced, and it breaks where the tension side reaches the strength: later than E d/(2 s_t) says.\n\n\
                Source: DeTeresa et al. 1984 (abstract read); plastic bending of a round section.",
        },
        Code::KinkStrain => Explanation {
            title: "compressive strain of a kinked filament over 3 %",
            text: "A high-modulus para-aramid lost about 10 % of its strength after 3 % of compressive strain (DeTeresa et al. 1984, J. Mater. Sci. 19, 57-72, abstract read). Beyond, nothing is known, so more than 3 % fails.\n\n\
                The strain is that of the kinked section (see kink-onset): half the diameter times the curvature, and what the shift of the neutral axis adds.",
        },
        Code::YieldOnset => Explanation {
            title: "yield of a ductile filament",
            text: "A wire or melt-spun filament keeps a bend where\n\
                \n    E (d k/2) + s_a = s_y        s_y: yield stress\n\n\
                Woven wire yields as a matter of course; `yields` fails only with --strict. Springback is left out, and an elastic path overstates the strain of a wire that has yielded.",
        },
        Code::StrainAtBreak => Explanation {
            title: "strain at break of a ductile filament",
            text: "A ductile filament breaks where its outer strain reaches the elongation at break:\n\
                \n    d k/2 + s_a/E = strain at break\n\n\
                Limits: elongation at break is read over a gauge length and holds little of the necking; an annealed wire bent round its own diameter (strain 0.5) often survives. The limit is on the safe side.",
        },
        Code::OverTemperature => Explanation {
            title: "hotter than the fibre stands in air",
            text: "Each record has a limit for handling in air: polymers soften or age, sized glass loses strength above 250 to 300 degC, carbon's size goes at 300. A station hotter than that is a finding of its own; the strength in the other findings is not lowered for it.",
        },
        Code::BrokenFilaments => Explanation {
            title: "more broken filaments than the spec allows",
            text: "Strength is a distribution (Weibull 1951): a filament breaks where a flaw meets enough stress. Bent under pull it carries s_a + s_b cos f round its surface, and the breaks to expect per length are\n\
                \n    h = (1/L0) mean over f of (max(0, s_a + s_b cos f)/s_0)^m        s_0 = s/Gamma(1 + 1/m)\n\n\
                with the mean strength s at the gauge length L0 and the Weibull modulus m; flaws in the volume take the mean over the disc. Added up over the bend and all filaments through the yarn's thickness. A crown holds its own length of yarn; over a guide all yarn travels, so its breaks per metre are 1000 h at the sharpest place.\n\n\
                Filament reserve = (allowed/expected)^(1/m): it stands on the stress scale, beside the handbook reserve, and the smaller decides. It is judged only where `require.broken_filaments` allows a number.\n\n\
                Limits: strengths of strands and yarns hide the scatter of filaments, so a count from them is indicative; flaws made on the way (abrasion, lost size), fatigue and moisture are left out; at twice the strength few flaws are known.",
        },
        Code::NoLimit => Explanation {
            title: "nothing to judge",
            text: "The yarn is neither bent nor pulled here, or only so that no limit applies. The reserve is absent and the state is `holds`.",
        },
        Code::Jammed => Explanation {
            title: "yarns too close to interlace",
            text: "A yarn must find its way between its neighbours: the tangent common to two sections it passes between must exist. At each crossing the centres stand (t1 + t2)/2 apart, so both wave heights add up to t1 + t2; each system has a highest wave at its sett, and where both together are less, there is no cloth. For round yarns in plain weave:\n\
                \n    sqrt(1 - (p1/D)^2) + sqrt(1 - (p2/D)^2) = 1        D = d1 + d2 (Peirce 1937)\n\n\
                The largest setts that fit are found by building the cloth again, to 0.1 %. Real yarns flatten in tight cloth: a width and thickness measured in the cloth may pass where the default does not.",
        },
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_code_has_its_own_words() {
        for (index, code) in Code::ALL.iter().enumerate() {
            let told = explain(*code);
            assert!(
                !told.title.is_empty() && told.text.len() > 80,
                "{}",
                code.word()
            );
            for other in &Code::ALL[index + 1..] {
                assert_ne!(code.word(), other.word());
                assert_ne!(told.title, explain(*other).title);
            }
        }
    }
}
