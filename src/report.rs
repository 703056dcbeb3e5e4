//! The model everyone else speaks: a report as written ([`Report`]), as meant ([`Meant`]), and what was found ([`Finding`]).
//!
//! Numbers are kept digit for digit; nothing here computes astronomy and nothing here parses text.

use crate::span::{Span, Spanned};

// ---------------------------------------------------------------------------------------------- numbers and angles

/// An unsigned decimal number as written: `007.50` is mantissa 750, two places, three whole digits.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub struct Number {
    /// All its digits as one integer.
    pub mantissa: u64,
    /// Digits written after the point (or decimal comma).
    pub places: u8,
    /// Digits written before the point.
    pub whole_digits: u8,
}

impl Number {
    /// A whole number written with as many digits as it needs.
    pub fn whole(value: u64) -> Number {
        Number {
            mantissa: value,
            places: 0,
            whole_digits: value.checked_ilog10().unwrap_or(0) as u8 + 1,
        }
    }

    /// The value, correctly rounded.
    pub fn value(self) -> f64 {
        // exact for mantissas to 2^53 and up to 22 places: one correctly rounded division
        self.mantissa as f64 / 10f64.powi(i32::from(self.places))
    }

    /// The value of one unit of the last digit written.
    pub fn step(self) -> f64 {
        1.0 / 10f64.powi(i32::from(self.places))
    }
}

/// The mark written after a part of an angle.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub enum Mark {
    /// Nothing, at the end of a number.
    #[default]
    None,
    /// Blanks between two parts.
    Blank,
    /// `:`
    Colon,
    /// `h`, `hr`, `ʰ`
    Hour,
    /// `°`, `d`, `deg`, `º`, letter `o`
    Degree,
    /// the letter `m`, `min`, `ᵐ`
    Minute,
    /// the letter `s`, `sec`, `ˢ`
    Second,
    /// `'`, `′`, `’`
    Prime,
    /// `"`, `″`, `”`, `''`
    DoublePrime,
    /// a mark broken in transit (U+FFFD, `?`), or one of no known kind
    Broken,
    /// the hyphen or another dash between parts
    Dash,
    /// no separator at all: `053431.2`
    Joined,
}

/// A sign as written.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Sign {
    /// `+`
    Plus,
    /// `-` or any dash that stands for it
    Minus,
    /// `+/-` or `±` where a sign belongs: unreadable as a sign
    Either,
}

/// A point of the compass that stands for a sign or a direction.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Compass {
    /// North
    North,
    /// East
    East,
    /// South
    South,
    /// West
    West,
}

impl Compass {
    /// -1 for south and west, +1 for north and east.
    pub fn sign(self) -> f64 {
        if matches!(self, Compass::South | Compass::West) {
            -1.0
        } else {
            1.0
        }
    }
}

/// One number of an angle with the mark after it.
#[derive(Clone, Copy, PartialEq, Debug, Default)]
pub struct Part {
    /// The digits.
    pub number: Number,
    /// What follows them.
    pub mark: Mark,
    /// The digits' own place (without the mark).
    pub span: Span,
}

/// An angle as written: a sign, one to three parts, perhaps a compass letter.
#[derive(Clone, Copy, PartialEq, Debug, Default)]
pub struct Angle {
    /// The sign written before the digits.
    pub sign: Option<Spanned<Sign>>,
    /// A compass letter or word before or after it (`41° 07′ S`).
    pub compass: Option<Spanned<Compass>>,
    parts: [Part; 3],
    count: u8,
    /// From the sign or first digit to the last mark or digit (compass letter after it included).
    pub span: Span,
}

/// What an angle counts in.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum AngleUnit {
    /// Hours: 24 to the circle.
    Hours,
    /// Degrees: 360 to the circle.
    Degrees,
}

impl Angle {
    /// An angle of one to three parts. `None` for none or more than three.
    pub fn new(
        sign: Option<Spanned<Sign>>,
        parts: &[Part],
        compass: Option<Spanned<Compass>>,
        span: Span,
    ) -> Option<Angle> {
        if parts.is_empty() || parts.len() > 3 {
            return None;
        }
        let mut own = [Part::default(); 3];
        own[..parts.len()].copy_from_slice(parts);
        Some(Angle {
            sign,
            compass,
            parts: own,
            count: parts.len() as u8,
            span,
        })
    }

