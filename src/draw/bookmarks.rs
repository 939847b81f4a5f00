//! Where a reader can jump to on a finished sheet, and what each of its marks is.

use super::paper::Area;
use crate::place::{BarType, SlabModel};
use crate::scene::{Bookmark, Scene, first_call_outs, seen_from};

/// Bookmarks of a finished sheet: the sheet, its views in the order given, and under each view the marks whose first call-out stands in it.
/// Marks outside every view come last, straight under the sheet.
pub fn bookmarks(scene: &Scene, title: &str, views: &[(String, Area)]) -> Vec<Bookmark> {
    let view = |at: [f64; 2]| views.iter().position(|(_, area)| area.holds(&Area::new(at, at)));
    let called = first_call_outs(std::iter::once(scene));
    let found: Vec<(&str, [f64; 2], Option<usize>)> = called.into_iter().filter_map(|(mark, (_, c))| c.at().map(|at| (mark, at, view(at)))).collect();
    let of_view = |view: Option<usize>, level: u8| {
        let own = found.iter().filter(move |(.., v)| *v == view);
        own.map(move |(mark, at, _)| Bookmark { title: scene.names.get(*mark).cloned().unwrap_or_else(|| format!("mark {mark}")), at: seen_from(*at), level })
    };
    let mut list = vec![Bookmark { title: title.into(), at: [0.0, 0.0], level: 0 }];
    for (i, (name, area)) in views.iter().enumerate() {
        list.push(Bookmark { title: name.clone(), at: area.min, level: 1 });
        list.extend(of_view(Some(i), 2));
    }
    list.extend(of_view(None, 1));
    list
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
