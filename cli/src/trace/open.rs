//! A picture of where outlines stay open.

use std::fmt::Write;

use sectile_mesh::outline::side::Side;
use sectile_mesh::tree::{EMPTY, hull};

use super::chain::Opening;
use super::drawing::side_extent;
use super::number::{fixed, place, short};

/// Stands in every picture: a file that has it may be replaced.
pub const MARK: &str = "<!-- sectile trace: open outlines -->";

/// Width of the picture, pixels.
const WIDTH: f64 = 900.0;
/// Sides and gaps beyond these numbers are not drawn: nobody could tell them apart.
const MOST_SIDES: usize = 100_000;
const MOST_GAPS: usize = 500;

/// The drawing in grey, each gap in red with its number, ends and width.
#[must_use]
pub fn picture(sides: &[Side], openings: &[Opening], size: f64) -> String {
    let [x0, x1, y0, y1] = sides
        .iter()
        .fold(EMPTY, |extent, side| hull(extent, side_extent(side)));
    let margin = 0.06 * size;
    let scale = WIDTH / (x1 - x0 + 2.0 * margin);
    let height = (y1 - y0 + 2.0 * margin) * scale;
    let x = |v: f64| fixed((v - x0 + margin) * scale, 3);
    let y = |v: f64| fixed((y1 + margin - v) * scale, 3);
    let listed = openings.len().min(MOST_GAPS);
    let legend = 24.0 * (listed as f64 + 1.0);
    let mut text = String::new();
    let _ = writeln!(
        text,
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {} {}\" width=\"{}\">\n{MARK}\n\
         <rect width=\"100%\" height=\"100%\" fill=\"#ffffff\"/>",
        fixed(WIDTH, 0),
        fixed(height + legend, 1),
        fixed(WIDTH, 0),
    );
    text.push_str("<path fill=\"none\" stroke=\"#8a8a8a\" stroke-width=\"1.5\" d=\"");
    for side in sides.iter().take(MOST_SIDES) {
        let _ = write!(text, "M{} {}", x(side.from.x), y(side.from.y));
        match side.arc {
            None => {
                let _ = write!(text, "L{} {}", x(side.to.x), y(side.to.y));
            }
            Some(arc) => {
                // Two halves: the ends of a circle coincide.
                let r = fixed(arc.circle.radius * scale, 3);
                let sense = u8::from(arc.sweep < 0.0);
                for p in [super::loops::middle(side), side.to] {
                    let _ = write!(text, "A{r} {r} 0 0 {sense} {} {}", x(p.x), y(p.y));
                }
            }
        }
    }
    text.push_str("\"/>\n");
    for (i, opening) in openings.iter().take(MOST_GAPS).enumerate() {
        let (a, b) = (opening.from, opening.to);
        let _ = writeln!(
            text,
            "<path fill=\"none\" stroke=\"#c62828\" stroke-width=\"3\" d=\"M{} {}L{} {}\"/>",
            x(a.x),
            y(a.y),
            x(b.x),
            y(b.y)
        );
        for p in [a, b] {
            let _ = writeln!(
                text,
                "<circle cx=\"{}\" cy=\"{}\" r=\"6\" fill=\"none\" stroke=\"#c62828\" stroke-width=\"2\"/>",
                x(p.x),
                y(p.y)
            );
        }
        let middle = a.lerp(b, 0.5);
        let _ = writeln!(
            text,
            "<text x=\"{}\" y=\"{}\" dx=\"10\" dy=\"-10\" font-family=\"sans-serif\" font-size=\"16\" \
             fill=\"#c62828\">{}</text>",
            x(middle.x),
            y(middle.y),
            i + 1
        );
        let _ = writeln!(
            text,
            "<text x=\"12\" y=\"{}\" font-family=\"sans-serif\" font-size=\"15\" fill=\"#333333\">\
             {}: from {} to {}, {} wide</text>",
            fixed(height + 20.0 + 24.0 * i as f64, 1),
            i + 1,
            place(a, size),
            place(b, size),
            short(opening.width())
        );
    }
    text.push_str("</svg>\n");
    text
}
