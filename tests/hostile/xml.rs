//! A reader of XML that knows enough to tell a well-formed file from one that is not.

/// Ends with the first breach of well-formedness, if there is one.
pub fn well_formed(text: &str) -> Result<(), String> {
    if let Some(letter) = text.chars().find(|c| (*c as u32) < 0x20 && !"\t\n\r".contains(*c) || *c == '\u{fffe}' || *c == '\u{ffff}') {
        return Err(format!("letter U+{:04X} is not allowed", letter as u32));
    }
    let mut open: Vec<&str> = Vec::new();
    let mut rest = text;
    let mut roots = 0;
    while let Some(at) = rest.find('<') {
        content(&rest[..at], open.is_empty())?;
        rest = &rest[at..];
        let skip = [("<?", "?>"), ("<!--", "-->"), ("<![CDATA[", "]]>"), ("<!DOCTYPE", ">")].into_iter().find(|(start, _)| rest.starts_with(start));
        if let Some((_, end)) = skip {
            rest = rest.find(end).map(|e| &rest[e + end.len()..]).ok_or("something is not closed")?;
            continue;
        }
        let (tag, after) = tag(rest)?;
        rest = after;
        if let Some(name) = tag.strip_prefix('/') {
            let opened = open.pop().ok_or(format!("</{name}> closes nothing"))?;
            if opened != name.trim_end() {
                return Err(format!("</{name}> closes <{opened}>"));
            }
            continue;
        }
        let alone = tag.ends_with('/');
        let tag = tag.trim_end_matches('/');
        let name = tag.split(|c: char| c.is_ascii_whitespace()).next().unwrap();
        if !name.starts_with(|c: char| c.is_alphabetic()) {
            return Err(format!("<{name}> is no name"));
        }
        attributes(&tag[name.len()..])?;
        roots += usize::from(open.is_empty());
        if !alone {
            open.push(name);
        }
    }
    content(rest, true)?;
    if let Some(name) = open.pop() {
        return Err(format!("<{name}> is not closed"));
    }
    if roots == 1 { Ok(()) } else { Err(format!("{roots} roots")) }
}

/// The inside of a tag up to its `>` outside quotes, and what follows.
fn tag(text: &str) -> Result<(&str, &str), String> {
    let mut quote = None;
    for (at, letter) in text.char_indices().skip(1) {
        match (quote, letter) {
            (Some(q), l) if l == q => quote = None,
            (None, '"' | '\'') => quote = Some(letter),
            (None, '>') => return Ok((&text[1..at], &text[at + 1..])),
            (_, '<') => break,
            _ => {}
        }
    }
    Err(format!("a tag is not closed: {}", text.chars().take(60).collect::<String>()))
}

fn attributes(mut text: &str) -> Result<(), String> {
    let mut seen = Vec::new();
    while !text.trim_start().is_empty() {
        if !text.starts_with(|c: char| c.is_ascii_whitespace()) {
            return Err(format!("no blank before {text}"));
        }
        let (name, rest) = text.trim_start().split_once('=').ok_or(format!("no value in {text}"))?;
        if name.is_empty() || name.contains(|c: char| !(c.is_ascii_alphanumeric() || ":-_.".contains(c))) || seen.contains(&name) {
            return Err(format!("attribute {name:?}"));
        }
        seen.push(name);
        let quote = rest.chars().next().filter(|q| *q == '"' || *q == '\'').ok_or(format!("{name} has no quotes"))?;
        let (value, after) = rest[1..].split_once(quote).ok_or(format!("{name} is not closed"))?;
        content(value, false)?;
        text = after;
    }
    Ok(())
}

fn content(text: &str, outside: bool) -> Result<(), String> {
    if outside && !text.trim().is_empty() {
        return Err(format!("text outside the root: {text}"));
    }
    for part in text.split('&').skip(1) {
        let name = part.split_once(';').ok_or(format!("a bare & before {part:?}"))?.0;
        let known =
            ["amp", "lt", "gt", "quot", "apos"].contains(&name) || name.strip_prefix('#').is_some_and(|n| n.trim_start_matches('x').parse::<u32>().is_ok());
        if !known {
            return Err(format!("&{name}; is not known"));
        }
    }
    if text.contains("]]>") { Err("]]> in text".into()) } else { Ok(()) }
}

#[test]
fn broken_files_are_recognised() {
    for sound in ["<a/>", "<?xml version=\"1.0\"?>\n<a b='&lt;c'></a>", "<a><!-- < --><b c=\"d>e\"/>&amp;</a>"] {
        assert_eq!(well_formed(sound), Ok(()), "{sound}");
    }
    for broken in [
        "",
        "<a>",
        "<a></b>",
        "<a b=c/>",
        "<a b=\"<\"/>",
        "<a>&</a>",
        "<a>&x;</a>",
        "<a/><b/>",
        "<a>\u{1}</a>",
        "<a b=\"1\" b=\"2\"/>",
        "x<a/>",
        "<a b=\"1\"c=\"2\"/>",
        "<a>]]></a>",
    ] {
        assert!(well_formed(broken).is_err(), "{broken} was taken");
    }
}
