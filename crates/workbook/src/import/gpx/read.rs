//! The file's XML to fixes.
//!
//! Only elements in the namespace of the outermost one count, whatever it is
//! and whatever prefix it has; what stands in extensions is passed over.
//! Entities other than XML's own five are never expanded: a document type is
//! passed over, and a text that names one keeps the name as it stands.

use super::super::geodesic::Position;
use super::super::{LONGEST_CELL, Refusal};
use super::{Fix, Gpx, Line, LineKind, MOST_FIXES, MOST_WAYPOINTS};
use quick_xml::errors::{Error, SyntaxError};
use quick_xml::escape::resolve_predefined_entity;
use quick_xml::events::{BytesStart, Event};
use quick_xml::name::ResolveResult;
use quick_xml::reader::NsReader;

/// Deepest nesting taken; a track needs five, extensions some more.
const DEEPEST: usize = 64;

/// An element that counts, or one that does not.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Tag {
    Gpx,
    Track,
    Segment,
    Route,
    Point,
    Waypoint,
    Name,
    Elevation,
    Other,
}

/// What an element is, by its name and the one it stands in.
fn tag(name: &str, within: Option<Tag>) -> Tag {
    match (within, name) {
        (None, "gpx") => Tag::Gpx,
        (Some(Tag::Gpx), "trk") => Tag::Track,
        (Some(Tag::Gpx), "rte") => Tag::Route,
        (Some(Tag::Gpx), "wpt") => Tag::Waypoint,
        (Some(Tag::Track), "trkseg") => Tag::Segment,
        (Some(Tag::Segment), "trkpt") | (Some(Tag::Route), "rtept") => Tag::Point,
        (Some(Tag::Track | Tag::Route | Tag::Point | Tag::Waypoint), "name") => Tag::Name,
        (Some(Tag::Point | Tag::Waypoint), "ele") => Tag::Elevation,
        _ => Tag::Other,
    }
}

/// What has been read so far.
struct State {
    open: Vec<Tag>,
    /// Namespace of the outermost element; empty for none.
    namespace: String,
    seen_root: bool,
    gpx: Gpx,
    /// Text of the name or elevation that is open.
    text: String,
    /// Whether the next fix begins a segment after the first.
    gap: bool,
    fixes: usize,
}

/// Reads the text of a file.
pub(super) fn read(text: &str) -> Result<Gpx, Refusal> {
    let mut reader = NsReader::from_str(text);
    reader.config_mut().expand_empty_elements = true;
    let mut state = State {
        open: Vec::new(),
        namespace: String::new(),
        seen_root: false,
        gpx: Gpx {
            lines: Vec::new(),
            waypoints: Vec::new(),
            doctype: false,
        },
        text: String::new(),
        gap: false,
        fixes: 0,
    };
    loop {
        let at = reader.buffer_position();
        let line = || line_of(text, at);
        let (namespace, event) = match reader.read_resolved_event() {
            Ok(read) => read,
            // All but one of these are something opened and never closed.
            Err(Error::Syntax(why)) if why != SyntaxError::InvalidBangMarkup => {
                return Err(Refusal::Cut {
                    line: line_of(text, u64::MAX),
                });
            }
            Err(why) => {
                return Err(Refusal::NotXml {
                    line: line_of(text, reader.error_position()),
                    // It may quote a name as long as the file.
                    why: why.to_string().chars().take(LONGEST_CELL).collect(),
                });
            }
        };
        match event {
            Event::Start(start) => {
                if state.open.len() >= DEEPEST {
                    return Err(Refusal::TooDeep { line: line() });
                }
                let namespace = match &namespace {
                    ResolveResult::Bound(name) => name.as_ref(),
                    ResolveResult::Unbound | ResolveResult::Unknown(_) => "",
                };
                state.start(&start, namespace)?;
            }
            Event::End(_) => state.end(),
            Event::Text(piece) => state.add(&piece.xml10_content()),
            Event::CData(piece) => state.add(&piece.xml10_content()),
            Event::GeneralRef(reference) => {
                let name = reference.xml10_content();
                match (
                    reference.resolve_char_ref(),
                    resolve_predefined_entity(&name),
                ) {
                    (Ok(Some(c)), _) => state.add(c.encode_utf8(&mut [0; 4])),
                    (_, Some(known)) => state.add(known),
                    _ => state.add(&format!("&{name};")),
                }
            }
            Event::DocType(_) => state.gpx.doctype = true,
            Event::Eof => break,
            Event::Empty(_) | Event::Comment(_) | Event::Decl(_) | Event::PI(_) => {}
        }
    }
    if !state.seen_root {
        return Err(Refusal::NotXml {
            line: 1,
            why: "no element".to_owned(),
        });
    }
    if !state.open.is_empty() {
        return Err(Refusal::Cut {
            line: line_of(text, u64::MAX),
        });
    }
    let mut gpx = state.gpx;
    gpx.lines.retain(|l| !l.fixes.is_empty());
    // Tracks before routes, each in the order of the file.
    gpx.lines.sort_by_key(|l| l.kind == LineKind::Route);
    Ok(gpx)
}