    /// The one to three parts as written.
    pub fn parts(&self) -> &[Part] {
        &self.parts[..usize::from(self.count)]
    }

    /// The parts, to be changed digit by digit (the slips do).
    pub fn parts_mut(&mut self) -> &mut [Part] {
        &mut self.parts[..usize::from(self.count)]
    }

    /// True where the sign or the compass letter says minus (so -00° 30′ is negative).
    pub fn is_negative(&self) -> bool {
        match (self.sign, self.compass) {
            (Some(s), _) => s.value == Sign::Minus,
            (None, Some(c)) => matches!(c.value, Compass::South | Compass::West),
            _ => false,
        }
    }

    /// The value in its own leading unit (hours or degrees), signed; parts beyond their range are taken at face value.
    pub fn value(&self) -> f64 {
        // integer arithmetic where it fits, so that 59.995 s stays what it is
        let magnitude = match self.parts() {
            [a] => a.number.value(),
            [a, b] => (a.number.value() * 60.0 + b.number.value()) / 60.0,
            [a, b, c] => {
                (a.number.value() * 3600.0 + b.number.value() * 60.0 + c.number.value()) / 3600.0
            }
            _ => 0.0,
        };
        if self.is_negative() {
            -magnitude
        } else {
            magnitude
        }
    }

    /// The value of its last written digit in its own leading unit.
    pub fn step(&self) -> f64 {
        let parts = self.parts();
        parts.last().map_or(0.0, |p| p.number.step())
            / [1.0, 60.0, 3600.0][parts.len().clamp(1, 3) - 1]
    }

    /// The same angle with every place in it moved: `to(offset)` gives the new one.
    pub fn moved(mut self, to: impl Fn(usize) -> usize) -> Angle {
        let span = |s: Span| Span::new(to(s.start), to(s.end));
        self.sign = self.sign.map(|s| Spanned::new(s.value, span(s.span)));
        self.compass = self.compass.map(|c| Spanned::new(c.value, span(c.span)));
        for part in &mut self.parts {
            part.span = span(part.span);
        }
        self.span = span(self.span);
        self
    }

    /// The unit its own marks speak of, if they do.
    pub fn marked_unit(&self) -> Option<AngleUnit> {
        match self.parts().first()?.mark {
            Mark::Hour => Some(AngleUnit::Hours),
            Mark::Degree => Some(AngleUnit::Degrees),
            _ => None,
        }
    }
}

// ---------------------------------------------------------------------------------------------- what reports are made of

/// What the two angles of a position are.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum PositionKind {
    /// Right ascension and declination.
    Equatorial,
    /// Hour angle and declination.
    HourAngle,
    /// Azimuth and altitude (`first` is the azimuth whatever the order written).
    Horizontal,
}

/// A position as written.
#[derive(Clone, PartialEq, Debug)]
pub struct Position {
    /// What its two angles are.
    pub kind: PositionKind,
    /// Right ascension, hour angle or azimuth. `None` where only the other was written.
    pub first: Option<Angle>,
    /// Declination (or polar distance) or altitude (or zenith distance). `None` where only the other was written.
    pub second: Option<Angle>,
    /// The unit of `first` that a label, a column head or the notation gives; `None` where nothing settles it
    /// (a lone decimal number below 24 without a mark).
    pub first_unit: Option<AngleUnit>,
    /// `second` is a north polar distance (90° - declination).
    pub polar_distance: bool,
    /// `second` is a zenith distance (90° - altitude).
    pub zenith_distance: bool,
    /// Azimuth counted from the south through west, as said in the text.
    pub azimuth_from_south: bool,
    /// "airless" is written: no refraction to take off.
    pub airless: bool,
    /// "W" or "E" stands with an hour angle: the sign it gives, kept in the angle's compass too.
    pub labelled: bool,
    /// From the first character of its first number (or sign) to the last mark of its last.
    pub span: Span,
}

