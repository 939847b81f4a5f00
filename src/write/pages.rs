//! What joins the pages of a PDF: the outline of bookmarks, and links between a mark on a sheet and its row in the schedule.

use crate::scene::{Scene, Shape, first_call_outs, seen_from};
use crate::tables::font::{face, text_box};
use crate::write::pdf::points;
use lopdf::{Dictionary, Document, Object, ObjectId, StringFormat, dictionary};
use std::collections::BTreeMap;

/// A page as it stands in the file.
struct Page<'s> {
    id: ObjectId,
    scene: &'s Scene,
}

/// Adds the outline and the links to a file whose pages are the scenes, in order.
pub fn join(file: &mut Document, scenes: &[&Scene]) -> Result<(), String> {
    let ids: Vec<ObjectId> = file.get_pages().into_values().collect();
    let pages: Vec<Page> = ids.into_iter().zip(scenes).map(|(id, scene)| Page { id, scene }).collect();
    outline(file, &pages)?;
    links(file, &pages)
}

/// A point of a page in points, y up.
fn place(page: &Page, at: [f64; 2]) -> [Object; 2] {
    [Object::Real(points(at[0])), Object::Real(points(page.scene.height - at[1]))]
}

/// "Show this page with this point in the upper left corner, at the magnification there is."
fn destination(page: &Page, at: [f64; 2]) -> Object {
    let [x, y] = place(page, at);
    Object::Array(vec![Object::Reference(page.id), Object::Name(b"XYZ".to_vec()), x, y, Object::Null])
}

/// Text outside the pages: plain where it is ASCII, else UTF-16 with its byte order mark (ISO 32000 7.9.2.2).
fn text(text: &str) -> Object {
    let bytes =
        if text.is_ascii() { text.as_bytes().to_vec() } else { [0xFEFFu16].into_iter().chain(text.encode_utf16()).flat_map(u16::to_be_bytes).collect() };
    Object::String(bytes, StringFormat::Literal)
}

/// A bookmark of the outline, its parent as an index into the same list.
struct Entry {
    title: String,
    destination: Object,
    level: u8,
    parent: Option<usize>,
    id: ObjectId,
}

fn outline(file: &mut Document, pages: &[Page]) -> Result<(), String> {
    let mut entries: Vec<Entry> = Vec::new();
    for page in pages {
        // A page opens a branch of its own, whatever the page before it ended with.
        let start = entries.len();
        for bookmark in &page.scene.bookmarks {
            let parent = (start..entries.len()).rev().find(|i| entries[*i].level < bookmark.level);
            let id = file.new_object_id();
            entries.push(Entry { title: bookmark.title.clone(), destination: destination(page, bookmark.at), level: bookmark.level, parent, id });
        }
    }
    if entries.is_empty() {
        return Ok(());
    }
    let root = file.new_object_id();
    let mut branches: BTreeMap<Option<usize>, Vec<ObjectId>> = BTreeMap::new();
    let mut places: Vec<usize> = Vec::new();
    for entry in &entries {
        let branch = branches.entry(entry.parent).or_default();
        places.push(branch.len());
        branch.push(entry.id);
    }
    let children = |of: Option<usize>| branches.get(&of).map_or(&[][..], Vec::as_slice);
    for (i, entry) in entries.iter().enumerate() {
        let siblings = children(entry.parent);
        let own = places[i];
        let parent = entry.parent.map_or(root, |p| entries[p].id);
        let mut item = dictionary! { "Title" => text(&entry.title), "Parent" => parent, "Dest" => entry.destination.clone() };
        if own > 0 {
            item.set("Prev", siblings[own - 1]);
        }
        if let Some(next) = siblings.get(own + 1) {
            item.set("Next", *next);
        }
        // Pages open to their views; views stay closed, or the marks would hide the pages after them.
        let inner = children(Some(i));
        ends(&mut item, inner, if entry.level == 0 { 1 } else { -1 });
        file.objects.insert(entry.id, Object::Dictionary(item));
    }
    let tops = children(None);
    let shown = entries.iter().filter(|e| e.parent.is_none_or(|p| entries[p].level == 0)).count();
    let mut item = dictionary! { "Type" => "Outlines" };
    ends(&mut item, tops, 1);
    item.set("Count", shown as i64);
    file.objects.insert(root, Object::Dictionary(item));
    let catalog = file.catalog_mut().map_err(|e| e.to_string())?;
    catalog.set("Outlines", root);
    catalog.set("PageMode", Object::Name(b"UseOutlines".to_vec()));
    Ok(())
}

/// First, last and number of the entries in a branch; the number is negative where the branch is shown closed.
fn ends(item: &mut Dictionary, inner: &[ObjectId], sign: i64) {
    if let (Some(first), Some(last)) = (inner.first(), inner.last()) {
        item.set("First", *first);
        item.set("Last", *last);
        item.set("Count", sign * inner.len() as i64);
    }
}

/// Call-outs lead to the rows of their marks, the marks in the schedule back to the first call-out; nothing where a file has only one of them.
fn links(file: &mut Document, pages: &[Page]) -> Result<(), String> {
    let mut rows: BTreeMap<&str, Object> = BTreeMap::new();
    for page in pages {
        for row in &page.scene.rows {
            rows.entry(&row.mark).or_insert_with(|| destination(page, seen_from(row.area[0])));
        }
    }
    let called = first_call_outs(pages.iter().map(|p| p.scene));
    let row = |mark: &str| rows.get(mark).cloned();
    let first = |mark: &str| called.get(mark).and_then(|(i, c)| corners(c.shape).map(|area| destination(&pages[*i], seen_from(area[0]))));
    let mut list: Vec<(ObjectId, Vec<Object>)> = Vec::new();
    for page in pages {
        let out = page.scene.call_outs().filter_map(|c| Some(link(page, corners(c.shape)?, row(c.mark)?)));
        let back = page.scene.rows.iter().filter_map(|r| Some(link(page, r.cell, first(&r.mark)?)));
        list.push((page.id, out.chain(back).collect()));
    }
    for (page, annotations) in list.into_iter().filter(|(_, a)| !a.is_empty()) {
        let annotations: Vec<Object> = annotations.into_iter().map(|a| Object::Reference(file.add_object(a))).collect();
        file.get_object_mut(page).and_then(Object::as_dict_mut).map_err(|e| e.to_string())?.set("Annots", annotations);
    }
    Ok(())
}

fn corners(shape: &Shape) -> Option<[[f64; 2]; 2]> {
    let Shape::Text { at, height, text, anchor, upward } = shape else { return None };
    Some(text_box(*at, *height, face().width(text, *height), anchor.before(), *upward))
}

fn link(page: &Page, [min, max]: [[f64; 2]; 2], to: Object) -> Object {
    let ([left, top], [right, bottom]) = (place(page, min), place(page, max));
    let border = vec![Object::Integer(0); 3];
    Object::Dictionary(dictionary! {
        "Type" => "Annot",
        "Subtype" => "Link",
        "Rect" => vec![left, bottom, right, top],
        "Border" => border,
        "Dest" => to,
    })
}