/// The line of the text a byte stands in, from 1.
fn line_of(text: &str, byte: u64) -> usize {
    let end = usize::try_from(byte).unwrap_or(usize::MAX).min(text.len());
    1 + text.as_bytes()[..end]
        .iter()
        .filter(|b| **b == b'\n')
        .count()
}

impl State {
    fn start(&mut self, start: &BytesStart<'_>, namespace: &str) -> Result<(), Refusal> {
        let name = start.local_name();
        let name: &str = name.as_ref();
        if self.open.is_empty() {
            // A namespace of any length would be compared with each element's.
            if self.seen_root || name != "gpx" || namespace.len() > LONGEST_CELL {
                return Err(Refusal::NotGpx {
                    root: name.chars().take(LONGEST_CELL).collect(),
                });
            }
            self.seen_root = true;
            namespace.clone_into(&mut self.namespace);
        }
        let tag = if namespace == self.namespace {
            tag(name, self.open.last().copied())
        } else {
            Tag::Other
        };
        match tag {
            Tag::Track => self.line(LineKind::Track),
            Tag::Route => self.line(LineKind::Route),
            Tag::Segment => {
                self.gap = self.gpx.lines.last().is_some_and(|l| !l.fixes.is_empty());
            }
            Tag::Point | Tag::Waypoint => {
                self.fixes += 1;
                if self.fixes > MOST_FIXES {
                    return Err(Refusal::TooManyFixes);
                }
                let fix = Fix {
                    position: position(start),
                    elevation: String::new(),
                    name: String::new(),
                    after_gap: std::mem::take(&mut self.gap) && tag == Tag::Point,
                };
                if tag == Tag::Waypoint {
                    self.gpx.waypoints.push(fix);
                    if self.gpx.waypoints.len() > MOST_WAYPOINTS {
                        return Err(Refusal::TooManyWaypoints);
                    }
                } else if let Some(line) = self.gpx.lines.last_mut() {
                    line.fixes.push(fix);
                }
            }
            Tag::Name | Tag::Elevation => self.text.clear(),
            Tag::Gpx | Tag::Other => {}
        }
        self.open.push(tag);
        Ok(())
    }

    fn line(&mut self, kind: LineKind) {
        self.gap = false;
        self.gpx.lines.push(Line {
            kind,
            name: String::new(),
            fixes: Vec::new(),
        });
    }

    fn add(&mut self, piece: &str) {
        if matches!(self.open.last(), Some(Tag::Name | Tag::Elevation)) {
            self.text.push_str(piece);
        }
    }

    fn end(&mut self) {
        let Some(tag) = self.open.pop() else { return };
        if !matches!(tag, Tag::Name | Tag::Elevation) {
            return;
        }
        let words: Vec<&str> = self
            .text
            .split(|c: char| c.is_whitespace() || c.is_control())
            .filter(|w| !w.is_empty())
            .collect();
        let mut text = words.join(" ");
        // What is that long is no name and no height.
        if text.chars().count() > LONGEST_CELL {
            text = text.chars().take(LONGEST_CELL).collect();
            text.push('…');
        }
        let line = self.gpx.lines.last_mut();
        let place = match (tag, self.open.last()) {
            (Tag::Name, Some(Tag::Track | Tag::Route)) => line.map(|l| &mut l.name),
            (tag, Some(within)) => {
                let fix = match within {
                    Tag::Waypoint => self.gpx.waypoints.last_mut(),
                    _ => line.and_then(|l| l.fixes.last_mut()),
                };
                fix.map(|f| match tag {
                    Tag::Name => &mut f.name,
                    _ => &mut f.elevation,
                })
            }
            _ => None,
        };
        if let Some(place) = place {
            *place = text;
        }
    }
}

/// Latitude and longitude of a fix, if both read as such.
fn position(start: &BytesStart<'_>) -> Option<Position> {
    let degrees = |name: &str, most: f64| {
        let attribute = start.try_get_attribute(name).ok().flatten()?;
        let value = attribute.value.trim().parse::<f64>().ok()?;
        (-most..=most).contains(&value).then_some(value)
    };
    Some(Position {
        latitude_deg: degrees("lat", 90.0)?,
        longitude_deg: degrees("lon", 180.0)?,
    })
}