/// A reference system named in the text.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum SystemWord {
    /// ICRS
    Icrs,
    /// FK5
    Fk5,
    /// FK4
    Fk4,
}

/// The letter before an equinox's year.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum YearLetter {
    /// J
    Julian,
    /// B
    Besselian,
}

/// The year of an equinox, or "of date".
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum EquinoxYear {
    /// `J2000.0`, `1950`
    Year {
        /// J or B, where written.
        letter: Option<YearLetter>,
        /// The year as written.
        year: Number,
    },
    /// "of date", "mean equinox of date", "apparent place"
    OfDate,
}

/// Mean or apparent, where said.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum PlaceWord {
    /// "mean"
    Mean,
    /// "apparent", "true equinox"
    Apparent,
    /// "apparent" counted from the celestial intermediate origin, where that is said
    ApparentFromOrigin,
}

/// An equinox tag as written: any of system, year and mean or apparent.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct EquinoxTag {
    /// ICRS, FK5, FK4.
    pub system: Option<SystemWord>,
    /// The year, or of date.
    pub year: Option<EquinoxYear>,
    /// Mean or apparent.
    pub place: Option<PlaceWord>,
    /// It looks like a tag but is misspelt (`J200`, `B195O`): `year` is then what it likely is, and never taken for it.
    pub misspelt: bool,
}

/// Where a statement of a report comes from. Nearer ones count before farther ones.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug)]
pub enum Nearness {
    /// The position itself (its label, its bracket) or its own line.
    Own,
    /// The report's block.
    Block,
    /// The column head of a table.
    Head,
    /// A standing statement of the sheet.
    Standing,
}

/// The English names of the months.
pub const MONTHS: [&str; 12] = [
    "January",
    "February",
    "March",
    "April",
    "May",
    "June",
    "July",
    "August",
    "September",
    "October",
    "November",
    "December",
];

/// A date as written.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum DateWritten {
    /// A calendar date.
    Calendar {
        /// The year; two digits are kept as written (`year_digits` 2) and taken as 19xx from 50 on, else 20xx.
        year: i32,
        /// Digits of the year as written.
        year_digits: u8,
        /// 1 to 12 in a right date; kept as written.
        month: u32,
        /// The day, perhaps with decimals.
        day: Number,
        /// The second day of a double date (`Mar 5/6`).
        to_day: Option<u32>,
        /// Day and month could be exchanged and nothing in the sheet decides (`03/04/2024`): the order taken is day first.
        order_unclear: bool,
    },
    /// A Julian date.
    Julian {
        /// The number written.
        number: Number,
        /// Which count it is.
        count: JulianCount,
    },
}

/// The kinds of Julian date people write.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum JulianCount {
    /// JD
    Jd,
    /// MJD = JD - 2400000.5
    Mjd,
    /// JD less 2400000, by whatever name (`JD-2400000`)
    Reduced,
    /// "JD" with five digits (`JD 60738.25`): [`JulianCount::Reduced`] or [`JulianCount::Mjd`], which begin 12 hours apart
    Short,
    /// HJD: at the Sun
    Hjd,
    /// BJD: at the barycentre
    Bjd,
}

/// A clock time as written.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Clock {
    /// Hours as written.
    pub hour: Number,
    /// Minutes as written, perhaps with decimals.
    pub minute: Option<Number>,
    /// Seconds as written.
    pub second: Option<Number>,
    /// am (false) or pm (true).
    pub pm: Option<bool>,
    /// Its place.
    pub span: Span,
}

/// The zone or time scale written with a clock time.
#[derive(Clone, PartialEq, Debug)]
pub enum Zone {
    /// UT, UTC, Z, GMT, `+00:00`
    Universal,
    /// UT1
    Ut1,
    /// TT, TDT, ET
    Terrestrial,
    /// TDB
    Barycentric,
    /// TAI
    Atomic,
    /// `+02:00`, `UTC-5`: minutes east of UTC
    Offset(i32),
    /// `CET`, `EST`: as written, upper case
    Abbreviation(String),
    /// `Europe/London`
    Named(String),
    /// "local time"
    Local,
}

