//! Where a reader can jump to on a finished sheet, and what each of its marks is.

use super::paper::Area;
use crate::place::{BarType, SlabModel};
use crate::scene::{Bookmark, Scene, Shape};
use std::collections::BTreeMap;

/// Bookmarks of a finished sheet: the sheet, its views in the order given, and under each view the marks whose first call-out stands in it.
/// Marks outside every view come last, straight under the sheet.
pub fn bookmarks(scene: &Scene, title: &str, views: &[(String, Area)]) -> Vec<Bookmark> {
    // The call-out with the number before any other, else the first drawn.
    let mut called: BTreeMap<&str, (bool, [f64; 2])> = BTreeMap::new();
    for call_out in scene.call_outs() {
        let is_full = call_out.number().is_some();
        let is_better = called.get(call_out.mark).is_none_or(|(known, _)| is_full && !known);
        if let Shape::Text { at, .. } = call_out.shape
            && is_better
        {
            called.insert(call_out.mark, (is_full, *at));
        }
    }
    let view = |at: [f64; 2]| views.iter().position(|(_, area)| area.holds(&Area::new(at, at)));
    let found: Vec<(&str, [f64; 2], Option<usize>)> = called.into_iter().map(|(mark, (_, at))| (mark, at, view(at))).collect();
    let of_view = |view: Option<usize>, level: u8| {
        let own = found.iter().filter(move |(.., v)| *v == view);
        own.map(move |(mark, at, _)| Bookmark { title: scene.names.get(*mark).cloned().unwrap_or_else(|| format!("mark {mark}")), at: near(*at), level })
    };
    let mut list = vec![Bookmark { title: title.into(), at: [0.0, 0.0], level: 0 }];
    for (i, (name, area)) in views.iter().enumerate() {
        list.push(Bookmark { title: name.clone(), at: area.min, level: 1 });
        list.extend(of_view(Some(i), 2));
    }
    list.extend(of_view(None, 1));
    list
}

/// The corner from which a text is seen with something round it.
fn near(at: [f64; 2]) -> [f64; 2] {
    [(at[0] - 40.0).max(0.0), (at[1] - 30.0).max(0.0)]
}

/// Gives a scene the role and the name of every mark of a slab.
pub fn name_marks(scene: &mut Scene, model: &SlabModel) {
    for bar in &model.bars {
        name_mark(scene, bar);
    }
}

pub fn name_mark(scene: &mut Scene, bar: &BarType) {
    scene.roles.insert(bar.mark.clone(), bar.role.name().to_string());
    scene.names.insert(bar.mark.clone(), name(bar));
}

/// A mark in words.
pub fn name(bar: &BarType) -> String {
    let layer = match bar.layer.name() {
        "E" => "edges".to_string(),
        name => name.to_string(),
    };
    format!("mark {}, {}, {layer}, {}", bar.mark, bar.type_size(), bar.role.name().replace('-', " "))
}
