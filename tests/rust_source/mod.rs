//! Just enough reading of Rust to see what a file imports, how long its functions are, and what it calls.

use std::path::{Path, PathBuf};

/// A source file with its comments and literals blanked out, line breaks kept.
pub struct RustFile {
    /// The module path: `["algebra", "field"]`; empty for the crate's root.
    pub module: Vec<String>,
    /// The path below the crate's folder.
    pub path: PathBuf,
    /// The text as written.
    pub text: String,
    /// Code only, without the file's `#[cfg(test)]` modules.
    pub code: String,
}

/// All files below `src`, sorted.
pub fn source_files() -> Vec<RustFile> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut paths = Vec::new();
    collect(&root.join("src"), &mut paths);
    paths.sort();
    paths.iter().map(|path| read(root, path)).collect()
}

fn collect(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()) {
        if entry.is_dir() {
            collect(&entry, found);
        } else if entry.extension().is_some_and(|extension| extension == "rs") {
            found.push(entry);
        }
    }
}

fn read(root: &Path, path: &Path) -> RustFile {
    let text = std::fs::read_to_string(path).unwrap();
    let below = path.strip_prefix(root).unwrap();
    let mut module: Vec<String> = below.with_extension("").iter().skip(1).map(|p| p.to_string_lossy().into()).collect();
    if module.last().is_some_and(|last| ["mod", "lib"].contains(&last.as_str())) {
        module.pop();
    }
    let code = match module.last().is_some_and(|last| last == "tests") {
        true => String::new(),
        false => without_tests(&blank(&text)),
    };
    RustFile { module, path: below.to_path_buf(), text, code }
}

/// Comments and the insides of literals replaced by blanks.
pub fn blank(text: &str) -> String {
    let chars: Vec<char> = text.chars().collect();
    let mut out = String::with_capacity(text.len());
    let mut at = 0;
    while at < chars.len() {
        let end = literal_end(&chars, at);
        if end == at {
            out.push(chars[at]);
            at += 1;
        } else {
            out.extend(chars[at..end].iter().map(|c| if *c == '\n' { '\n' } else { ' ' }));
            at = end;
        }
    }
    out
}

/// Where the comment or literal that begins at `at` ends; `at` itself if none begins there.
fn literal_end(chars: &[char], at: usize) -> usize {
    let next = chars.get(at + 1).copied();
    let starts_word = at == 0 || !(chars[at - 1].is_alphanumeric() || chars[at - 1] == '_');
    match chars[at] {
        '/' if next == Some('/') => chars[at..].iter().position(|c| *c == '\n').map_or(chars.len(), |n| at + n),
        '/' if next == Some('*') => comment_end(chars, at),
        '"' => string_end(chars, at),
        'r' if starts_word => raw_end(chars, at),
        '\'' if next == Some('\\') => {
            chars[at + 3..].iter().position(|c| *c == '\'').map_or(chars.len(), |n| at + n + 4)
        }
        '\'' if chars.get(at + 2) == Some(&'\'') => at + 3,
        _ => at,
    }
}

fn comment_end(chars: &[char], mut at: usize) -> usize {
    let mut depth = 0;
    while at < chars.len() {
        match (chars[at], chars.get(at + 1)) {
            ('/', Some('*')) => (depth, at) = (depth + 1, at + 1),
            ('*', Some('/')) => (depth, at) = (depth - 1, at + 1),
            _ => {}
        }
        at += 1;
        if depth == 0 {
            break;
        }
    }
    at
}

fn string_end(chars: &[char], mut at: usize) -> usize {
    at += 1;
    while at < chars.len() && chars[at] != '"' {
        at += if chars[at] == '\\' { 2 } else { 1 };
    }
    (at + 1).min(chars.len())
}

fn raw_end(chars: &[char], at: usize) -> usize {
    let hashes = chars[at + 1..].iter().take_while(|c| **c == '#').count();
    if chars.get(at + 1 + hashes) != Some(&'"') {
        return at;
    }
    let closing: String = std::iter::once('"').chain(std::iter::repeat_n('#', hashes)).collect();
    let rest: String = chars[at + 2 + hashes..].iter().collect();
    rest.find(&closing).map_or(chars.len(), |n| at + 2 + hashes + rest[..n].chars().count() + closing.len())
}

