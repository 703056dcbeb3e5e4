//! Lines of a correspondence that are no part of the reports: heads of forwarded messages, lines that say who wrote what follows, signatures.

use super::lines::Line;
use super::mail::{Turn, known, person};
use crate::span::{Span, Spanned};

/// Marks such lines, and adds the turns that quoted and forwarded messages take.
pub(super) fn mark(text: &str, lines: &mut [Line], turns: &mut Vec<Turn>, mail: bool) {
    let mut at = 0;
    let mut added: Vec<Turn> = Vec::new();
    // who spoke at which depth of quoting before somebody else was quoted
    let mut quoted: Vec<(u8, bool, Option<Spanned<String>>)> = Vec::new();
    let mut speaker: Option<Spanned<String>> = None;
    let mut next_turn = 0;
    while at < lines.len() {
        let line = lines[at];
        while let Some(t) = turns.get(next_turn).filter(|t| t.at <= line.whole.start) {
            speaker.clone_from(&t.observer);
            quoted.clear();
            next_turn += 1;
        }
        if line.aside || line.body.is_empty() {
            at += 1;
            continue;
        }
        if let Some((depth, deeper, before)) = quoted.last_mut() {
            if line.depth > *depth {
                *deeper = true;
            } else if *deeper {
                speaker = before.take();
                added.push(Turn {
                    at: line.whole.start,
                    fresh: false,
                    observer: speaker.clone(),
                });
                quoted.pop();
                continue;
            }
        }
        let count = if signature(text, lines, at, mail) {
            let depth = line.depth;
            lines[at..]
                .iter()
                .take_while(|l| !l.aside && l.depth == depth)
                .count()
        } else if forwarded(line.body.of(text)) {
            1
        } else if let Some((count, name)) = attribution(text, lines, at) {
            quoted.push((line.depth, false, speaker.take()));
            speaker = name;
            added.push(Turn {
                at: line.whole.start,
                fresh: false,
                observer: speaker.clone(),
            });
            count
        } else if let Some((count, name)) = inner_head(text, lines, at) {
            speaker = name;
            added.push(Turn {
                at: line.whole.start,
                fresh: false,
                observer: speaker.clone(),
            });
            count
        } else {
            0
        };
        for l in &mut lines[at..at + count] {
            l.aside = true;
        }
        at += count.max(1);
    }
    turns.append(&mut added);
    turns.sort_by_key(|t| t.at);
}

/// The line `-- ` (RFC 3676, section 4.3) before a few lines at the end of what somebody wrote.
fn signature(text: &str, lines: &[Line], at: usize, mail: bool) -> bool {
    const LONGEST: usize = 12;
    let line = lines[at];
    if line.body.of(text) != "--" {
        return false;
    }
    let blank = line.whole.of(text).ends_with("-- ");
    let length = lines[at..]
        .iter()
        .take_while(|l| !l.aside && l.depth == line.depth)
        .count();
    (blank || mail) && length <= LONGEST
}

/// `-----Original Message-----`, `Begin forwarded message:` in the eight languages.
fn forwarded(words: &str) -> bool {
    if words.len() > 90 || !(words.starts_with('-') || words.ends_with(':')) {
        return false;
    }
    let inner = words
        .trim_matches(|c: char| matches!(c, '-' | ':' | '*' | '_' | '>') || c.is_whitespace())
        .to_lowercase();
    const PHRASES: &[&str] = &[
        "original message",
        "original-message",
        "forwarded message",
        "begin forwarded message",
        "end of forwarded message",
        "end forwarded message",
        "ursprüngliche nachricht",
        "originalnachricht",
        "original-nachricht",
        "weitergeleitete nachricht",
        "anfang der weitergeleiteten nachricht",
        "message d'origine",
        "message d’origine",
        "message original",
        "message initial",
        "message transféré",
        "début du message réexpédié",
        "début du message transféré",
        "mensaje original",
        "mensaje reenviado",
        "inicio del mensaje reenviado",
        "messaggio originale",
        "messaggio inoltrato",
        "inizio messaggio inoltrato",
        "oorspronkelijk bericht",
        "origineel bericht",
        "doorgestuurd bericht",
        "begin doorgestuurd bericht",
        "mensagem original",
        "mensagem encaminhada",
        "mensagem reencaminhada",
        "início da mensagem reencaminhada",
        "wiadomość oryginalna",
        "oryginalna wiadomość",
        "wiadomość przekazana",
        "przekazana wiadomość",
        "początek przekazywanej wiadomości",
    ];
    // "Forwarded message from R. Quill"
    PHRASES.contains(&&*inner)
        || ["forwarded message from ", "forwarded by "]
            .iter()
            .any(|p| inner.starts_with(p))
}