/// An instant as written. Where it has no date of its own, the reader has carried the nearest one down.
#[derive(Clone, PartialEq, Debug)]
pub struct InstantWritten {
    /// The date.
    pub date: Option<Spanned<DateWritten>>,
    /// The clock time.
    pub clock: Option<Clock>,
    /// Digits and a zone after the date that could not be read as a clock time: then there is no instant.
    pub clock_unread: Option<Span>,
    /// The zone or scale.
    pub zone: Option<Spanned<Zone>>,
    /// The end of a range, where one is written (`22:31-22:35`): the mid time is what counts.
    pub until: Option<Clock>,
    /// Seconds to be added to the clock time or to T0 (`T0+340 s`, seconds of day).
    pub plus_s: Option<Number>,
    /// A weekday written with it, Monday 0.
    pub weekday: Option<Spanned<u8>>,
    /// All of it.
    pub span: Span,
}

impl InstantWritten {
    /// True where it tells more than a day: a clock time, or decimals of the day or of a Julian date.
    pub fn clock_or_decimals(&self) -> bool {
        self.clock.is_some()
            || match self.date.map(|d| d.value) {
                Some(DateWritten::Calendar { day, .. }) => day.places > 0,
                Some(DateWritten::Julian { .. }) => true,
                None => false,
            }
    }
}

/// A site as written: a name, coordinates, or both.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct SiteWritten {
    /// Its name.
    pub name: Option<Spanned<String>>,
    /// Latitude, sign or compass letter as written.
    pub latitude: Option<Angle>,
    /// Longitude, sign or compass letter as written.
    pub longitude: Option<Angle>,
    /// A field of a table of decimal degrees: plain is north and east.
    pub signed_field: bool,
    /// "west positive" is said of its longitude.
    pub west_positive: bool,
    /// Elevation in metres.
    pub elevation_m: Option<Spanned<f64>>,
    /// A zone written beside it (`time zone Europe/London`, `UTC+2`).
    pub zone: Option<Spanned<Zone>>,
    /// All of it.
    pub span: Span,
}

/// What the text says a position is.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub enum Role {
    /// A measurement, unless the text says otherwise.
    #[default]
    Measured,
    /// From a catalogue.
    Catalogued,
    /// A comparison star.
    Reference,
    /// A field's centre, a trigger, a pointing.
    Pointing,
    /// A corner of an error box, a centre with a radius.
    Region,
}

/// An altitude, azimuth, hour angle or airmass stated beside a position.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct StatedHorizon {
    /// What it is.
    pub quantity: HorizonQuantity,
    /// The angle (for an airmass: the bare number).
    pub angle: Angle,
}

/// What a [`StatedHorizon`] states.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum HorizonQuantity {
    /// Altitude, elevation above the horizon.
    Altitude,
    /// Zenith distance.
    ZenithDistance,
    /// Azimuth.
    Azimuth,
    /// Hour angle (hours unless marked in degrees).
    HourAngle,
    /// Airmass.
    Airmass,
}

/// Galactic or ecliptic coordinates stated beside a position.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct StatedOther {
    /// True for galactic, false for ecliptic.
    pub galactic: bool,
    /// Longitude.
    pub longitude: Angle,
    /// Latitude.
    pub latitude: Angle,
    /// Both.
    pub span: Span,
}

/// An editor's word that lets a rule pass: `[stet RULE: reason]`.
#[derive(Clone, PartialEq, Debug)]
pub struct Stet {
    /// The rules named, each with its place.
    pub rules: Vec<Spanned<String>>,
    /// The reason, if one is given.
    pub reason: Option<Spanned<String>>,
    /// From `[` to `]`.
    pub span: Span,
}

