//! The named weaves: those compiled in, and a user's own folder.
//!
//! A name is found loosely: case, blanks, hyphens and underscores aside, but two numbers never run together (`satin-1-2` is not
//! `satin-12`). Built-in files are read only when asked for: finding one compares names and reads one file.
//!
//! A folder of one's own adds names and never changes what a name means: a file whose name is, loosely, that of another weave
//! or reads as words (`twill-5-1`) is refused, so that a spec means the same cloth wherever it is checked.

use super::builtin::BUILTIN;
use super::weave_file::{self, FolderErrors, MAX_BYTES, WeaveFileError};
use super::woven::Kept;
use super::{Pattern, words};
use std::fs;
use std::path::{Path, PathBuf};

/// A weave of the library.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Weave {
    /// Its name, that of its file without `.toml`.
    pub name: String,
    /// What a weaver calls it.
    pub title: String,
    /// What it is and where it is used.
    pub sentence: String,
    /// Its pattern.
    pub pattern: Pattern,
}

/// All weaves that have a name.
#[derive(Clone, Debug, Default)]
pub struct Weaves {
    own: Vec<Weave>,
    pub(super) kept: Kept,
}

impl Weaves {
    /// The weaves that come with the program. Reads nothing yet.
    #[must_use]
    pub fn builtin() -> Self {
        Self::default()
    }

    /// The built-in weaves and those of a folder: every `.toml` file in it, other files and inner folders left alone.
    ///
    /// # Errors
    /// Everything that is wrong with the folder and its files, together.
    pub fn with_folder(folder: &Path) -> Result<Self, FolderErrors> {
        let files = toml_files(folder).map_err(|source| FolderErrors {
            problems: vec![WeaveFileError::Io {
                path: folder.to_path_buf(),
                source,
            }],
        })?;
        let mut weaves = Self::builtin();
        let mut problems = Vec::new();
        for path in files {
            match read_file(&path).and_then(|weave| weaves.unless_taken(weave, &path)) {
                Ok(weave) => weaves.own.push(weave),
                Err(problem) => problems.push(problem),
            }
        }
        if problems.is_empty() {
            Ok(weaves)
        } else {
            Err(FolderErrors { problems })
        }
    }

    /// The weave of this name, loosely.
    #[must_use]
    pub fn find(&self, name: &str) -> Option<Weave> {
        let key = loose(name);
        let builtin = BUILTIN.iter().find(|(name, _)| loose(name) == key);
        if let Some((name, text)) = builtin {
            return read_builtin(name, text);
        }
        self.own
            .iter()
            .find(|weave| loose(&weave.name) == key)
            .cloned()
    }

    /// The name most like this one, if one is like it at all: it begins with it, or differs in less than a third.
    #[must_use]
    pub fn nearest(&self, name: &str) -> Option<&str> {
        const SHORTEST_BEGINNING: usize = 4;
        let key = loose(name);
        let letters = key.chars().count();
        let distances = self.names().map(|name| {
            let known = loose(name);
            let begins = letters >= SHORTEST_BEGINNING && known.starts_with(&key);
            let distance = if begins {
                0
            } else {
                strsim::osa_distance(&known, &key)
            };
            (distance, name)
        });
        let (distance, nearest) = distances.min()?;
        (distance <= (letters / 3).max(1)).then_some(nearest)
    }

    /// All names, the built-in ones first, each group in alphabetical order.
    pub fn names(&self) -> impl Iterator<Item = &str> {
        let own = self.own.iter().map(|weave| weave.name.as_str());
        BUILTIN.iter().map(|(name, _)| *name).chain(own)
    }

    /// All weaves, in the order of [`Weaves::names`]; reads the built-in files one by one.
    pub fn iter(&self) -> impl Iterator<Item = Weave> {
        let builtin = BUILTIN
            .iter()
            .filter_map(|(name, text)| read_builtin(name, text));
        builtin.chain(self.own.iter().cloned())
    }

    fn unless_taken(&self, weave: Weave, path: &Path) -> Result<Weave, WeaveFileError> {
        let taken_by = if let Some(other) = self.find(&weave.name) {
            format!("{}, {}", other.name, other.title)
        } else if words::parse(&weave.name).is_ok() {
            "as words".to_owned()
        } else {
            return Ok(weave);
        };
        Err(WeaveFileError::Clash {
            path: path.to_path_buf(),
            name: weave.name,
            taken_by,
        })
    }
}