/// `On Wed, 6 Mar 2024 at 08:15, R. Quill <quill@…> wrote:` over one to three lines: how many, and who.
fn attribution(text: &str, lines: &[Line], at: usize) -> Option<(usize, Option<Spanned<String>>)> {
    const WROTE: &[&str] = &[
        "wrote",
        "writes",
        "schrieb",
        "schreibt",
        "a écrit",
        "écrivait",
        "escribió",
        "escribio",
        "ha scritto",
        "scrive",
        "scriveva",
        "schreef",
        "schrijft",
        "heeft geschreven",
        "het volgende geschreven",
        "escreveu",
        "napisał",
        "napisała",
        "napisał(a)",
        "pisze",
        "napisano",
    ];
    let first = lines[at];
    for count in 1..=3usize {
        let last = *lines.get(at + count - 1)?;
        if last.body.is_empty() || last.depth != first.depth || last.aside {
            return None;
        }
        let span = Span::new(first.body.start, last.body.end);
        if span.len() > 320 {
            return None;
        }
        let words = span.of(text);
        if !words.ends_with(':') {
            // only lines that begin like one may go on
            let leads = [
                "On ", "Am ", "Le ", "El ", "Il ", "Op ", "Em ", "A ", "W ", "Dnia ", "No dia ",
                "Em ",
            ];
            if !leads.iter().any(|l| words.starts_with(l)) {
                return None;
            }
            continue;
        }
        let lower = words.to_lowercase();
        let wrote = WROTE.iter().any(|w| {
            lower.match_indices(w).any(|(i, _)| {
                let before = lower[..i].chars().next_back();
                let after = lower[i + w.len()..].chars().next();
                !before.is_some_and(char::is_alphanumeric)
                    && !after.is_some_and(char::is_alphanumeric)
            })
        });
        let said = words.contains('@') || words.bytes().any(|b| b.is_ascii_digit());
        // a statement of where something was is no attribution
        return (wrote && said && !lower.contains("dec") || wrote && words.contains('@'))
            .then(|| (count, writer(words, span.start)));
    }
    None
}

/// The name before `<quill@section.example>`.
fn writer(words: &str, start: usize) -> Option<Spanned<String>> {
    let address = words.find('<')?;
    let before = words[..address].trim_end();
    let from = before.rfind([',', ':', '\n', '\r']).map_or(0, |i| i + 1);
    let mut name = before[from..].trim_start();
    // "um 08:15 schrieb R. Quill", "08:15 R. Quill": after the verb, the zone or the clock
    for verb in ["schrieb ", "schreef ", "pisze ", "napisał(a) "] {
        if let Some(i) = name.find(verb) {
            name = &name[i + verb.len()..];
        }
    }
    let digits = name.rfind(|c: char| c.is_ascii_digit());
    if let Some(i) = digits {
        name = name[i + 1..].trim_start();
    }
    let name = name.trim().trim_matches('"');
    if name.is_empty() || name.len() > 60 {
        return None;
    }
    let at = start + (name.as_ptr() as usize - words.as_ptr() as usize);
    Some(Spanned::new(
        name.to_string(),
        Span::new(at, at + name.len()),
    ))
}

