//! A DXF file's entities as pieces of text, with their lines, before the library reads them.
//!
//! The library skips what it does not know and what is faulty, and holds a whole file at about twenty
//! times its size. So it is given the wanted entities in batches, and what it makes of them is counted.

use std::collections::BTreeMap;

use crate::read::fault::Fault;

/// An entity: its kind, its line in the file and its text from there to the next entity.
#[derive(Clone, Copy, Debug)]
pub struct Record<'t> {
    /// As in the file: LINE, ARC, …
    pub kind: &'t str,
    /// Line of its kind, from 1.
    pub line: usize,
    /// Its pairs of lines, the first is `0` and the kind. Vertices of a POLYLINE included.
    pub text: &'t str,
    /// Vertices of a POLYLINE.
    pub vertices: usize,
}

/// A block: its head and what it holds.
#[derive(Clone, Debug)]
pub struct BlockText<'t> {
    /// The pairs of its head.
    pub head: Record<'t>,
    /// Its entities that can be traced.
    pub entities: Vec<Record<'t>>,
}

/// What a file holds.
#[derive(Clone, Debug, Default)]
pub struct Scan<'t> {
    /// The value of `$INSUNITS`, if the header states it.
    pub units: Option<&'t str>,
    /// The blocks.
    pub blocks: Vec<BlockText<'t>>,
    /// The drawing's own entities that can be traced.
    pub entities: Vec<Record<'t>>,
    /// The others of the drawing's own, by kind.
    pub ignored: BTreeMap<String, usize>,
}

/// Kinds that can be traced.
const WANTED: &[&str] = &[
    "LINE",
    "ARC",
    "CIRCLE",
    "LWPOLYLINE",
    "POLYLINE",
    "ELLIPSE",
    "SPLINE",
    "INSERT",
];

/// A pair of lines: the code, the value and where the pair starts and ends in the text.
struct Pair<'t> {
    code: i32,
    value: &'t str,
    line: usize,
    start: usize,
    end: usize,
}

struct Pairs<'t> {
    text: &'t str,
    at: usize,
    line: usize,
}

impl<'t> Pairs<'t> {
    fn line(&mut self) -> Option<&'t str> {
        let rest = &self.text[self.at..];
        if rest.is_empty() {
            return None;
        }
        let length = rest.find('\n').unwrap_or(rest.len());
        self.at += (length + 1).min(rest.len());
        self.line += 1;
        Some(rest[..length].trim_end_matches('\r'))
    }

    fn next(&mut self) -> Result<Option<Pair<'t>>, Fault> {
        let start = self.at;
        let Some(code) = self.line() else {
            return Ok(None);
        };
        if code.trim().is_empty() && self.text[self.at..].trim().is_empty() {
            return Ok(None);
        }
        let line = self.line;
        let code = code.trim().parse::<i32>().map_err(|_| {
            Fault::whole(
                format!(
                    "line {line} has \"{}\" where the code of a pair should be",
                    code.trim().chars().take(30).collect::<String>()
                ),
                "the file is damaged or no DXF text: export it again",
            )
        })?;
        let value = self.line().ok_or_else(|| cut_short(line))?;
        Ok(Some(Pair {
            code,
            value: value.trim(),
            line: self.line,
            start,
            end: self.at,
        }))
    }
}

fn cut_short(line: usize) -> Fault {
    Fault::whole(
        format!("the file ends after line {line} without EOF"),
        "it was cut short: export it again",
    )
}

