//! PNG of a figure, lettered with the committed font alone, so that it looks the same everywhere.

use std::sync::{Arc, LazyLock};

use resvg::tiny_skia::{Pixmap, Transform};
use resvg::usvg::{Options, Tree, fontdb::Database};

/// DejaVu Sans, reduced to the scripts and signs that figures use; licence beside it.
const FACES: [&[u8]; 2] = [
    include_bytes!("font/DejaVuSans.ttf"),
    include_bytes!("font/DejaVuSans-Bold.ttf"),
];
const FAMILY: &str = "DejaVu Sans";

/// Resolutions from a screen's to that of a printing plate.
pub const DPI: std::ops::RangeInclusive<f64> = 50.0..=1200.0;
/// No picture has more pixels: 400 MB while it is drawn.
const MOST_PIXELS: f64 = 1e8;

/// Why there is no picture.
#[derive(Debug, thiserror::Error)]
pub enum PngError {
    /// The resolution is none.
    #[error("a resolution of {0} dpi: choose one from 50 to 1200")]
    Resolution(f64),
    /// The picture would not fit into memory.
    #[error(
        "a picture of {width:.0} × {height:.0} pixels is too large: choose a lower resolution or a smaller print width"
    )]
    TooLarge {
        /// Pixels from left to right.
        width: f64,
        /// Pixels from top to bottom.
        height: f64,
    },
    /// The text is no SVG.
    #[error("the figure could not be read: {0}")]
    Svg(#[from] resvg::usvg::Error),
    /// The pixels could not be packed.
    #[error("the picture could not be written: {0}")]
    Encode(#[from] png::EncodingError),
}

static FONTS: LazyLock<Arc<Database>> = LazyLock::new(|| {
    let mut fonts = Database::new();
    for face in FACES {
        fonts.load_font_data(face.to_vec());
    }
    fonts.set_sans_serif_family(FAMILY);
    Arc::new(fonts)
});

/// Draws an SVG whose size is given in millimetres at `dpi` dots an inch; the file says its own print
/// size.
///
/// # Errors
/// See [`PngError`].
pub fn render(svg: &str, dpi: f64) -> Result<Vec<u8>, PngError> {
    if !DPI.contains(&dpi) {
        return Err(PngError::Resolution(dpi));
    }
    let options = Options {
        dpi: dpi as f32,
        font_family: FAMILY.into(),
        fontdb: Arc::clone(&FONTS),
        ..Options::default()
    };
    let tree = Tree::from_str(svg, &options)?;
    let (width, height) = (tree.size().width().round(), tree.size().height().round());
    let too_large = || PngError::TooLarge {
        width: f64::from(width),
        height: f64::from(height),
    };
    if f64::from(width) * f64::from(height) > MOST_PIXELS {
        return Err(too_large());
    }
    let mut pixmap = Pixmap::new(width as u32, height as u32).ok_or_else(too_large)?;
    let fit = Transform::from_scale(width / tree.size().width(), height / tree.size().height());
    resvg::render(&tree, fit, &mut pixmap.as_mut());
    encode(&pixmap, dpi)
}

/// Figures stand on a white sheet, so that alpha says nothing and is left out.
fn encode(pixmap: &Pixmap, dpi: f64) -> Result<Vec<u8>, PngError> {
    let mut bytes = Vec::new();
    let mut encoder = png::Encoder::new(&mut bytes, pixmap.width(), pixmap.height());
    encoder.set_color(png::ColorType::Rgb);
    encoder.set_depth(png::BitDepth::Eight);
    let per_metre = (dpi / 0.0254).round() as u32;
    encoder.set_pixel_dims(Some(png::PixelDimensions {
        xppu: per_metre,
        yppu: per_metre,
        unit: png::Unit::Meter,
    }));
    let rgb: Vec<u8> = pixmap
        .pixels()
        .iter()
        .flat_map(|p| [p.red(), p.green(), p.blue()])
        .collect();
    let mut writer = encoder.write_header()?;
    writer.write_image_data(&rgb)?;
    writer.finish()?;
    Ok(bytes)
}

#[cfg(test)]
mod tests {
    #![allow(clippy::unwrap_used)]
    use super::*;
    use crate::figure::page::{Label, Page};
    use sectile_mesh::Point;

    fn decoded(bytes: &[u8]) -> (png::Info<'static>, Vec<u8>) {
        let mut reader = png::Decoder::new(std::io::Cursor::new(bytes))
            .read_info()
            .unwrap();
        let mut pixels = vec![0; reader.output_buffer_size().unwrap()];
        reader.next_frame(&mut pixels).unwrap();
        (reader.info().clone(), pixels)
    }

    fn sample(text: &str) -> String {
        let mut page = Page::new(60.0, "", "", "");
        page.text(Point::new(10.0, 20.0), &Label::new(text));
        page.cursor = 30.0;
        page.finish(&[], "").svg
    }

    #[test]
    fn size_in_pixels_and_in_print_follows_the_resolution() {
        let svg = sample("σ in MPa");
        for dpi in [72.0, 150.0, 300.0] {
            let (info, pixels) = decoded(&render(&svg, dpi).unwrap());
            assert_eq!(info.width, (60.0 / 25.4 * dpi).round() as u32);
            let dims = info.pixel_dims.unwrap();
            assert_eq!(dims.xppu, (dpi / 0.0254).round() as u32);
            assert!(pixels.iter().any(|&p| p < 80), "no ink");
            assert_eq!(pixels[..3], [255, 255, 255], "white sheet");
        }
    }

    #[test]
    fn every_sign_of_the_figures_has_a_glyph() {
        // A sign without a glyph leaves the sheet as it is or draws the box that stands for any.
        let ink = |text: &str| decoded(&render(&sample(text), 150.0).unwrap()).1;
        let missing = ink("\u{e000}");
        for sign in "στωθκαβ√×·−±≤°′∫²³⁴⁶⁻…→ÄßŁЖ".chars() {
            let drawn = ink(&sign.to_string());
            assert!(drawn.iter().any(|&p| p < 250), "{sign} is blank");
            assert_ne!(drawn, missing, "{sign} has no glyph");
        }
    }

    #[test]
    fn bold_is_bold() {
        let weight = |bold: bool| {
            let mut page = Page::new(60.0, "", "", "");
            let mut label = Label::new("Largest 355");
            label.bold = bold;
            page.text(Point::new(10.0, 20.0), &label);
            page.cursor = 30.0;
            let (_, pixels) = decoded(&render(&page.finish(&[], "").svg, 300.0).unwrap());
            pixels.iter().map(|&p| u64::from(255 - p)).sum::<u64>()
        };
        assert!(weight(true) as f64 > 1.2 * weight(false) as f64);
    }

    #[test]
    fn what_is_no_picture_is_refused() {
        assert!(matches!(render("<p/>", 150.0), Err(PngError::Svg(_))));
        for dpi in [0.0, f64::NAN, 1e6, -72.0] {
            assert!(matches!(
                render(&sample("x"), dpi),
                Err(PngError::Resolution(_))
            ));
        }
        let svg = sample("x").replace("60mm", "6000mm");
        assert!(matches!(
            render(&svg, 1200.0),
            Err(PngError::TooLarge { .. })
        ));
    }
}
