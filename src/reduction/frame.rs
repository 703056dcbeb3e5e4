//! What the equinox tags of a report mean: a system and an equinox.
//!
//! A year below 1984 without a letter is Besselian, from 1984 on Julian (FITS standard 4.0, sect. 8.3, EQUINOX).

use crate::report::{
    Equinox, EquinoxTag, EquinoxYear, Frame, Nearness, PlaceWord, PositionKind, System, SystemWord,
    YearLetter,
};
use crate::span::Spanned;

/// A frame, and whether right ascension is counted from the celestial intermediate origin in it.
#[derive(Clone, Copy, PartialEq, Debug, Default)]
pub struct Understood {
    /// System and equinox. `None` where nothing (or nothing that can be understood) says so.
    pub frame: Option<Frame>,
    /// Right ascension from the celestial intermediate origin, where that is said of an apparent place.
    pub from_origin: bool,
}

/// The frame of a position by its tags, the one that governs first. A misspelt tag counts as none.
pub fn understand(kind: PositionKind, tags: &[(Spanned<EquinoxTag>, Nearness)]) -> Understood {
    let of_date = |system| Understood {
        frame: Some(Frame {
            system,
            equinox: Equinox::OfDate,
        }),
        from_origin: false,
    };
    match kind {
        PositionKind::HourAngle => of_date(System::HourAngle),
        PositionKind::Horizontal => of_date(System::Horizontal),
        PositionKind::Equatorial => {
            let mut spelt = tags.iter().map(|t| t.0.value).filter(|t| !t.misspelt);
            spelt.next().map_or(Understood::default(), |first| {
                let whole = completed(first, spelt);
                Understood {
                    frame: frame_of(&whole),
                    from_origin: whole.place == Some(PlaceWord::ApparentFromOrigin),
                }
            })
        }
    }
}

/// A tag with what it leaves open taken from farther tags that say only that (`FK5` here, `equinox 2000.0` in the heading).
fn completed(mut tag: EquinoxTag, others: impl Iterator<Item = EquinoxTag>) -> EquinoxTag {
    for other in others {
        if tag.year.is_none() && other.system.is_none() {
            tag.year = other.year;
            tag.place = tag.place.or(other.place);
        } else if other.year.is_none() || other.year == tag.year {
            tag.system = tag.system.or(other.system);
            if tag.year.is_none() || tag.year == Some(EquinoxYear::OfDate) {
                tag.place = tag.place.or(other.place);
            }
        }
    }
    tag
}

/// The frame of one tag; `None` where it leaves the equinox open or contradicts itself.
pub fn frame_of(tag: &EquinoxTag) -> Option<Frame> {
    let apparent = matches!(
        tag.place,
        Some(PlaceWord::Apparent | PlaceWord::ApparentFromOrigin)
    );
    match tag.year {
        None if apparent => Some(Frame {
            system: System::Apparent,
            equinox: Equinox::OfDate,
        }),
        None => tag.system.map(standard),
        Some(EquinoxYear::OfDate) => {
            let system = match tag.system {
                Some(SystemWord::Icrs) => return None,
                _ if apparent => System::Apparent,
                Some(SystemWord::Fk4) => System::Fk4,
                _ => System::Mean,
            };
            Some(Frame {
                system,
                equinox: Equinox::OfDate,
            })
        }
        Some(EquinoxYear::Year { .. }) if apparent => None,
        Some(EquinoxYear::Year { letter, year }) => of_year(tag.system, letter, year.value()),
    }
}

/// A system named without a year: its own standard equinox.
fn standard(system: SystemWord) -> Frame {
    let (system, equinox) = match system {
        SystemWord::Icrs => (System::Icrs, Equinox::Julian(2000.0)),
        SystemWord::Fk5 => (System::Fk5, Equinox::Julian(2000.0)),
        SystemWord::Fk4 => (System::Fk4, Equinox::Besselian(1950.0)),
    };
    Frame { system, equinox }
}

/// The frame of a year, with the system and the letter that may stand with it. Where system and letter contradict each
/// other the letter counts: the equinox is what moves the place (`system-equinox-mismatch` asks).
pub fn of_year(system: Option<SystemWord>, letter: Option<YearLetter>, year: f64) -> Option<Frame> {
    let besselian = match (letter, system) {
        (Some(letter), _) => letter == YearLetter::Besselian,
        (None, Some(SystemWord::Fk4)) => true,
        (None, _) => year < 1984.0,
    };
    let frame = |system, equinox| Some(Frame { system, equinox });
    match (system, besselian) {
        (Some(SystemWord::Icrs), _) if besselian || year != 2000.0 => None,
        (_, true) => frame(System::Fk4, Equinox::Besselian(year)),
        (Some(SystemWord::Fk5), false) => frame(System::Fk5, Equinox::Julian(year)),
        (_, false) if year == 2000.0 => frame(System::Icrs, Equinox::Julian(year)),
        (_, false) => frame(System::Mean, Equinox::Julian(year)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::Number;
    use crate::span::Span;

    fn tag(system: Option<SystemWord>, letter: Option<YearLetter>, tenths: u64) -> EquinoxTag {
        EquinoxTag {
            system,
            year: (tenths > 0).then_some(EquinoxYear::Year {
                letter,
                year: Number {
                    mantissa: tenths,
                    places: 1,
                    whole_digits: 4,
                },
            }),
            place: None,
            misspelt: false,
        }
    }

    /// The table of DESIGN section 4; the year rule is the FITS standard's (version 4.0, 2016, sect. 8.3).
    #[test]
    fn years_letters_and_systems() {
        use SystemWord::*;
        use YearLetter::*;
        for (system, letter, tenths, expected) in [
            (None, None, 20000, "ICRS J2000.0"),
            (None, Some(Julian), 20000, "ICRS J2000.0"),
            (Some(Fk5), Some(Julian), 20000, "FK5 J2000.0"),
            (None, None, 19839, "FK4 B1983.9"),
            (None, None, 19840, "mean J1984.0"),
            (None, Some(Besselian), 18750, "FK4 B1875.0"),
            (None, Some(Julian), 19750, "mean J1975.0"),
            (Some(Fk5), Some(Julian), 19750, "FK5 J1975.0"),
            (Some(Fk4), None, 19500, "FK4 B1950.0"),
            (Some(Icrs), None, 0, "ICRS J2000.0"),
            (Some(Icrs), None, 19500, "none"),
        ] {
            let said = frame_of(&tag(system, letter, tenths));
            let said = said.map_or("none".to_string(), |f| {
                format!("{} {}", f.system.name(), f.equinox)
            });
            assert_eq!(said, expected);
        }
    }

    #[test]
    fn misspelt_counts_as_none_and_halves_are_joined() {
        let at = |t| (Spanned::new(t, Span::default()), Nearness::Own);
        let mut wrong = tag(None, Some(YearLetter::Julian), 20000);
        wrong.misspelt = true;
        assert_eq!(
            understand(PositionKind::Equatorial, &[at(wrong)]).frame,
            None
        );
        let halves = [
            at(tag(Some(SystemWord::Fk5), None, 0)),
            at(tag(None, None, 20000)),
        ];
        let joined = understand(PositionKind::Equatorial, &halves).frame.unwrap();
        assert_eq!(joined.system, System::Fk5);
    }
}
