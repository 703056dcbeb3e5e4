//! Statements: what the atoms of some lines say besides positions (instants, tags, sites, names, altitudes, magnitudes …).

use super::equinox::Tagged;
use super::instant::zone;
use super::scan::{Atom, Kind};
use super::text::Text;
use super::words::Word;
use crate::report::{
    Angle, AngleUnit, HorizonQuantity, InstantWritten, Mark, Number, Role, SiteWritten,
    StatedHorizon, StatedOther, Stet, Zone,
};
use crate::span::{Span, Spanned};

/// Everything said on some lines.
#[derive(Clone, Debug, Default)]
pub struct Statements {
    /// Names after "Object:".
    pub objects: Vec<Spanned<String>>,
    /// Names after "Observer:".
    pub observers: Vec<Spanned<String>>,
    /// Dates, clock times, Julian dates.
    pub instants: Vec<InstantWritten>,
    /// Equinox tags.
    pub tags: Vec<Spanned<Tagged>>,
    /// Sites, by name or coordinates.
    pub sites: Vec<SiteWritten>,
    /// A zone that stands for the clock times ("times UT").
    pub clock_zone: Option<Spanned<Zone>>,
    /// Altitudes and the like.
    pub horizon: Vec<StatedHorizon>,
    /// Galactic or ecliptic coordinates.
    pub other: Vec<StatedOther>,
    /// A constellation.
    pub constellation: Option<Spanned<&'static str>>,
    /// A magnitude.
    pub magnitude: Option<Spanned<f64>>,
    /// A radius of uncertainty, arcsec.
    pub uncertainty_arcsec: Option<Spanned<f64>>,
    /// What the text says positions here are, with the place of the word.
    pub roles: Vec<Spanned<Role>>,
    /// A word for something new.
    pub claims_new: Option<Span>,
    /// Editors' words.
    pub stets: Vec<Stet>,
    /// "All positions …": what stands for the whole sheet.
    pub all: bool,
    /// A date was led by its label or a word for night: it may stand for what follows.
    pub date_labelled: bool,
}

/// What the atoms say that no position has taken. `taken` are index ranges of positions.
pub fn gather(text: &str, atoms: &[Atom], taken: &[(usize, usize)]) -> Statements {
    let mut g = Gatherer {
        text,
        atoms,
        taken,
        out: Statements::default(),
        foreign: Vec::new(),
    };
    let mut i = 0;
    while i < atoms.len() {
        if let Some(&(_, end)) = taken.iter().find(|(a, b)| (*a..*b).contains(&i)) {
            i = end.max(i + 1);
            continue;
        }
        i = g.statement(i).max(i + 1);
    }
    // an instant under a label of its own ("Last negative: …") is not that of the observation, if there is another
    let labels = g.foreign;
    g.out.instants.sort_by_key(|i| labels.contains(&i.span));
    if g.out
        .instants
        .iter()
        .any(|i| !labels.contains(&i.span) && i.date.is_some())
    {
        g.out.instants.retain(|i| !labels.contains(&i.span));
    }
    g.out
}

struct Gatherer<'a, 't> {
    text: &'t str,
    atoms: &'a [Atom<'t>],
    taken: &'a [(usize, usize)],
    out: Statements,
    /// Instants under a label that says something else.
    foreign: Vec<Span>,
}

