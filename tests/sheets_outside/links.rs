//! The PDFs as another program's objects: bookmarks in three levels, links both ways, pages in order.

use crate::samples::{SAMPLES, documents, sample};
use lopdf::{Dictionary, Document, Object, ObjectId};
use std::collections::BTreeMap;

fn pdf(name: &str, suffix: &str) -> Document {
    let file = documents(name).into_iter().find(|f| f.name.ends_with(suffix)).unwrap();
    Document::load_mem(&file.bytes).unwrap()
}

fn dictionary(file: &Document, id: ObjectId) -> &Dictionary {
    file.get_object(id).unwrap().as_dict().unwrap()
}

/// Titles of the entries under one, with their depth, in order; siblings are followed both ways.
fn entries(file: &Document, of: ObjectId, depth: usize, list: &mut Vec<(usize, String, ObjectId)>) {
    let mut next = dictionary(file, of).get(b"First").and_then(Object::as_reference).ok();
    let mut before = None;
    while let Some(id) = next {
        let entry = dictionary(file, id);
        assert_eq!(entry.get(b"Parent").and_then(Object::as_reference).unwrap(), of);
        assert_eq!(entry.get(b"Prev").and_then(Object::as_reference).ok(), before);
        let destination = entry.get(b"Dest").unwrap().as_array().unwrap();
        assert_eq!(destination[1].as_name().unwrap(), b"XYZ");
        list.push((depth, String::from_utf8_lossy(entry.get(b"Title").unwrap().as_str().unwrap()).into_owned(), destination[0].as_reference().unwrap()));
        entries(file, id, depth + 1, list);
        before = Some(id);
        next = entry.get(b"Next").and_then(Object::as_reference).ok();
    }
    assert_eq!(dictionary(file, of).get(b"Last").and_then(Object::as_reference).ok(), before);
}

fn outline(file: &Document) -> Vec<(usize, String, ObjectId)> {
    let root = file.catalog().unwrap().get(b"Outlines").and_then(Object::as_reference).unwrap();
    let mut list = Vec::new();
    entries(file, root, 0, &mut list);
    list
}

#[test]
fn bookmarks_lead_from_sheet_to_view_to_mark() {
    for name in SAMPLES {
        let set = sample(name);
        let file = pdf(name, "sheet.pdf");
        let outline = outline(&file);
        assert_eq!(outline.iter().filter(|(depth, ..)| *depth == 0).count(), file.get_pages().len(), "{name}: one for each sheet");
        assert!(outline.iter().filter(|(depth, ..)| *depth == 1).count() >= 3, "{name}: views");
        for (_, bar) in set.model.bars() {
            let title = format!("mark {}, {}", bar.mark, bar.type_size());
            assert!(outline.iter().any(|(depth, t, _)| *depth == 2 && t.starts_with(&title)), "{name}: {title} has no bookmark under a view");
        }
        assert_eq!(file.catalog().unwrap().get(b"PageMode").unwrap().as_name().unwrap(), b"UseOutlines");
    }
}

/// Links of each page: rectangle and page it leads to.
fn links(file: &Document) -> BTreeMap<u32, Vec<([f32; 4], ObjectId)>> {
    let of_page = |id: ObjectId| {
        let list = dictionary(file, id).get(b"Annots").and_then(Object::as_array).cloned().unwrap_or_default();
        let link = |annotation: Object| {
            let link = dictionary(file, annotation.as_reference().unwrap());
            assert_eq!(link.get(b"Subtype").unwrap().as_name().unwrap(), b"Link");
            assert!(link.get(b"Border").unwrap().as_array().unwrap().iter().all(|o| o.as_i64().unwrap() == 0), "a border would print");
            let rect: Vec<f32> = link.get(b"Rect").unwrap().as_array().unwrap().iter().map(|o| o.as_float().unwrap()).collect();
            (rect.try_into().unwrap(), link.get(b"Dest").unwrap().as_array().unwrap()[0].as_reference().unwrap())
        };
        list.into_iter().map(link).collect()
    };
    file.get_pages().into_iter().map(|(number, id)| (number, of_page(id))).collect()
}

#[test]
fn every_call_out_of_the_set_leads_to_its_row_and_every_row_back() {
    for name in SAMPLES {
        let set = sample(name);
        let sheets = slabwright::draw::sheets(&set.job, &set.model, &set.checks);
        let schedule = slabwright::draw::schedule(&set.job, &set.model, &set.checks);
        let file = pdf(name, "set.pdf");
        let pages = file.get_pages();
        assert_eq!(pages.len(), sheets.len() + schedule.len(), "{name}: sheets, then schedule");
        let links = links(&file);
        for (i, sheet) in sheets.iter().enumerate() {
            let own = &links[&(i as u32 + 1)];
            assert_eq!(own.len(), sheet.call_outs().count(), "{name}: sheet {}", i + 1);
            for (([left, bottom, right, top], to), call_out) in own.iter().zip(sheet.call_outs()) {
                assert!(left < right && bottom < top && *left >= 0.0 && f64::from(*top) * 25.4 / 72.0 <= sheet.height, "{name}: {}", call_out.text);
                let row = schedule.iter().position(|s| s.rows.iter().any(|r| r.mark == call_out.mark)).unwrap();
                assert_eq!(*to, pages[&((sheets.len() + row) as u32 + 1)], "{name}: {} leads elsewhere", call_out.text);
            }
        }
        let back: usize = (sheets.len()..pages.len()).map(|i| links[&(i as u32 + 1)].len()).sum();
        assert_eq!(back, set.model.bars().count(), "{name}: rows that lead back");
        for (i, page) in schedule.iter().enumerate() {
            for ((_, to), row) in links[&((sheets.len() + i) as u32 + 1)].iter().zip(&page.rows) {
                let sheet = sheets.iter().position(|s| s.call_outs().any(|c| c.mark == row.mark && c.number().is_some())).unwrap();
                assert_eq!(*to, pages[&(sheet as u32 + 1)], "{name}: mark {} leads elsewhere", row.mark);
            }
        }
        let titles: Vec<String> = outline(&file).into_iter().filter(|(depth, ..)| *depth == 0).map(|(_, title, _)| title).collect();
        assert_eq!(titles.len(), pages.len());
        assert!(
            titles[0].starts_with("Sheet 1") && titles.iter().any(|t| t == "Schedule, sheet 1") && titles.last().unwrap().starts_with("Steel summary"),
            "{titles:?}"
        );
    }
}

#[test]
fn a_sheet_or_a_schedule_alone_has_no_links() {
    for suffix in ["sheet.pdf", "schedule.pdf"] {
        assert!(links(&pdf("orchard-annexe", suffix)).values().all(Vec::is_empty), "{suffix}");
    }
}