/// Finds sections, blocks and entities.
///
/// # Errors
/// The text is no DXF or was cut short.
pub fn scan(text: &str) -> Result<Scan<'_>, Fault> {
    let mut pairs = Pairs {
        text,
        at: 0,
        line: 0,
    };
    let mut out = Scan::default();
    let mut section: Option<&str> = None;
    let mut named = false;
    let mut variable = "";
    // The block whose entities come next.
    let mut block: Option<usize> = None;
    loop {
        let Some(pair) = pairs.next()? else {
            return Err(cut_short(pairs.line));
        };
        let Some(inside) = section else {
            match (pair.code, pair.value) {
                (999, _) => {}
                (0, "EOF") => return Ok(out),
                (0, "SECTION") => (section, named) = (Some(""), false),
                (_, value) => {
                    return Err(Fault::whole(
                        format!(
                            "line {} has \"{}\" where a section should start",
                            pair.line,
                            value.chars().take(30).collect::<String>()
                        ),
                        "the file is damaged or no DXF: export it again",
                    ));
                }
            }
            continue;
        };
        if !named && pair.code == 2 {
            (section, named) = (Some(pair.value), true);
            continue;
        }
        if pair.code == 0 && pair.value == "EOF" {
            return Err(cut_short(pair.line));
        }
        if pair.code == 0 && pair.value == "ENDSEC" {
            if let Some(BlockText { head, .. }) = block.and_then(|b| out.blocks.get(b)) {
                return Err(Fault::whole(
                    format!("the block that starts in line {} has no end", head.line),
                    "the file is damaged: export it again",
                ));
            }
            section = None;
            continue;
        }
        match inside {
            "HEADER" if pair.code == 9 => variable = pair.value,
            "HEADER" if pair.code == 70 && variable == "$INSUNITS" => {
                out.units = Some(pair.value);
            }
            "BLOCKS" if pair.code == 0 && pair.value == "BLOCK" => {
                block = Some(out.blocks.len());
                out.blocks.push(BlockText {
                    head: record(text, &pair),
                    entities: Vec::new(),
                });
            }
            "BLOCKS" if pair.code == 0 && pair.value == "ENDBLK" => block = None,
            "BLOCKS" => {
                let Some(block) = block.and_then(|b| out.blocks.get_mut(b)) else {
                    continue;
                };
                if pair.code == 0 {
                    entity(text, &pair, &mut block.entities, None);
                } else {
                    let last = block.entities.last_mut().unwrap_or(&mut block.head);
                    extend(text, last, &pair);
                }
            }
            "ENTITIES" if pair.code == 0 => {
                entity(text, &pair, &mut out.entities, Some(&mut out.ignored));
            }
            "ENTITIES" => {
                if let Some(last) = out.entities.last_mut() {
                    extend(text, last, &pair);
                }
            }
            _ => {}
        }
    }
}

fn record<'t>(text: &'t str, pair: &Pair<'t>) -> Record<'t> {
    Record {
        kind: pair.value,
        line: pair.line,
        text: &text[pair.start..pair.end],
        vertices: 0,
    }
}

/// Starts an entity, or goes on with a polyline by a vertex.
fn entity<'t>(
    text: &'t str,
    pair: &Pair<'t>,
    entities: &mut Vec<Record<'t>>,
    ignored: Option<&mut BTreeMap<String, usize>>,
) {
    if WANTED.contains(&pair.value) {
        entities.push(record(text, pair));
        return;
    }
    if pair.value == "VERTEX"
        && let Some(last) = entities.last_mut()
        && last.kind == "POLYLINE"
        && extend(text, last, pair)
    {
        last.vertices += 1;
        return;
    }
    if let Some(ignored) = ignored
        && !matches!(pair.value, "SEQEND" | "VERTEX")
    {
        *ignored.entry(pair.value.to_owned()).or_default() += 1;
    }
}

/// Whether an entity states all that its shape depends on: the library puts zeros for what is missing.
#[must_use]
pub fn complete(record: &Record<'_>) -> bool {
    let mut pairs = Pairs {
        text: record.text,
        at: 0,
        line: 0,
    };
    let mut counts = [0_usize; 52];
    let mut corners = None;
    while let Ok(Some(pair)) = pairs.next() {
        if let Some(count) = usize::try_from(pair.code)
            .ok()
            .and_then(|c| counts.get_mut(c))
        {
            *count += 1;
        }
        if pair.code == 90 {
            corners = pair.value.parse::<usize>().ok();
        }
    }
    let all = |codes: &[usize]| codes.iter().all(|&code| counts[code] > 0);
    match record.kind {
        "LINE" => all(&[10, 20, 11, 21]),
        "ARC" => all(&[10, 20, 40, 50, 51]),
        "CIRCLE" => all(&[10, 20, 40]),
        "ELLIPSE" => all(&[10, 20, 11, 21, 40]),
        "INSERT" => all(&[2, 10, 20]),
        "LWPOLYLINE" => counts[10] == counts[20] && corners == Some(counts[10]),
        "POLYLINE" => counts[10] == counts[20] && counts[10] >= record.vertices,
        _ => counts[10] == counts[20],
    }
}

/// Lets an entity's text reach to the end of the pair, if the pair follows it at once.
fn extend<'t>(text: &'t str, record: &mut Record<'t>, pair: &Pair<'t>) -> bool {
    // Both are parts of one text.
    let start = record.text.as_ptr() as usize - text.as_ptr() as usize;
    let follows = start + record.text.len() == pair.start;
    if follows {
        record.text = &text[start..pair.end];
    }
    follows
}
