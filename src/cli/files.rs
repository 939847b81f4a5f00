//! Reading job files and writing sets of documents: all files of a run go into place together, or none does.

use crate::read::MOST_BYTES;
use crate::write::Artifact;
use std::io::{Read, Write};
use std::path::{Path, PathBuf};

/// The bytes of a job file, never more than a little over the limit; the reader says so.
pub fn read(path: &str) -> Result<Vec<u8>, String> {
    let mut bytes = Vec::new();
    let most = MOST_BYTES as u64 + 1;
    let result = if path == "-" {
        std::io::stdin().lock().take(most).read_to_end(&mut bytes)
    } else {
        std::fs::File::open(path).and_then(|file| file.take(most).read_to_end(&mut bytes))
    };
    result.map(|_| bytes).map_err(|e| format!("{path}: cannot be read: {e}\n"))
}

/// Reads files named in a job, beside that job.
pub fn beside(job: &str) -> impl Fn(&str) -> Result<String, String> + use<> {
    let folder = if job == "-" { PathBuf::new() } else { Path::new(job).parent().map(Path::to_path_buf).unwrap_or_default() };
    move |name: &str| {
        let bytes = read(&folder.join(name).to_string_lossy()).map_err(|e| e.trim_end().to_string())?;
        crate::read::text(&bytes).map_err(|f| f.message)
    }
}

/// Whether a file was made by this program, by what it holds.
fn is_ours(path: &Path) -> bool {
    let mut head = Vec::new();
    let Ok(mut file) = std::fs::File::open(path) else { return false };
    let name = path.to_string_lossy();
    if name.ends_with(".pdf") {
        return file.read_to_end(&mut head).is_ok() && holds(&head, b"slabwright ");
    }
    if file.take(4096).read_to_end(&mut head).is_err() {
        return false;
    }
    if name.ends_with(".svg") {
        holds(&head, b"aria-labelledby=\"title desc\"")
    } else if name.ends_with(".json") {
        holds(&head, b"\"slabwright/model/")
    } else {
        head.starts_with(b"Member,Bar mark,") || head.starts_with(b"slab,layer,size_mm,")
    }
}

fn holds(bytes: &[u8], wanted: &[u8]) -> bool {
    bytes.windows(wanted.len()).any(|w| w == wanted)
}

/// A folder of new files beside their places; gone when dropped.
struct Staging(PathBuf);

impl Drop for Staging {
    fn drop(&mut self) {
        let _ = std::fs::remove_dir_all(&self.0);
    }
}

/// Writes all files of a run into `folder`: first beside their places, then moved. Old files come back where a move fails.
pub fn write_all(folder: &Path, files: &[Artifact], force: bool) -> Result<(), String> {
    let fault = |what: &str, path: &Path, e: std::io::Error| format!("{}: {what}: {e}\n", path.display());
    std::fs::create_dir_all(folder).map_err(|e| fault("cannot be made", folder, e))?;
    for file in files {
        let place = folder.join(&file.name);
        if place.symlink_metadata().is_ok_and(|m| !m.is_file()) {
            return Err(format!("{}: is there and is not a plain file. Nothing was written.\n", place.display()));
        }
        if place.exists() && !force && !is_ours(&place) {
            return Err(format!("{}: is there and was not made by this program; --force overwrites it. Nothing was written.\n", place.display()));
        }
    }
    let staging = Staging(folder.join(format!(".slabwright-{}", std::process::id())));
    let (new, old) = (staging.0.join("new"), staging.0.join("old"));
    for dir in [&new, &old] {
        std::fs::create_dir_all(dir).map_err(|e| fault("cannot be made", dir, e))?;
    }
    for file in files {
        let path = new.join(&file.name);
        let write = || -> std::io::Result<()> {
            let mut out = std::fs::File::create(&path)?;
            out.write_all(&file.bytes)?;
            out.sync_all()
        };
        write().map_err(|e| fault("cannot be written", &path, e))?;
    }
    let mut moved: Vec<(&str, bool)> = Vec::new();
    for file in files {
        let place = folder.join(&file.name);
        let had = place.exists();
        let step = || -> std::io::Result<()> {
            if had {
                std::fs::rename(&place, old.join(&file.name))?;
            }
            std::fs::rename(new.join(&file.name), &place)
        };
        if let Err(e) = step() {
            restore(folder, &old, &moved, &file.name);
            return Err(fault("cannot be put in place; the old files are back", &place, e));
        }
        moved.push((&file.name, had));
    }
    remove_stale_pages(folder, files);
    Ok(())
}

fn restore(folder: &Path, old: &Path, moved: &[(&str, bool)], last: &str) {
    let _ = std::fs::rename(old.join(last), folder.join(last));
    for (name, had) in moved {
        let place = folder.join(name);
        let _ = if *had { std::fs::rename(old.join(name), place) } else { std::fs::remove_file(place) };
    }
}

/// Pages of an earlier run that the sheet no longer has.
fn remove_stale_pages(folder: &Path, files: &[Artifact]) {
    for file in files {
        let Some(stem) = file.name.strip_suffix("-sheet-1.svg") else { continue };
        let page = |number: usize| format!("{stem}-sheet-{number}.svg");
        let mut number = 2;
        let is_new = |number: usize| files.iter().any(|f| f.name == page(number));
        let removed = |number: usize| {
            let place = folder.join(page(number));
            is_ours(&place) && std::fs::remove_file(&place).is_ok()
        };
        while is_new(number) || removed(number) {
            number += 1;
        }
    }
}
