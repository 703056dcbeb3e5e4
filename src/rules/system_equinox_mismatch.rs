//! A reference system with the equinox of another.
//!
//! ## Why it matters
//! FK4 is a system of Besselian equinoxes, FK5 and the ICRS are of J2000.0. A tag that mixes them leaves open which
//! half was meant, and the E-terms and the rotation between the systems with it.
//!
//! ## What is asked
//! Whether FK4 stands with a Besselian equinox, FK5 and ICRS with a Julian one.
//!
//! ## Formula
//! The year rule: without a letter, Besselian below 1984, Julian from 1984.
//!
//! ## Source
//! FITS standard 4.0 (2018), section 8.3, RADESYS and EQUINOX.
//!
//! ## Example
//! ```report
//! Object: Suspect 79
//! RA 18 29 42.90 Dec -07 20 02.7 (FK4 J2000.0)
//! #                              ^^^^^^^^^^^^^ FK4 ends with B1950.0
//! Date: 2005-09-21 00:04 UT
//! ```
//!
//! ## What to do
//! Ask which half is right. To let it pass: `[stet system-equinox-mismatch: reason]`.

use super::common::words;
use super::{Case, Findings, Rule};
use crate::report::{EquinoxYear, SystemWord, Weight};

pub(super) const RULE: Rule = Rule {
    name: "system-equinox-mismatch",
    weight: Weight::Query,
    of_place_or_time: false,
    gives_way_to: &[],
    source: include_str!("system_equinox_mismatch.rs"),
    check,
};

fn check(case: &Case, out: &mut Findings) {
    for (tag, _) in &case.report.equinoxes {
        let (Some(system), Some(EquinoxYear::Year { letter, year })) =
            (tag.value.system, tag.value.year)
        else {
            continue;
        };
        let besselian = words::is_besselian(letter, year.value());
        if tag.value.misspelt || besselian == (system == SystemWord::Fk4) {
            continue;
        }
        let advice = match system {
            SystemWord::Fk4 => {
                "FK4 goes with B1950.0 and earlier: either the system is FK5 or ICRS, or the equinox is B1950.0."
            }
            SystemWord::Fk5 => {
                "FK5 goes with J2000.0: either the system is FK4, or the equinox is J2000.0."
            }
            SystemWord::Icrs => {
                "The ICRS has the axes of J2000.0: either the system is FK4, or the equinox is J2000.0."
            }
        };
        out.add(
            tag.span,
            format!(
                "{} joins a system and an equinox that do not belong together.",
                case.quote(tag.span)
            ),
            format!("{advice} Ask which."),
        );
        return;
    }
}