/// The head of a message inside a text (`From: … Date: … Subject: …`, in the eight languages): how many lines, and who.
fn inner_head(text: &str, lines: &[Line], at: usize) -> Option<(usize, Option<Spanned<String>>)> {
    const FROM: &[&str] = &[
        "from",
        "von",
        "de",
        "da",
        "van",
        "od",
        "expéditeur",
        "absender",
    ];
    const SUBJECT: &[&str] = &[
        "subject",
        "betreff",
        "objet",
        "asunto",
        "oggetto",
        "onderwerp",
        "assunto",
        "temat",
        "sujet",
    ];
    const OTHER: &[&str] = &[
        "date",
        "sent",
        "to",
        "cc",
        "bcc",
        "reply-to",
        "gesendet",
        "datum",
        "an",
        "kopie",
        "envoyé",
        "à",
        "enviado",
        "enviado el",
        "para",
        "fecha",
        "inviato",
        "a",
        "data",
        "verzonden",
        "aan",
        "enviada",
        "enviada em",
        "wysłano",
        "do",
        "dw",
        "message-id",
    ];
    let label = |line: &Line| -> Option<(String, Span)> {
        let words = line.body.of(text);
        let (name, value) = words.split_once(':')?;
        let name = name
            .trim_matches(|c: char| c == '*' || c.is_whitespace())
            .to_lowercase();
        let value = value.trim_start_matches(['*', ' ', '\t', '\u{a0}']);
        (!name.is_empty() && name.len() < 20)
            .then(|| (name, Span::new(line.body.end - value.len(), line.body.end)))
    };
    let first = lines[at];
    let (name, _) = label(&first)?;
    let head =
        |n: &str| FROM.contains(&n) || SUBJECT.contains(&n) || OTHER.contains(&n) || known(n);
    if !head(&name) {
        return None;
    }
    let (mut count, mut from, mut subject, mut others) = (0, None, false, 0);
    while let Some(line) = lines.get(at + count) {
        // a head has a dozen lines; a list of labels as long as this is none
        if count > 60 || line.body.is_empty() || line.depth != first.depth || line.aside {
            break;
        }
        match label(line) {
            Some((n, value)) if FROM.contains(&&*n) => from = from.or(Some(value)),
            Some((n, _)) if SUBJECT.contains(&&*n) => subject = true,
            Some((n, _)) if OTHER.contains(&&*n) || known(&n) => others += 1,
            _ => break,
        }
        count += 1;
    }
    let from = from?;
    let address = Span::new(first.body.start, lines[at + count - 1].body.end)
        .of(text)
        .contains('@');
    // two of the three prove it
    let proofs = [subject, address, others > 0]
        .iter()
        .filter(|p| **p)
        .count();
    if proofs < 2 {
        return None;
    }
    let words = from.of(text);
    let name = person(words).map(|name| {
        let place = match words.find(&name) {
            Some(i) => Span::new(from.start + i, from.start + i + name.len()),
            None => from,
        };
        Spanned::new(name, place)
    });
    Some((count, name))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn asides(text: &str) -> (Vec<bool>, Vec<Option<String>>) {
        let mut lines = super::super::lines::lines(text);
        let mut turns = Vec::new();
        mark(text, &mut lines, &mut turns, false);
        (
            lines.iter().map(|l| l.aside).collect(),
            turns
                .into_iter()
                .map(|t| t.observer.map(|o| o.value))
                .collect(),
        )
    }

    #[test]
    fn attributions_in_eight_languages() {
        for line in [
            "On Wed, 6 Mar 2024 at 08:15, R. Quill <quill@section.example> wrote:",
            "On Wed, 6 Mar 2024 at 08:15, R. Quill\n<quill@section.example> wrote:",
            "On 06/03/2024 08:15, R. Quill wrote:",
            "Am Mi., 6. März 2024 um 08:15 Uhr schrieb R. Quill <quill@section.example>:",
            "Am 06.03.24 um 08:15 schrieb R. Quill:",
            "Le mer. 6 mars 2024 à 08:15, R. Quill <quill@section.example> a écrit :",
            "El mié, 6 mar 2024 a las 8:15, R. Quill (<quill@section.example>) escribió:",
            "Il giorno mer 6 mar 2024 alle ore 08:15 R. Quill <quill@section.example> ha scritto:",
            "Op wo 6 mrt 2024 om 08:15 schreef R. Quill <quill@section.example>:",
            "Em qua., 6 de mar. de 2024 às 08:15, R. Quill <quill@section.example> escreveu:",
            "śr., 6 mar 2024 o 08:15 R. Quill <quill@section.example> napisał(a):",
            "W dniu 6.03.2024 o 08:15, R. Quill pisze:",
        ] {
            let text = format!("{line}\n> X 1\nmine\n");
            let (aside, turns) = asides(&text);
            let n = line.lines().count();
            assert!(aside[..n].iter().all(|a| *a), "{line}");
            assert!(!aside[n..].iter().any(|a| *a), "{line}");
            // the quoted one, then the writer again
            assert_eq!(turns.len(), 2, "{line}");
            if line.contains(" <") || line.contains("\n<") {
                assert_eq!(turns[0].as_deref(), Some("R. Quill"), "{line}");
            }
        }
    }

    #[test]
    fn forwarded_heads_and_signatures() {
        let text = "See below.\n-----Original Message-----\nFrom: R. Quill <quill@section.example>\nSent: Wednesday, March 6, 2024 08:15\nTo: M. Vane\nSubject: X 1 at 17 40\n\nX 1\n-- \nR. Quill\n";
        let (aside, turns) = asides(text);
        assert_eq!(
            aside,
            [
                false, true, true, true, true, true, false, false, true, true
            ]
        );
        assert_eq!(turns, [Some("R. Quill".to_string())]);
        // labels of a report, and prose that ends in a colon
        for text in [
            "Date: 2024 Mar 5\nObserver: R. Quill\n",
            "De: -24 18 33\nData: 2024 Mar 5\n",
            "On 2024 Mar 5 I found:\nX 1\n",
            "--\nX 1\n",
        ] {
            assert!(!asides(text).0.iter().any(|a| *a), "{text}");
        }
    }
}