/// The code without the bodies of its `#[cfg(test)]` items.
fn without_tests(code: &str) -> String {
    let mut out = String::new();
    let mut rest = code;
    while let Some(start) = rest.find("#[cfg(test)]") {
        out.push_str(&rest[..start]);
        let item = &rest[start..];
        let end = match (item.find('{'), item.find(';')) {
            (Some(brace), semicolon) if semicolon.is_none_or(|s| brace < s) => brace + block_length(&item[brace..]),
            (_, Some(semicolon)) => semicolon + 1,
            _ => item.len(),
        };
        out.extend(item[..end].chars().filter(|c| *c == '\n'));
        rest = &item[end..];
    }
    out.push_str(rest);
    out
}

/// The length in bytes of the block that begins with the `{` at the start.
fn block_length(code: &str) -> usize {
    let mut depth = 0usize;
    for (at, c) in code.char_indices() {
        match c {
            '{' => depth += 1,
            '}' => depth = depth.saturating_sub(1),
            _ => continue,
        }
        if depth == 0 {
            return at + 1;
        }
    }
    code.len()
}

impl RustFile {
    /// Every module path that the code names from `crate` or `super`, as full paths from the crate's root.
    pub fn named_paths(&self) -> Vec<Vec<String>> {
        let mut found = Vec::new();
        for word in ["crate::", "super::"] {
            for (at, _) in self.code.match_indices(word) {
                let before = self.code[..at].chars().next_back();
                if before.is_some_and(|c| c.is_alphanumeric() || c == '_' || c == ':' || c == '$') {
                    continue;
                }
                let mut start = if word == "crate::" { Vec::new() } else { self.parent() };
                let mut rest = &self.code[at + word.len()..];
                while let Some(further) = rest.strip_prefix("super::") {
                    start.pop();
                    rest = further;
                }
                tree(rest, &start, &mut found);
            }
        }
        found
    }

    fn parent(&self) -> Vec<String> {
        let mut parent = self.module.clone();
        parent.pop();
        parent
    }

    /// The functions with the number of lines each takes.
    pub fn functions(&self) -> Vec<(String, usize)> {
        let mut found = Vec::new();
        for (at, _) in self.code.match_indices("fn ") {
            let stands_alone = self.code[..at].chars().next_back().is_none_or(|c| !c.is_alphanumeric() && c != '_');
            let after = &self.code[at + 3..];
            let name: String = after.chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect();
            let body = after.find('{');
            if !stands_alone || name.is_empty() || body.is_none() || after.find(';').is_some_and(|s| Some(s) < body) {
                continue;
            }
            let end = body.map_or(0, |brace| brace + block_length(&after[brace..]));
            found.push((name, after[..end].matches('\n').count() + 1));
        }
        found
    }
}

/// Follows a use tree (or a plain path) and notes every path that it names; returns what stands behind it.
fn tree<'a>(code: &'a str, prefix: &[String], found: &mut Vec<Vec<String>>) -> &'a str {
    let code = code.trim_start();
    if let Some(mut rest) = code.strip_prefix('{') {
        loop {
            rest = tree(rest, prefix, found).trim_start();
            match rest.strip_prefix(',') {
                Some(further) => rest = further,
                None => return rest.strip_prefix('}').unwrap_or(rest),
            }
        }
    }
    let word: String = code.chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect();
    let mut path = prefix.to_vec();
    if word.is_empty() {
        found.push(path);
        return code.strip_prefix('*').unwrap_or(code);
    }
    let rest = &code[word.len()..];
    path.push(word);
    match rest.strip_prefix("::") {
        Some(rest) => tree(rest, &path, found),
        None => {
            found.push(path);
            rest.trim_start()
                .strip_prefix("as ")
                .map_or(rest, |renamed| renamed.trim_start_matches(|c: char| c.is_alphanumeric() || c == '_'))
        }
    }
}
