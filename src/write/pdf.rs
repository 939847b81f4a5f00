//! Scenes as a PDF: one page each, layers a viewer can switch, bookmarks, real text in the shipped font. Same scenes, same bytes.

use crate::scene::{Layer, Pen, Scene, Shape};
use crate::tables::font::{CAPITAL, face};
use crate::write::pages;
use crate::write::svg::dashes;
use lopdf::{Dictionary, Object, StringFormat};
use printpdf::{
    Color, FontId, Greyscale, LayerInternalId, Line, LineCapStyle, LineDashPattern, LinePoint, Mm, Op, PaintMode, ParsedFont, PdfDocument, PdfFont,
    PdfFontHandle, PdfPage, PdfSaveOptions, Point, Polygon, PolygonRing, Pt, TextItem, TextMatrix, WindingOrder,
};

const POINTS_PER_MM: f64 = 72.0 / 25.4;
/// Six capitals and a plus sign: the name of an embedded subset (ISO 32000 9.6.4).
const FONT_NAME: &str = "SLABWR+RobotoCondensed-Regular";
const PRODUCER: &str = concat!("slabwright ", env!("CARGO_PKG_VERSION"));

/// The bytes of a PDF. Errors where the shipped font cannot be read or the file not be put together.
pub fn write(scenes: &[&Scene], date: (u16, u8, u8), title: &str, subject: &str) -> Result<Vec<u8>, String> {
    let mut document = PdfDocument::new(title);
    let mut font = ParsedFont::from_bytes(face().bytes, 0, &mut Vec::new()).ok_or("the shipped font cannot be read")?;
    font.font_name = Some(FONT_NAME.to_string());
    document.resources.fonts.map.insert(FontId("F0".into()), PdfFont::new(font));
    for (i, layer) in Layer::ALL.iter().enumerate() {
        let mut own = printpdf::Layer::new(layer.name());
        own.creator = PRODUCER.into();
        document.resources.layers.map.insert(LayerInternalId(format!("L{i}")), own);
    }
    document.metadata.info.creator = PRODUCER.into();
    document.metadata.info.producer = PRODUCER.into();
    document.metadata.info.subject = subject.into();
    for scene in scenes {
        document.pages.push(PdfPage::new(Mm(scene.width as f32), Mm(scene.height as f32), page(scene)));
    }
    let options = PdfSaveOptions { optimize: true, subset_fonts: false, secure: true, image_optimization: None };
    let mut file = document.to_lopdf_document(&options, &mut Vec::new());
    pages::join(&mut file, scenes)?;
    repair(&mut file, date)?;
    let mut bytes = Vec::new();
    file.save_to(&mut bytes).map_err(|e| e.to_string())?;
    Ok(bytes)
}

/// What the library leaves out or writes amiss: version, dates, identifiers that differ from run to run.
fn repair(file: &mut lopdf::Document, date: (u16, u8, u8)) -> Result<(), String> {
    file.version = "1.7".into();
    let fault = |e: lopdf::Error| e.to_string();
    let stamp = Object::String(format!("D:{:04}{:02}{:02}000000Z", date.0, date.1, date.2).into_bytes(), StringFormat::Literal);
    if let Ok(info) = file.trailer.get(b"Info").and_then(Object::as_reference) {
        let info: &mut Dictionary = file.get_object_mut(info).and_then(Object::as_dict_mut).map_err(fault)?;
        for key in ["GTS_PDFXVersion", "Identifier", "Trapped"] {
            info.remove(key.as_bytes());
        }
        info.set("CreationDate", stamp.clone());
        info.set("ModDate", stamp);
    }
    let catalog = file.catalog_mut().map_err(fault)?;
    catalog.set("Lang", Object::String(b"en-GB".to_vec(), StringFormat::Literal));
    file.compress();
    let id = Object::String(identifier(file), StringFormat::Hexadecimal);
    file.trailer.set("ID", Object::Array(vec![id.clone(), id]));
    Ok(())
}

/// Sixteen bytes from the contents of every stream: the same for the same drawing.
fn identifier(file: &lopdf::Document) -> Vec<u8> {
    let fnv = |seed: u64| {
        file.objects
            .values()
            .filter_map(|o| o.as_stream().ok())
            .flat_map(|s| &s.content)
            .fold(seed, |hash, byte| (hash ^ u64::from(*byte)).wrapping_mul(0x0100_0000_01b3))
    };
    [fnv(0xcbf2_9ce4_8422_2325), fnv(0x9e37_79b9_7f4a_7c15)].iter().flat_map(|h| h.to_be_bytes()).collect()
}

/// A length in points, to a thousandth.
pub(super) fn points(mm: f64) -> f32 {
    ((mm * POINTS_PER_MM * 1000.0).round() / 1000.0) as f32
}