/// A built-in file; a test reads them all, so none is ever left out.
fn read_builtin(name: &str, text: &str) -> Option<Weave> {
    weave_file::read(text, Path::new(name), name).ok()
}

fn toml_files(folder: &Path) -> std::io::Result<Vec<PathBuf>> {
    let mut files = Vec::new();
    for entry in fs::read_dir(folder)? {
        let path = entry?.path();
        let is_toml = path.extension().is_some_and(|ending| ending == "toml");
        if is_toml && path.is_file() {
            files.push(path);
        }
    }
    files.sort();
    Ok(files)
}

fn read_file(path: &Path) -> Result<Weave, WeaveFileError> {
    let io = |source| WeaveFileError::Io {
        path: path.to_path_buf(),
        source,
    };
    let bytes = fs::metadata(path).map_err(io)?.len();
    if bytes > MAX_BYTES {
        let path = path.to_path_buf();
        return Err(WeaveFileError::TooLarge { path, bytes });
    }
    let text = fs::read_to_string(path).map_err(io)?;
    let stem = path.file_stem().unwrap_or_default().to_string_lossy();
    weave_file::read(&text, path, &stem)
}

/// A name with case, blanks, hyphens and underscores taken out; a single hyphen stays between two digits.
fn loose(name: &str) -> String {
    let mut key = String::with_capacity(name.len());
    let mut parted = false;
    for letter in name.trim().chars().flat_map(char::to_lowercase) {
        if letter.is_whitespace() || matches!(letter, '-' | '_') {
            parted = true;
            continue;
        }
        let after_digit = key.ends_with(|c: char| c.is_ascii_digit());
        if parted && after_digit && letter.is_ascii_digit() {
            key.push('-');
        }
        key.push(letter);
        parted = false;
    }
    key
}

#[cfg(test)]
mod tests {
    use super::super::{FloatLength, Side, parse_notation};
    use super::*;

    /// Definition: a weave of the library is one cloth, drawn as its smallest repeat, and described.
    #[test]
    fn every_builtin_weave_is_sound() {
        let weaves = Weaves::builtin();
        assert!(weaves.names().count() >= 24);
        assert_eq!(
            weaves.iter().count(),
            weaves.names().count(),
            "some file cannot be read"
        );
        for (name, text) in BUILTIN {
            let weave = weaves.find(name).unwrap();
            assert_eq!(weave.name, *name);
            assert!(weave.pattern.falls_apart().is_none(), "{name} falls apart");
            let drawn = text
                .lines()
                .filter(|line| line.trim_start().starts_with('"'));
            let drawn: Vec<&str> = drawn
                .map(|line| line.trim().trim_matches([',', '"']))
                .collect();
            assert_eq!(
                weave.pattern.rows(),
                drawn,
                "{name} is not its smallest repeat"
            );
            assert!(
                weave.sentence.ends_with('.') && !weave.title.is_empty(),
                "{name}"
            );
        }
        let mut sorted: Vec<&str> = weaves.names().collect();
        sorted.sort_unstable();
        sorted.dedup();
        assert!(weaves.names().eq(sorted), "sorted, each once");
    }

    /// A name that also reads as words names the very pattern of the words.
    #[test]
    fn names_and_words_agree() {
        let both: Vec<_> = Weaves::builtin()
            .iter()
            .filter_map(|w| Some((words::parse(&w.name).ok()?, w)))
            .collect();
        assert!(both.len() >= 23, "all regular weaves of the library");
        for (spoken, weave) in both {
            assert_eq!(spoken.rows(), weave.pattern.rows(), "{}", weave.name);
        }
    }

    #[test]
    fn sateens_are_satins_turned_over() {
        for ends in [5, 7, 8, 10, 12] {
            let satin = parse_notation(&format!("satin-{ends}")).unwrap();
            let sateen = parse_notation(&format!("sateen-{ends}")).unwrap();
            assert!(satin.turned_over().mirrored().same_up_to_shift(&sateen));
        }
    }