/// One report as written.
#[derive(Clone, PartialEq, Debug)]
pub struct Report {
    /// 1, 2, 3 … in the order of the sheet.
    pub ordinal: usize,
    /// The position.
    pub position: Position,
    /// The same position in other forms.
    pub other_forms: Vec<(Position, Option<Spanned<EquinoxTag>>)>,
    /// The object's name as written.
    pub object: Option<Spanned<String>>,
    /// The observer's name as written.
    pub observer: Option<Spanned<String>>,
    /// What the text says the position is.
    pub role: Role,
    /// The equinox tags that speak of it, the one that governs first.
    pub equinoxes: Vec<(Spanned<EquinoxTag>, Nearness)>,
    /// "epoch 2016.0" of the place, where it is told apart from the equinox.
    pub epoch_of_place: Option<Spanned<Number>>,
    /// The instants that speak of it, the one that governs first.
    pub instants: Vec<(InstantWritten, Nearness)>,
    /// The site, where one is written.
    pub site: Option<(SiteWritten, Nearness)>,
    /// Capitalised words of its part that could name a site of the register, where no site is written.
    pub mentions: Vec<Spanned<String>>,
    /// Altitude, azimuth, hour angle, airmass stated beside it.
    pub stated_horizon: Vec<StatedHorizon>,
    /// Galactic or ecliptic coordinates stated beside it.
    pub stated_other: Vec<StatedOther>,
    /// The constellation stated, by IAU abbreviation.
    pub constellation: Option<Spanned<&'static str>>,
    /// The magnitude stated.
    pub magnitude: Option<Spanned<f64>>,
    /// The uncertainty stated: one radius, arcsec.
    pub uncertainty_arcsec: Option<Spanned<f64>>,
    /// The text speaks of something new (nova, discovery, unknown, suspect …): the word.
    pub claims_new: Option<Span>,
    /// Stets of the block.
    pub stets: Vec<Stet>,
    /// The words of the report's block: its lines up to a blank line, a heading or another report's.
    pub block: Span,
}

// ---------------------------------------------------------------------------------------------- as meant

/// The system a position is read in.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum System {
    /// ICRS
    Icrs,
    /// FK5 of J2000.0
    Fk5,
    /// FK4 of a Besselian equinox, with E-terms
    Fk4,
    /// Mean equator and equinox of a Julian year, or of date
    Mean,
    /// Geocentric apparent, true equator and equinox of date
    Apparent,
    /// Hour angle and declination of the geocentric apparent place, true equator of date: sidereal time less right
    /// ascension, without diurnal aberration and parallax
    HourAngle,
    /// Topocentric azimuth and altitude
    Horizontal,
}

impl System {
    /// Its name in the record.
    pub fn name(self) -> &'static str {
        match self {
            System::Icrs => "ICRS",
            System::Fk5 => "FK5",
            System::Fk4 => "FK4",
            System::Mean => "mean",
            System::Apparent => "apparent",
            System::HourAngle => "hour-angle",
            System::Horizontal => "horizontal",
        }
    }
}

/// An equinox as meant.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum Equinox {
    /// A Julian epoch, years.
    Julian(f64),
    /// A Besselian epoch, years.
    Besselian(f64),
    /// That of the date of observation.
    OfDate,
}

impl std::fmt::Display for Equinox {
    /// `J2000.0`, `B1950.0`, `J2034.55`, `of date`.
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let (letter, year) = match self {
            Equinox::Julian(y) => ('J', y),
            Equinox::Besselian(y) => ('B', y),
            Equinox::OfDate => return f.write_str("of date"),
        };
        if year.fract() == 0.0 {
            write!(f, "{letter}{year:.1}")
        } else {
            write!(f, "{letter}{year}")
        }
    }
}

/// A system and equinox to restate positions in (`--to`), or the one a report is read in.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Frame {
    /// The system.
    pub system: System,
    /// Its equinox.
    pub equinox: Equinox,
}

/// The position as meant, in its own system.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct ReadPosition {
    /// System and equinox. `None` where the equinox is unknown and no house rule supplies it.
    pub frame: Option<Frame>,
    /// Right ascension in degrees [0, 360), hour angle in degrees (-180, 180], or azimuth from north through east in degrees.
    pub first_deg: f64,
    /// Declination or altitude, degrees.
    pub second_deg: f64,
    /// Value of the last digit written of the first, arcsec in the coordinate itself.
    pub first_step_arcsec: f64,
    /// Value of the last digit written of the second, arcsec.
    pub second_step_arcsec: f64,
}