/// What was set last, so that only changes are written.
struct Ink {
    pen: Option<Pen>,
    height: f64,
}

fn page(scene: &Scene) -> Vec<Op> {
    let black = || Color::Greyscale(Greyscale { percent: 0.0, icc_profile: None });
    let mut ops = vec![Op::SetOutlineColor { col: black() }, Op::SetFillColor { col: black() }, Op::SetLineCapStyle { cap: LineCapStyle::Butt }];
    let mut ink = Ink { pen: None, height: scene.height };
    for (i, layer) in Layer::ALL.iter().enumerate() {
        let own: Vec<&Shape> = scene.items.iter().filter(|item| item.layer == *layer).map(|item| &item.shape).collect();
        if own.is_empty() {
            continue;
        }
        ops.push(Op::BeginLayer { layer_id: LayerInternalId(format!("L{i}")) });
        for shape in own {
            draw(&mut ops, shape, &mut ink);
        }
        ops.push(Op::EndLayer);
    }
    ops
}

fn point(at: [f64; 2], ink: &Ink) -> Point {
    Point { x: Pt(points(at[0])), y: Pt(points(ink.height - at[1])) }
}

fn straight(line: &[[f64; 2]], ink: &Ink) -> Vec<LinePoint> {
    line.iter().map(|p| LinePoint { p: point(*p, ink), bezier: false }).collect()
}

fn set_pen(ops: &mut Vec<Op>, pen: Pen, ink: &mut Ink) {
    if ink.pen == Some(pen) {
        return;
    }
    ops.push(Op::SetOutlineThickness { pt: Pt(points(pen.width)) });
    if ink.pen.map(|p| p.dash) != Some(pen.dash) {
        let pattern: Vec<f32> = dashes(pen.dash).unwrap_or(&[]).iter().map(|d| points(*d)).collect();
        ops.push(Op::SetLineDashPattern { dash: LineDashPattern::new(0.0, &pattern) });
    }
    ink.pen = Some(pen);
}

fn draw(ops: &mut Vec<Op>, shape: &Shape, ink: &mut Ink) {
    match shape {
        Shape::Line { points, closed, pen } => {
            set_pen(ops, *pen, ink);
            ops.push(Op::DrawLine { line: Line { points: straight(points, ink), is_closed: *closed } });
        }
        Shape::Fill { points } => ops.push(filled(straight(points, ink))),
        Shape::Circle { centre, radius, pen, filled: is_filled } => {
            let ring = circle(*centre, *radius, ink);
            if *is_filled {
                ops.push(filled(ring.clone()));
            }
            if let Some(pen) = pen {
                set_pen(ops, *pen, ink);
                ops.push(Op::DrawLine { line: Line { points: ring, is_closed: true } });
            }
        }
        Shape::Text { at, height, text, anchor, upward } => {
            let width = face().width(text, *height);
            let back = anchor.before() * width;
            let at = if *upward { [at[0], at[1] + back] } else { [at[0] - back, at[1]] };
            let p = point(at, ink);
            let turn: [f32; 4] = if *upward { [0.0, 1.0, -1.0, 0.0] } else { [1.0, 0.0, 0.0, 1.0] };
            ops.push(Op::StartTextSection);
            ops.push(Op::SetFont { font: PdfFontHandle::External(FontId("F0".into())), size: Pt(points(height / CAPITAL)) });
            ops.push(Op::SetTextMatrix { matrix: TextMatrix::Raw([turn[0], turn[1], turn[2], turn[3], p.x.0, p.y.0]) });
            ops.push(Op::ShowText { items: vec![TextItem::Text(text.chars().filter(|c| !c.is_control()).collect())] });
            ops.push(Op::EndTextSection);
        }
    }
}

fn filled(points: Vec<LinePoint>) -> Op {
    Op::DrawPolygon { polygon: Polygon { rings: vec![PolygonRing { points }], mode: PaintMode::Fill, winding_order: WindingOrder::NonZero } }
}

/// A circle as four curves.
fn circle(centre: [f64; 2], r: f64, ink: &Ink) -> Vec<LinePoint> {
    const K: f64 = 0.552_284_75;
    let at = |x: f64, y: f64, bezier: bool| LinePoint { p: point([centre[0] + x * r, centre[1] + y * r], ink), bezier };
    let mut points = vec![at(1.0, 0.0, false)];
    for (a, b, to) in
        [((1.0, K), (K, 1.0), (0.0, 1.0)), ((-K, 1.0), (-1.0, K), (-1.0, 0.0)), ((-1.0, -K), (-K, -1.0), (0.0, -1.0)), ((K, -1.0), (1.0, -K), (1.0, 0.0))]
    {
        points.extend([at(a.0, a.1, true), at(b.0, b.1, true), at(to.0, to.1, false)]);
    }
    points
}