    /// What the trade's names promise: the faces of twills, the steps of the 4-end crowfoot, the project's own crepe.
    #[test]
    fn weaves_keep_the_promise_of_their_names() {
        let floats = |name: &str| {
            let found = parse_notation(name).unwrap().interlacing();
            (
                found.warp.longest_float(Side::Face),
                found.weft.longest_float(Side::Face),
            )
        };
        let crossings = |n| Some(FloatLength::Crossings(n));
        assert_eq!(floats("twill-3-1"), (crossings(3), crossings(1)));
        assert_eq!(floats("twill-1-3"), (crossings(1), crossings(3)));
        assert_eq!(floats("warp-rib-2-2"), (crossings(2), crossings(1)));
        assert_eq!(floats("weft-rib-2-2"), (crossings(1), crossings(2)));
        assert_eq!(floats("herringbone-2-2"), (crossings(2), crossings(2)));
        assert_eq!(floats("mock-leno-3-3"), (crossings(3), crossings(3)));
        assert_eq!(floats("crowfoot-4"), (crossings(3), crossings(1)));
        assert_eq!(floats("satin-6-irregular"), (crossings(5), crossings(1)));
        let (warp, weft) = floats("crepe-8");
        assert!(warp <= crossings(3) && weft <= crossings(3));
        // The irregular satins: one stitch on each end and pick, never a twill line of three ends.
        for (name, steps) in [
            ("crowfoot-4", &[1, 2, 3, 2][..]),
            ("satin-6-irregular", &[2, 3, 4, 4, 3, 2]),
        ] {
            let pattern = parse_notation(name).unwrap();
            let stitch = |end| {
                (0..pattern.picks())
                    .find(|pick| !pattern.warp_up(end, *pick))
                    .unwrap()
            };
            let found: Vec<usize> = (0..pattern.ends())
                .map(|e| {
                    (stitch((e + 1) % pattern.ends()) + pattern.picks() - stitch(e))
                        % pattern.picks()
                })
                .collect();
            assert_eq!(found, steps, "{name}");
        }
    }

    #[test]
    fn loose_names() {
        assert_eq!(loose(" Twill_2-2 "), "twill2-2");
        assert_eq!(loose("twill 2 2"), loose("twill-2-2"));
        assert_ne!(loose("satin-1-2"), loose("satin-12"));
        let weaves = Weaves::builtin();
        assert_eq!(weaves.nearest("mock leno"), Some("mock-leno-3-3"));
        assert_eq!(weaves.nearest("hopsak-2-2"), Some("hopsack-2-2"));
        assert_eq!(weaves.nearest("velvet"), None);
        assert_eq!(weaves.nearest(""), None);
    }

    fn folder(files: &[(&str, &str)]) -> tempfile::TempDir {
        let folder = tempfile::tempdir().unwrap();
        for (name, rows) in files {
            let text =
                format!("name = \"{name}\"\ntitle = \"t\"\nsentence = \"s\"\nrows = {rows}\n");
            fs::write(folder.path().join(format!("{name}.toml")), text).unwrap();
        }
        folder
    }

    #[test]
    fn a_folder_adds_its_own() {
        let folder = folder(&[("gate-cloth", "['##.', '.##']")]);
        fs::write(folder.path().join("notes.txt"), "not a weave").unwrap();
        let weaves = Weaves::with_folder(folder.path()).unwrap();
        assert_eq!(weaves.find("Gate Cloth").unwrap().name, "gate-cloth");
        assert_eq!(weaves.pattern("gatecloth").unwrap().rows(), ["##.", ".##"]);
        assert_eq!(weaves.iter().last().unwrap().name, "gate-cloth");
        assert_eq!(weaves.nearest("gate-clothe"), Some("gate-cloth"));
        assert!(weaves.find("plain").is_some());
    }

    #[test]
    fn a_folder_tells_all_its_problems() {
        let plain = "['#.', '.#']";
        let folder = folder(&[
            ("a-mine", plain),
            ("a_mine", plain),
            ("b", "['#x']"),
            ("plain", plain),
            ("twill-5-1", plain),
        ]);
        let told = Weaves::with_folder(folder.path()).unwrap_err();
        let told: Vec<String> = told
            .problems
            .iter()
            .map(|p| p.to_string().split_once(".toml: ").unwrap().1.to_owned())
            .collect();
        assert_eq!(
            told,
            [
                "`a_mine` already names a weave (a-mine, t); choose another name",
                "line 4: row 1, column 2: 'x' is no mark; use `#` (warp up) or `.` (weft up)",
                "`plain` already names a weave (plain, Plain weave); choose another name",
                "`twill-5-1` already names a weave (as words); choose another name",
            ]
        );
        let missing = Weaves::with_folder(&folder.path().join("none")).unwrap_err();
        assert!(matches!(
            missing.problems.as_slice(),
            [WeaveFileError::Io { .. }]
        ));
    }
}