/// The instant as meant.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct InstantMeant {
    /// UTC as a two-part quasi Julian date, as ERFA has it.
    pub utc: (f64, f64),
    /// Value of the last digit written, seconds.
    pub step_s: f64,
    /// HJD or BJD: up to 8.3 minutes from the clock.
    pub heliocentric: bool,
}

/// The site as meant.
#[derive(Clone, PartialEq, Debug)]
pub struct SiteMeant {
    /// Its name in the register, or as written, if any.
    pub name: Option<String>,
    /// Geodetic latitude, degrees, north positive.
    pub latitude_deg: f64,
    /// Longitude, degrees, east positive, (-180, 180].
    pub longitude_deg: f64,
    /// Height above the ellipsoid, metres.
    pub elevation_m: Option<f64>,
    /// Its zone, IANA name, if known.
    pub zone: Option<String>,
    /// Value of the last digit written of its coordinates, degrees.
    pub step_deg: f64,
}

/// A position reduced to the wanted frame.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Reduced {
    /// The wanted frame.
    pub frame: Frame,
    /// Right ascension there, degrees [0, 360).
    pub ra_deg: f64,
    /// Declination there, degrees.
    pub dec_deg: f64,
    /// ICRS right ascension, degrees, whatever the target: what the rules compute with.
    pub icrs_ra_deg: f64,
    /// ICRS declination, degrees.
    pub icrs_dec_deg: f64,
    /// The larger of RA step × cos δ and Dec step, arcsec.
    pub step_arcsec: f64,
    /// RA step × cos δ as written, arcsec on the sky: what the printed RA must not exceed in fineness.
    pub ra_step_on_sky_arcsec: f64,
    /// Dec step as written, arcsec.
    pub dec_step_arcsec: f64,
}

/// The object over the site's horizon.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Horizon {
    /// Topocentric airless altitude, degrees.
    pub altitude_deg: f64,
    /// Azimuth from north through east, degrees.
    pub azimuth_deg: f64,
    /// Hour angle, hours, west positive, (-12, 12].
    pub hour_angle_h: f64,
    /// Topocentric airless altitude of the Sun's centre, degrees.
    pub sun_altitude_deg: f64,
    /// Angle to the Sun's centre, degrees.
    pub sun_separation_deg: f64,
    /// Angle to the topocentric Moon's centre, degrees.
    pub moon_separation_deg: f64,
}

/// Why there is no instant, where words for one were written.
#[derive(Clone, PartialEq, Debug)]
pub enum InstantTrouble {
    /// No such day or time (30 February, 25:10, a leap second that never was): what is wrong with it.
    Impossible(String),
    /// A clock time with no UT and no zone.
    ZoneMissing,
    /// "local time" and no zone known for the site.
    LocalWithoutZone,
    /// An abbreviation with several meanings, out of season or unknown there: which, and the offsets it could have (minutes east).
    ZoneDoubtful {
        /// What is doubtful about it.
        why: String,
    },
    /// A time and no date.
    DateMissing,
    /// A date without a year, and none carried to it.
    YearMissing,
    /// Words after the date that are a clock time and could not be read: their place.
    ClockUnread(Span),
}

/// Why there is no site, where words for one were written.
#[derive(Clone, PartialEq, Debug)]
pub enum SiteTrouble {
    /// Not in the register: nearest names.
    Unknown {
        /// Nearest names of the register, best first.
        nearest: Vec<String>,
        /// The house has a register at all.
        have_register: bool,
    },
    /// Latitude beyond 90°, longitude beyond 360°.
    OutOfRange,
    /// No sign and no compass letter in free text: the readings are open.
    HemisphereUnclear,
}

