//! What a section is made of and what joins it: a fill for each material, weld metal with its throat,
//! grooves, the slits between pieces that only touch, the seams' numbers, and a key that names them.

use sectile_mesh::domain::{Domain, DomainSide};
use sectile_mesh::{Point, Vector};

use super::outline;
use super::page::{INK, Label, MARGIN, Page, Pen};
use super::place::Ground;
use super::rect::Rect;
use super::section::MATERIAL;
use super::text::{self, SMALL};
use super::view::View;
use crate::section::materials_used;

/// Fills of materials, the first that of a section of one; they differ in lightness too.
const MATERIALS: [&str; 6] = [
    MATERIAL, "#d3c49d", "#8fa6b5", "#cfe0c3", "#b88f84", "#f4efe2",
];
/// Weld metal, and the lines that grooves fuse.
const METAL: &str = "#46505b";
/// The throat in weld metal.
const THROAT: &str = "#ffffff";
/// A sample of the key, mm.
const SWATCH: (f64, f64) = (5.0, 2.8);

/// Fills the pieces, those of each material in its own tone.
pub fn fill(page: &mut Page, domain: &Domain, view: &View) {
    for (k, material) in materials_used(domain).into_iter().enumerate() {
        let of_it = |piece: u32| domain.piece_materials.get(piece as usize) == Some(&material);
        let tone = MATERIALS[k % MATERIALS.len()];
        page.path(outline::region_path(domain, view, of_it), Pen::fill(tone));
    }
}

/// Draws slits, weld metal, throats and grooves.
pub fn draw(page: &mut Page, domain: &Domain, view: &View) {
    let slits = outline::sides_path(domain, view, |side| side.faying);
    if !slits.is_empty() {
        page.path(slits.clone(), Pen::line(INK, 0.65));
        page.path(slits, Pen::line("#ffffff", 0.25));
    }
    for seam in &domain.seams {
        let throat = outline::sides_path(domain, view, |side| is_throat(side, seam));
        if seam.metal.is_empty() {
            page.path(throat, Pen::line(METAL, 0.8));
        } else {
            let metal = outline::region_path(domain, view, |piece| seam.metal.contains(&piece));
            page.path(metal, Pen::line(METAL, 0.13).filled(METAL));
            page.path(throat, Pen::line(THROAT, 0.2));
        }
    }
}

fn is_throat(side: &DomainSide, seam: &sectile_mesh::domain::seam::Seam) -> bool {
    let hands = [side.left, side.right];
    seam.hands.iter().all(|hand| hands.contains(&Some(*hand)))
        && seam
            .throat
            .windows(2)
            .any(|ends| *ends == [side.from, side.to] || *ends == [side.to, side.from])
}

/// Where the seams are on the page, for labels to keep off them.
#[must_use]
pub fn places(domain: &Domain, view: &View) -> Vec<Rect> {
    domain
        .seams
        .iter()
        .map(|seam| on_page(domain, view, seam))
        .collect()
}

/// The rectangle about a seam's throat.
fn on_page(domain: &Domain, view: &View, seam: &sectile_mesh::domain::seam::Seam) -> Rect {
    seam.throat
        .iter()
        .filter_map(|&v| domain.points.get(v as usize))
        .fold(Rect::EMPTY, |rect, &p| rect.with(view.point(p)))
        .grown(0.4)
}

/// Writes the seams' numbers beside them, where there is room.
pub fn numbers(page: &mut Page, ground: &mut Ground, domain: &Domain, view: &View) {
    for (k, seam) in domain.seams.iter().enumerate() {
        let rect = on_page(domain, view, seam);
        let number = format!("s{}", k + 1);
        let mut label = Label::small(&number);
        label.backed = true;
        let size = label.rect(Point::default());
        let radius = 0.5 * rect.width().hypot(rect.height());
        if let Some(placed) = ground.place(rect.centre(), radius, size.width(), size.height()) {
            if let Some((a, b)) = placed.leader {
                page.line(a, b, Pen::line(INK, 0.13));
            }
            page.text(Point::new(placed.rect.x0, placed.rect.y0 - size.y0), &label);
        }
    }
}

/// What an entry of the key shows.
enum Sample {
    Fill(&'static str),
    Metal,
    Groove,
    Slit,
    Number(usize),
}

/// Draws the key below the cursor, where there is something to tell apart, and moves the cursor.
/// `materials`: names, by index.
pub fn key(page: &mut Page, domain: &Domain, materials: &[&str]) {
    let used = materials_used(domain);
    let mut entries: Vec<(Sample, String)> = Vec::new();
    if used.len() > 1 {
        for (k, &material) in used.iter().enumerate() {
            let name = materials.get(material).copied().unwrap_or_default();
            let fill = Sample::Fill(MATERIALS[k % MATERIALS.len()]);
            entries.push((fill, name.to_string()));
        }
    }
    if domain.seams.iter().any(|seam| !seam.metal.is_empty()) {
        entries.push((Sample::Metal, "weld metal, its throat white".into()));
    }
    if domain.seams.iter().any(|seam| seam.metal.is_empty()) {
        entries.push((Sample::Groove, "joined by a groove".into()));
    }
    if domain.sides.iter().any(|side| side.faying) {
        entries.push((Sample::Slit, "touching, not joined".into()));
    }
    for (k, seam) in domain.seams.iter().enumerate() {
        entries.push((Sample::Number(k + 1), seam.name.clone()));
    }
    if entries.is_empty() {
        return;
    }
    let right = page.width() - MARGIN;
    let h = SWATCH.1;
    let mut x = MARGIN;
    page.cursor += 1.0;
    for (sample, text) in entries {
        let w = match sample {
            Sample::Number(_) => 3.6,
            _ => SWATCH.0,
        };
        let text = text::shorten(&text, SMALL, false, right - MARGIN - w - 1.5);
        let mut label = Label::small(&text);
        label.rich = false;
        let wide = w + 1.5 + label.width();
        if x > MARGIN && x + wide > right {
            x = MARGIN;
            page.cursor += h + 1.6;
        }
        let rect = Rect::new(x, page.cursor, x + w, page.cursor + h);
        draw_sample(page, &sample, rect);
        let base = page.cursor + 0.5 * h + 0.36 * SMALL;
        page.text(Point::new(x + w + 1.5, base), &label);
        x += wide + 5.0;
    }
    page.cursor += h + 2.0;
}

fn draw_sample(page: &mut Page, sample: &Sample, rect: Rect) {
    let middle = rect.centre();
    let (a, b) = (Point::new(rect.x0, middle.y), Point::new(rect.x1, middle.y));
    match sample {
        Sample::Fill(tone) => page.rect(rect, Pen::line(INK, 0.13).filled(tone)),
        Sample::Metal => {
            page.rect(rect, Pen::fill(METAL));
            let rise = Vector::new(0.0, 0.5 * rect.height());
            let (low, high) = (middle + rise, middle + rise * -1.0);
            page.line(low, high, Pen::line(THROAT, 0.2));
        }
        Sample::Groove => page.line(a, b, Pen::line(METAL, 0.8)),
        Sample::Slit => {
            page.line(a, b, Pen::line(INK, 0.65));
            page.line(a, b, Pen::line("#ffffff", 0.25));
        }
        Sample::Number(number) => {
            let base = Point::new(rect.x0, middle.y + 0.36 * SMALL);
            let number = format!("s{number}");
            let mut label = Label::small(&number);
            label.bold = true;
            page.text(base, &label);
        }
    }
}
