//! The drawing alone, as a picture that any program can open (SVG 1.1): with its title and the notice, in black on white.

use super::board::{DrawingView, Turned};
use super::path::tenths;
use super::sheet::paper_drawing;
use crate::exchange::NOTICE;
use crate::page::state::State;
use crate::page::state::paper::UNIT;

/// How the parts of the drawing look: as on paper.
const STYLE: &str = "path{fill:none;stroke:#111;stroke-width:1.4;stroke-linecap:round;stroke-linejoin:round}\
path.chord{stroke-width:2.6}path.joint,path.support{fill:#fff}path.dimension,path.tick{stroke-width:.8}\
path.aligned{stroke-dasharray:5 4}path.fault,path.doubtful,path.misfit{stroke:#a3201d}path.caution{stroke-dasharray:7 5}\
text{font:12px sans-serif;fill:#111;paint-order:stroke;stroke:#fff;stroke-width:3px;stroke-linejoin:round}\
text.struck{text-decoration:line-through}text.mend{font-weight:700}text.title{font-size:16px;font-weight:700}";

/// The drawing as SVG text.
pub fn svg_text(state: &State) -> String {
    let (drawing, on_paper) = paper_drawing(state);
    let (width, height) = on_paper.size;
    let (top, bottom) = (44.0, 34.0);
    let whole = height + top + bottom;
    let mut text = format!(
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {w} {h}\" width=\"{mm}mm\">\n\
         <style>{STYLE}</style>\n<rect width=\"100%\" height=\"100%\" fill=\"#fff\"/>\n\
         <text class=\"title\" x=\"20\" y=\"28\">{}</text>\n<g transform=\"translate(0 {})\">\n",
        escaped(&super::head_view(state).title),
        tenths(top),
        w = tenths(width),
        mm = tenths(width * UNIT),
        h = tenths(whole),
    );
    push_drawing(&mut text, &drawing);
    text.push_str(&format!(
        "</g>\n<text x=\"20\" y=\"{}\">Scale {}. {}</text>\n</svg>\n",
        tenths(whole - 14.0),
        escaped(&on_paper.scale),
        escaped(NOTICE)
    ));
    text
}

fn push_drawing(text: &mut String, drawing: &DrawingView) {
    for path in &drawing.paths {
        text.push_str(&format!("<path class=\"{}\" d=\"{}\"/>\n", path.class, path.d));
    }
    for label in &drawing.labels {
        text.push_str(&format!(
            "<text class=\"{}\" transform=\"{}\" text-anchor=\"{}\" dy=\"4.3\">{}</text>\n",
            label.class,
            Turned::attribute(label),
            label.anchor.name(),
            escaped(&label.text)
        ));
    }
}

/// Text that is never markup; control characters, which XML has no place for, are left out.
fn escaped(text: &str) -> String {
    let mut escaped = String::new();
    for letter in text.chars().filter(|letter| !letter.is_control()) {
        match letter {
            '<' => escaped.push_str("&lt;"),
            '>' => escaped.push_str("&gt;"),
            '&' => escaped.push_str("&amp;"),
            '"' => escaped.push_str("&quot;"),
            letter => escaped.push(letter),
        }
    }
    escaped
}