/// A report as meant: what the written words come to once the house rules, the zone tables and the sky are asked.
#[derive(Clone, PartialEq, Debug, Default)]
pub struct Meant {
    /// The position in its own system; `None` where it cannot be a position (out of range, incomplete).
    pub read: Option<ReadPosition>,
    /// At the wanted equinox; `None` where no honest reduction exists.
    pub reduced: Option<Reduced>,
    /// The governing instant; kept, where it can be guessed, even when `instant_trouble` says it is doubtful.
    pub instant: Option<InstantMeant>,
    /// What is wrong with the governing instant.
    pub instant_trouble: Option<InstantTrouble>,
    /// The site.
    pub site: Option<SiteMeant>,
    /// What is wrong with it.
    pub site_trouble: Option<SiteTrouble>,
    /// The register's own coordinates where written ones disagree with them: (latitude, longitude) degrees.
    pub site_register_deg: Option<(f64, f64)>,
    /// Over the horizon.
    pub horizon: Option<Horizon>,
    /// The constellation of the reduced place, IAU abbreviation.
    pub constellation: Option<&'static str>,
    /// What a house rule supplied, e.g. `equinox J2000.0`.
    pub assumed: Vec<String>,
}

// ---------------------------------------------------------------------------------------------- what was found

/// How heavy a finding weighs.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Debug)]
pub enum Weight {
    /// Said, and no more.
    Note,
    /// To be asked.
    Query,
    /// Cannot be right.
    Reject,
}

impl Weight {
    /// Its name in the record and in house rules.
    pub fn name(self) -> &'static str {
        match self {
            Weight::Note => "note",
            Weight::Query => "query",
            Weight::Reject => "reject",
        }
    }
}

/// The verdict on a report: the heaviest weight among its findings; notes do not count.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug)]
pub enum Verdict {
    /// Nothing to ask.
    Accept,
    /// Something to ask.
    Query,
    /// Something cannot be right.
    Reject,
}

impl Verdict {
    /// Its name in the record.
    pub fn name(self) -> &'static str {
        match self {
            Verdict::Accept => "accept",
            Verdict::Query => "query",
            Verdict::Reject => "reject",
        }
    }

    /// The verdict that these findings come to.
    pub fn of(findings: &[Finding]) -> Verdict {
        match findings.iter().map(|f| f.weight).max() {
            Some(Weight::Reject) => Verdict::Reject,
            Some(Weight::Query) => Verdict::Query,
            _ => Verdict::Accept,
        }
    }
}

/// One rule's remark on one span.
#[derive(Clone, PartialEq, Debug)]
pub struct Finding {
    /// The rule's name.
    pub rule: &'static str,
    /// Its weight, after the house rules.
    pub weight: Weight,
    /// What is wrong, with its numbers: one sentence.
    pub message: String,
    /// What it should be, or what to do: one sentence.
    pub advice: Option<String>,
    /// The very words.
    pub primary: Span,
    /// Other places that bear on it, each with a word.
    pub related: Vec<(Span, String)>,
}

/// The part of the record that a slip would change.
#[derive(Clone, PartialEq, Debug)]
pub enum Becomes {
    /// Position or equinox.
    Read(ReadPosition, Reduced),
    /// Time.
    Instant(InstantMeant),
    /// Place.
    Site(SiteMeant),
}

/// A likely slip: another reading with which every stated fact agrees.
#[derive(Clone, PartialEq, Debug)]
pub struct Slip {
    /// One of the names of the design: `local-for-universal` …
    pub kinds: Vec<&'static str>,
    /// The reading, in words: `22:31 at UTC+01:00 = 21:31 UT`.
    pub reading: String,
    /// One sentence an editor can send on.
    pub because: String,
    /// Its share among the readings offered.
    pub weight: f64,
    /// What would change.
    pub becomes: Vec<Becomes>,
}

/// A report with everything that is known of it: what outputs are made from.
#[derive(Clone, PartialEq, Debug)]
pub struct Examined {
    /// As written.
    pub report: Report,
    /// As meant.
    pub meant: Meant,
    /// What the rules say, in the order of the sheet.
    pub findings: Vec<Finding>,
    /// What probably happened, best first.
    pub slips: Vec<Slip>,
}

impl Examined {
    /// The verdict on it.
    pub fn verdict(&self) -> Verdict {
        Verdict::of(&self.findings)
    }
}