impl<'t> Gatherer<'_, 't> {
    /// Takes in the statement that begins at atom `i`; the index after it.
    fn statement(&mut self, i: usize) -> usize {
        let atom = &self.atoms[i];
        match &atom.kind {
            Kind::Stet(s) => self.out.stets.push(s.clone()),
            Kind::Instant(instant) => {
                if self.foreign_label(i) {
                    self.foreign.push(instant.span);
                }
                self.out.instants.push((**instant).clone());
            }
            Kind::Equinox(t) if (!t.weak || (t.tag.misspelt && self.bracketed(i))) => {
                self.out.tags.push(Spanned::new(*t, atom.span));
            }
            Kind::Uncertainty(u) if self.led_by_position(i) => {
                let arcsec = match u.mark {
                    Mark::DoublePrime => Some(u.value),
                    Mark::Prime => Some(u.value * 60.0),
                    Mark::Degree => Some(u.value * 3600.0),
                    _ => None,
                };
                self.out.uncertainty_arcsec = arcsec.map(|a| Spanned::new(a, atom.span));
            }
            Kind::Site(site) => return self.site(i, (**site).clone()),
            Kind::Elevation(metres) => {
                if let Some(site) = self.out.sites.last_mut()
                    && site.elevation_m.is_none()
                {
                    site.elevation_m = Some(*metres);
                }
            }
            // "Positions for 1950.0:"
            Kind::Run(r)
                if r.numbers.len() == 1
                    && r.numbers[0].0.places == 1
                    && self.heads_positions(i) =>
            {
                if let Ok((rest, t)) = super::equinox::equinox_year(Text::window(self.text, r.span))
                    && rest.is_empty()
                {
                    self.out
                        .tags
                        .push(Spanned::new(Tagged { weak: false, ..t }, r.span));
                }
            }
            Kind::Angle(a) if a.parts()[0].mark == Mark::Colon && a.sign.is_none() => {
                // "Time: 22:31", "at 22:31:05": a clock time without a zone
                // or at the head of a row
                let heads = i == 0 || matches!(self.atoms[i - 1].kind, Kind::LineEnd);
                let led = heads
                    && a.parts().len() <= 3
                    && self
                        .taken
                        .iter()
                        .any(|(from, _)| *from > i && *from <= i + 3)
                    || i > 0 && (self.led_by(i, Word::Time) || self.led_by(i, Word::Date));
                if led
                    && let Ok((_, clock)) = super::instant::clock(Text::window(
                        self.text,
                        Span::new(atom.span.start, self.line_end(i)),
                    ))
                {
                    let zone = zone(Text::window(
                        self.text,
                        Span::new(clock.span.end, self.line_end(i)),
                    ))
                    .ok()
                    .map(|(_, z)| z);
                    let span = clock.span;
                    self.out.instants.push(InstantWritten {
                        date: None,
                        clock: Some(clock),
                        clock_unread: None,
                        zone,
                        until: None,
                        plus_s: None,
                        weekday: None,
                        span,
                    });
                }
            }
            Kind::Word(p) => {
                let meanings: Vec<Word> = p.meanings().collect();
                return self.word(i, &meanings);
            }
            _ => {}
        }
        i + 1
    }

    fn word(&mut self, i: usize, meanings: &[Word]) -> usize {
        let atom = &self.atoms[i];
        let is = |w: Word| meanings.contains(&w);
        if is(Word::All) || is(Word::Position) {
            self.out.all = true;
        }
        if is(Word::Night) || is(Word::Date) {
            self.out.date_labelled = true;
        }
        if is(Word::New) && self.out.claims_new.is_none() {
            self.out.claims_new = Some(atom.span);
        }
        for (word, role) in [
            (Word::RoleReference, Role::Reference),
            (Word::RolePointing, Role::Pointing),
            (Word::RoleCatalogued, Role::Catalogued),
            (Word::RoleRegion, Role::Region),
            (Word::RoleMeasured, Role::Measured),
        ] {
            if is(word) {
                self.out.roles.push(Spanned::new(role, atom.span));
            }
        }
        if is(Word::Object)
            && self.label_mark(i)
            && let Some((name, next)) = self.rest_of_line(i + 1, &[';', '|'])
        {
            // an object's name may hold words for something new
            for k in i + 1..next {
                if self.atoms[k].means(Word::New) && self.out.claims_new.is_none() {
                    self.out.claims_new = Some(self.atoms[k].span);
                }
            }
            self.out.objects.push(name);
            return next;
        }
        if is(Word::Observer)
            && (self.label_mark(i)
                || self.verb_phrase(i, &["by", "par", "von", "da", "dal", "por", "door", "z"]))
            && let Some((name, next)) = self.rest_of_line(i + 1, &[';', ',', '(', '|', '['])
        {
            self.out.observers.push(name);
            return next;
        }
        if is(Word::Site)
            && (self.label_mark(i)
                || self.verb_phrase(
                    i,
                    &[
                        "from", "at", "in", "von", "depuis", "de", "à", "desde", "en", "da", "a",
                        "vanuit", "te", "em", "z",
                    ],
                ))
        {
            return self.named_site(i);
        }
        if is(Word::From) && self.capital_after(i) && !self.out.date_labelled_only() {
            return self.named_site(i);
        }
        if is(Word::Zone) {
            let from = self.after_marks(i + 1);
            if let Some(next) = self.atoms.get(from)
                && let Ok((rest, z)) = zone(Text::window(
                    self.text,
                    Span::new(next.span.start, self.line_end(i)),
                ))
            {
                match self.out.sites.last_mut() {
                    Some(site) if site.zone.is_none() => site.zone = Some(z),
                    _ => self.out.clock_zone = Some(z),
                }
                return self
                    .atoms
                    .iter()
                    .position(|a| a.span.start >= rest.at())
                    .unwrap_or(self.atoms.len());
            }
        }
        if is(Word::WestPositive)
            && let Some(site) = self.out.sites.last_mut()
        {
            site.west_positive = true;
        }
        // latitude and longitude on lines of their own
        if (is(Word::Latitude) || is(Word::Longitude))
            && self.label_mark(i)
            && let Some((angle, next)) = self.value(i + 1)
        {
            let latitude = is(Word::Latitude) && !is(Word::Longitude);
            match self.out.sites.last_mut() {
                Some(s)
                    if latitude
                        && s.latitude.is_none()
                        && (s.name.is_some() || s.longitude.is_some()) =>
                {
                    s.latitude = Some(angle);
                    s.span = s.span.cover(angle.span);
                }
                Some(s) if !latitude && s.longitude.is_none() => {
                    s.longitude = Some(angle);
                    s.span = s.span.cover(angle.span);
                }
                _ => {
                    let mut s = SiteWritten {
                        span: angle.span,
                        ..SiteWritten::default()
                    };
                    if latitude {
                        s.latitude = Some(angle);
                    } else {
                        s.longitude = Some(angle);
                    }
                    self.out.sites.push(s);
                }
            }
            return next;
        }
        if is(Word::Time) || is(Word::Date) {
            // "times UT", "times are in UT", "Date (UT)"
            let mut k = i + 1;
            while let Some(a) = self.atoms.get(k) {
                match &a.kind {
                    Kind::Mark('(' | ':' | '=' | ',' | '[') => k += 1,
                    Kind::Word(p)
                        if p.means(Word::Filler) || p.means(Word::At) || p.means(Word::Time) =>
                    {
                        k += 1
                    }
                    Kind::Plain if k <= i + 3 => k += 1,
                    _ => break,
                }
                if k > i + 5 {
                    break;
                }
            }
            if let Some(a) = self.atoms.get(k)
                && let Kind::Word(p) = &a.kind
                && [
                    Word::Universal,
                    Word::LocalTime,
                    Word::ZoneAbbreviation,
                    Word::Terrestrial,
                ]
                .iter()
                .any(|w| p.means(*w))
                && let Ok((_, z)) = zone(Text::window(
                    self.text,
                    Span::new(a.span.start, self.line_end(k)),
                ))
            {
                self.out.clock_zone = Some(z);
                return k + 1;
            }
        }
        for (word, quantity) in [
            (Word::Altitude, HorizonQuantity::Altitude),
            (Word::Azimuth, HorizonQuantity::Azimuth),
            (Word::ZenithDistance, HorizonQuantity::ZenithDistance),
            (Word::HourAngle, HorizonQuantity::HourAngle),
            (Word::Airmass, HorizonQuantity::Airmass),
        ] {
            if is(word)
                && !self.led_by(i, Word::NotAPosition)
                && !(quantity == HorizonQuantity::Airmass
                    && atom.span.len() == 1
                    && !self.label_mark(i))
                && let Some((angle, next)) = self.value(i + 1)
            {
                let single = atom.span.len() <= 2;
                let degrees = angle.marked_unit() == Some(AngleUnit::Degrees)
                    || self.atoms.get(next).is_some_and(|a| a.means(Word::Degrees));
                let fits = match quantity {
                    HorizonQuantity::HourAngle => angle.parts().len() > 1 || degrees,
                    HorizonQuantity::Airmass => {
                        angle.parts().len() == 1
                            && angle.sign.is_none()
                            && (1.0..45.0).contains(&angle.value())
                            && angle.parts()[0].mark == Mark::None
                    }
                    _ => {
                        degrees
                            || !single
                                && angle.marked_unit().is_none()
                                && angle.value().abs() <= 360.0
                                && angle.parts().len() == 1
                    }
                };
                if fits {
                    self.out.horizon.push(StatedHorizon { quantity, angle });
                    return next;
                }
            }
        }
        if is(Word::Galactic) || is(Word::Ecliptic) {
            return self.other_coordinates(i, is(Word::Galactic));
        }
        if is(Word::Constellation)
            && let Some((k, name)) = (i + 1..self.atoms.len().min(i + 4))
                .find_map(|k| self.constellation(k, true).map(|c| (k, c)))
        {
            self.out.constellation = Some(name);
            return k + 1;
        }
        // "; Mon" and ", Mon" after a position, "in Orion"
        if self.out.constellation.is_none()
            && let Some(name) = self.constellation(i, false)
            && i > 0
            && self.led_by_position(i)
        {
            self.out.constellation = Some(name);
        }
        if is(Word::Magnitude) {
            let near = self.atoms[i.saturating_sub(5)..=i]
                .iter()
                .map(|a| a.span.of(self.text).to_lowercase());
            let limiting = near.clone().any(|w| {
                w.starts_with("grenz") || w.starts_with("limit") || w.starts_with("límit")
            }) || i > 0
                && self.atoms[i - 1]
                    .span
                    .of(self.text)
                    .to_lowercase()
                    .starts_with("limit");
            if !limiting
                && self.out.magnitude.is_none()
                && let Some((angle, next)) = self.value(i + 1)
                && angle.parts().len() == 1
                && angle.value().abs() < 40.0
            {
                self.out.magnitude = Some(Spanned::new(angle.value(), angle.span));
                return next;
            }
            if !limiting
                && self.out.magnitude.is_none()
                && let Some(Kind::Run(r)) = i.checked_sub(1).map(|k| &self.atoms[k].kind)
                && let Some((n, span)) = r.numbers.last()
            {
                self.out.magnitude = Some(Spanned::new(n.value(), *span));
            }
        }
        if is(Word::Uncertainty)
            && self.out.uncertainty_arcsec.is_none()
            && let Some((angle, next)) = self.value(i + 1)
            && angle.parts().len() == 1
        {
            let at = self.atoms.get(next);
            let scale = match angle.parts()[0].mark {
                Mark::DoublePrime => Some(1.0),
                Mark::Prime => Some(60.0),
                Mark::Degree => Some(3600.0),
                _ => at.and_then(|a| {
                    if a.means(Word::Arcseconds)
                        || a.is_mark('"')
                        || a.is_mark('″')
                        || a.is_mark('”')
                    {
                        Some(1.0)
                    } else if a.means(Word::Arcminutes)
                        || a.is_mark('\'')
                        || a.is_mark('′')
                        || a.is_mark('’')
                    {
                        Some(60.0)
                    } else if a.means(Word::Degrees) {
                        Some(3600.0)
                    } else {
                        None
                    }
                }),
            };
            if let Some(scale) = scale {
                self.out.uncertainty_arcsec = Some(Spanned::new(angle.value() * scale, angle.span));
                return next;
            }
        }
        i + 1
    }

    // ------------------------------------------------------------------------------------------ sites

    /// Coordinates, perhaps with the name that stands before them after a label.
    fn site(&mut self, i: usize, site: SiteWritten) -> usize {
        self.out.sites.push(site);
        i + 1
    }

    /// A name after "Site:", "observed from"; coordinates and elevation may follow it.
    fn named_site(&mut self, i: usize) -> usize {
        let start = self.after_marks(i + 1);
        let mut end = start;
        let mut site = SiteWritten::default();
        let mut name_end = start;
        while let Some(atom) = self.atoms.get(end) {
            if self.taken.iter().any(|(a, b)| (*a..*b).contains(&end)) {
                break;
            }
            match &atom.kind {
                Kind::LineEnd
                | Kind::Mark(';' | '(' | '[' | '|' | ',' | '.')
                | Kind::Instant(_)
                | Kind::Site(_)
                | Kind::Elevation(_)
                | Kind::Equinox(_)
                | Kind::Angle(_) => {
                    // an initial's point belongs to the name
                    let initial = atom.is_mark('.')
                        && end > start
                        && self.atoms[end - 1].span.len() <= 3
                        && self
                            .atoms
                            .get(end + 1)
                            .is_some_and(|a| matches!(a.kind, Kind::Plain | Kind::Word(_)));
                    if !initial {
                        break;
                    }
                }
                Kind::Run(_) if end == start => break,
                _ => {}
            }
            end += 1;
            name_end = end;
        }
        if name_end > start {
            let span = self.atoms[start].span.cover(self.atoms[name_end - 1].span);
            let words = span.of(self.text).trim().trim_end_matches(['.', ',']);
            if !words.is_empty() {
                let span = Span::new(span.start, span.start + words.len());
                site.name = Some(Spanned::new(words.to_string(), span));
                site.span = span;
            }
        }
        // what follows on the line: coordinates, elevation, a pair of signed decimals in brackets
        let mut k = name_end;
        while let Some(atom) = self.atoms.get(k) {
            match &atom.kind {
                Kind::Mark(',' | ';' | '(' | ')' | ':' | '/' | '[' | ']') => {}
                Kind::Site(s) => {
                    let name = site.name.take();
                    let span = if name.is_some() {
                        site.span.cover(s.span)
                    } else {
                        s.span
                    };
                    site = SiteWritten {
                        name,
                        span,
                        ..(**s).clone()
                    };
                }
                Kind::Elevation(m) => {
                    site.elevation_m = Some(*m);
                    site.span = if site.span.is_empty() {
                        m.span
                    } else {
                        site.span.cover(m.span)
                    };
                }
                Kind::Run(_) if site.latitude.is_none() => match self.signed_pair(k) {
                    Some((latitude, longitude, after)) => {
                        site.span = if site.span.is_empty() {
                            latitude.span.cover(longitude.span)
                        } else {
                            site.span.cover(longitude.span)
                        };
                        site.latitude = Some(latitude);
                        site.longitude = Some(longitude);
                        k = after;
                        continue;
                    }
                    None => break,
                },
                _ => break,
            }
            k += 1;
        }
        if site.name.is_some() || site.latitude.is_some() {
            self.out.sites.push(site);
        }
        k.max(i + 1)
    }

    /// `34.912, -86.004`: two decimals, within the ranges of latitude and longitude.
    fn signed_pair(&self, k: usize) -> Option<(Angle, Angle, usize)> {
        let Kind::Run(first) = &self.atoms.get(k)?.kind else {
            return None;
        };
        let mut next = k + 1;
        if self.atoms.get(next)?.is_mark(',') {
            next += 1;
        }
        let Kind::Run(second) = &self.atoms.get(next)?.kind else {
            return None;
        };
        let (a, b) = (first.angle(0, 1)?, second.angle(0, 1)?);
        let decimal = first.numbers.len() == 1
            && second.numbers.len() == 1
            && a.parts()[0].number.places > 0
            && b.parts()[0].number.places > 0;
        (decimal && a.value().abs() <= 90.0 && b.value().abs() <= 360.0).then_some((a, b, next + 1))
    }

    // ------------------------------------------------------------------------------------------ small things

    /// Galactic `l = 184.5575, b = -5.7843` and their like.
    fn other_coordinates(&mut self, i: usize, galactic: bool) -> usize {
        let mut values: Vec<Angle> = Vec::new();
        let mut k = i + 1;
        while let Some(atom) = self.atoms.get(k) {
            match &atom.kind {
                Kind::Angle(a) => values.push(**a),
                Kind::Run(r) => match r.angle(0, r.numbers.len().min(3)) {
                    Some(a) => values.push(a),
                    None => break,
                },
                Kind::LineEnd | Kind::Instant(_) | Kind::Site(_) => break,
                _ => {}
            }
            k += 1;
            if values.len() == 2 {
                self.out.other.push(StatedOther {
                    galactic,
                    longitude: values[0],
                    latitude: values[1],
                    span: self.atoms[i].span.cover(values[1].span),
                });
                return k;
            }
            if k > i + 14 {
                break;
            }
        }
        k.max(i + 1)
    }

    /// The value after a label: `= 39°`, `: 1.2`, `is 39`.
    fn value(&self, from: usize) -> Option<(Angle, usize)> {
        for k in from..self.atoms.len().min(from + 5) {
            match &self.atoms[k].kind {
                Kind::Angle(a) => return Some((**a, k + 1)),
                Kind::Run(r) => {
                    let take = r
                        .numbers
                        .iter()
                        .position(|(n, _)| n.places > 0)
                        .map_or(r.numbers.len(), |d| d + 1)
                        .min(3);
                    let mut angle = r.angle(0, take)?;
                    let mut next = k + 1;
                    // a compass letter after it
                    if let Some(Kind::Word(p)) = self.atoms.get(next).map(|a| &a.kind)
                        && let Some(point) = p.meanings().find_map(|w| match w {
                            Word::Compass(c) => Some(c),
                            _ => None,
                        })
                        && self.atoms[next]
                            .span
                            .of(self.text)
                            .starts_with(char::is_uppercase)
                    {
                        angle.compass = Some(Spanned::new(point, self.atoms[next].span));
                        next += 1;
                    }
                    return Some((angle, next));
                }
                Kind::Mark(':' | '=' | '.' | '(' | '~' | '≈' | ',') => {}
                Kind::Word(p) if p.means(Word::Filler) || p.means(Word::At) => {}
                _ => return None,
            }
        }
        None
    }

    fn constellation(&self, i: usize, labelled: bool) -> Option<Spanned<&'static str>> {
        let atom = self.atoms.get(i)?;
        let Kind::Word(p) = &atom.kind else {
            return None;
        };
        let name = p.meanings().find_map(|w| match w {
            Word::ConstellationName(c) => Some(c),
            _ => None,
        })?;
        let words = atom.span.of(self.text);
        // "and", "leo" in running text are no constellations
        (words == name || labelled || words.starts_with(char::is_uppercase) && words.len() > 3)
            .then_some(Spanned::new(name, atom.span))
    }

    fn led_by_position(&self, i: usize) -> bool {
        let mut k = i;
        while k > 0 {
            k -= 1;
            if self.taken.iter().any(|(a, b)| (*a..*b).contains(&k)) {
                return true;
            }
            match &self.atoms[k].kind {
                Kind::Mark(';' | ',' | '(' | ')') => {}
                _ => return false,
            }
        }
        false
    }

    /// "Last negative:" opens its line: a label of words that mean no date, time, site or object.
    fn foreign_label(&self, i: usize) -> bool {
        // a label is short: what begins farther back is none
        let line = self.atoms[i].line;
        let floor = i.saturating_sub(6);
        let Some(start) = (floor..i).rev().find(|&k| {
            k == 0
                || self.atoms[k - 1].line != line
                || matches!(self.atoms[k - 1].kind, Kind::LineEnd)
        }) else {
            return false;
        };
        let label = &self.atoms[start..i];
        let Some((last, words)) = label.split_last() else {
            return false;
        };
        const OWN: [Word; 7] = [
            Word::Date,
            Word::Time,
            Word::Night,
            Word::Object,
            Word::Position,
            Word::Universal,
            Word::Found,
        ];
        last.is_mark(':')
            && (1..=3).contains(&words.len())
            && words
                .iter()
                .all(|a| matches!(a.kind, Kind::Plain | Kind::Word(_)))
            && words.iter().any(|a| matches!(a.kind, Kind::Plain))
            && !words
                .iter()
                .any(|a| OWN.iter().any(|w| a.means(*w)) || a.means(Word::New))
            && !self
                .taken
                .iter()
                .any(|(a, _)| self.atoms.get(*a).is_some_and(|p| p.line == line))
    }

    /// A line that speaks of positions, or one closed by a colon, and holds none.
    fn heads_positions(&self, i: usize) -> bool {
        // such a line is short: at most a dozen words on either side are looked at
        let line = self.atoms[i].line;
        let window = i.saturating_sub(13)..self.atoms.len().min(i + 14);
        let of_line: Vec<&Atom> = self.atoms[window]
            .iter()
            .filter(|a| a.line == line && !matches!(a.kind, Kind::LineEnd))
            .collect();
        let colon = of_line.last().is_some_and(|a| a.is_mark(':'));
        let speaks = of_line.iter().any(|a| a.means(Word::Position));
        (colon || speaks)
            && of_line.len() <= 12
            && !of_line.iter().any(|a| matches!(a.kind, Kind::Instant(_)))
    }

    fn bracketed(&self, i: usize) -> bool {
        i > 0
            && self.atoms[i - 1].is_mark('(')
            && self.atoms.get(i + 1).is_some_and(|a| a.is_mark(')'))
    }

    /// A colon or equals sign after a label (a unit in brackets may stand between), or the label alone opening its line.
    fn label_mark(&self, i: usize) -> bool {
        let mut k = i + 1;
        if self.atoms.get(k).is_some_and(|a| a.is_mark('(')) {
            while self
                .atoms
                .get(k)
                .is_some_and(|a| !a.is_mark(')') && !matches!(a.kind, Kind::LineEnd))
                && k < i + 5
            {
                k += 1;
            }
            k += 1;
        }
        self.atoms
            .get(k)
            .is_some_and(|a| a.is_mark(':') || a.is_mark('='))
    }

    /// The phrase ends in one of these particles: "observed from", "beobachtet in".
    fn verb_phrase(&self, i: usize, particles: &[&str]) -> bool {
        let words = self.atoms[i].span.of(self.text).to_lowercase();
        words.split_whitespace().count() > 1
            && words
                .split_whitespace()
                .next_back()
                .is_some_and(|last| particles.contains(&last))
    }

    fn capital_after(&self, i: usize) -> bool {
        self.atoms.get(i + 1).is_some_and(|a| {
            matches!(a.kind, Kind::Plain | Kind::Word(_))
                && a.span.of(self.text).chars().count() > 2
                && a.span.of(self.text).starts_with(char::is_uppercase)
        }) && self.taken.iter().any(|(_, b)| *b <= i)
    }

    /// The atom before (over marks) means `word`.
    fn led_by(&self, i: usize, word: Word) -> bool {
        let mut k = i;
        while k > 0 {
            k -= 1;
            match &self.atoms[k].kind {
                Kind::Mark(':' | '=' | '(' | ')' | ',') => {}
                Kind::Instant(_) if word == Word::Date => return true,
                Kind::Word(p) if p.means(Word::Filler) && !p.means(word) => {}
                Kind::Word(p) if p.means(Word::Universal) => {}
                Kind::Word(p) => return p.means(word),
                _ => return false,
            }
        }
        false
    }

    fn after_marks(&self, from: usize) -> usize {
        let mut k = from;
        while self
            .atoms
            .get(k)
            .is_some_and(|a| matches!(a.kind, Kind::Mark(':' | '=' | '(' | '-' | '*')))
        {
            k += 1;
        }
        k
    }

    fn line_end(&self, i: usize) -> usize {
        self.atoms[i..]
            .iter()
            .find(|a| matches!(a.kind, Kind::LineEnd))
            .map_or(self.text.len(), |a| a.span.start)
    }

    /// The words from atom `from` to the end of the line, one of these marks, or a position.
    fn rest_of_line(&self, from: usize, stops: &[char]) -> Option<(Spanned<String>, usize)> {
        let start = self.after_marks(from);
        let mut end = start;
        while let Some(atom) = self.atoms.get(end) {
            let stop = match &atom.kind {
                Kind::LineEnd => true,
                Kind::Mark(c) => stops.contains(c),
                _ => false,
            };
            let column = end > start && atom.span.start >= self.atoms[end - 1].span.end + 3;
            if stop || column || self.taken.iter().any(|(a, b)| (*a..*b).contains(&end)) {
                break;
            }
            end += 1;
        }
        if end == start {
            return None;
        }
        let span = self.atoms[start].span.cover(self.atoms[end - 1].span);
        let words = span
            .of(self.text)
            .trim_end_matches([',', ':', ' ', '(', '-', '*']);
        (!words.is_empty()).then(|| {
            (
                Spanned::new(
                    words.to_string(),
                    Span::new(span.start, span.start + words.len()),
                ),
                end,
            )
        })
    }
}

impl Statements {
    fn date_labelled_only(&self) -> bool {
        false
    }

    /// The epoch of the place, where a tag says "epoch" and another says the equinox.
    pub fn epoch(tags: &[Spanned<Tagged>]) -> Option<Spanned<Number>> {
        if tags.iter().all(|t| t.value.epoch_word) {
            return None;
        }
        tags.iter()
            .find(|t| t.value.epoch_word)
            .and_then(|t| match t.value.tag.year {
                Some(crate::report::EquinoxYear::Year { year, .. }) => {
                    Some(Spanned::new(year, t.span))
                }
                _ => None,
            })
    }
}
