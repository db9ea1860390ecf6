//! The files of `weaves/`, compiled into the program: name and text, in alphabetical order.
//!
//! Only the list stands here; each text is read when its weave is asked for.

macro_rules! weave_files {
    ($($name:literal),+ $(,)?) => {
        &[$(($name, include_str!(concat!("../../weaves/", $name, ".toml")))),+]
    };
}

/// Name and text of every built-in weave.
pub(super) const BUILTIN: &[(&str, &str)] = weave_files![
    "crepe-8",
    "crowfoot-4",
    "herringbone-2-2",
    "hopsack-2-2",
    "hopsack-3-3",
    "hopsack-4-4",
    "mock-leno-3-3",
    "plain",
    "sateen-10",
    "sateen-12",
    "sateen-5",
    "sateen-7",
    "sateen-8",
    "satin-10",
    "satin-12",
    "satin-5",
    "satin-6-irregular",
    "satin-7",
    "satin-8",
    "twill-1-2",
    "twill-1-3",
    "twill-2-1",
    "twill-2-2",
    "twill-3-1",
    "twill-3-3",
    "twill-4-4",
    "warp-rib-2-2",
    "weft-rib-2-2",
];

#[cfg(test)]
mod tests {
    use super::*;

    /// A file that is listed and missing does not compile; one that is there and not listed fails here.
    #[test]
    fn the_list_is_the_folder() {
        let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/weaves");
        let files = std::fs::read_dir(folder)
            .unwrap()
            .map(|entry| entry.unwrap().file_name());
        let mut files: Vec<String> = files.map(|name| name.into_string().unwrap()).collect();
        files.sort();
        let mut listed: Vec<String> = BUILTIN
            .iter()
            .map(|(name, _)| format!("{name}.toml"))
            .collect();
        listed.sort();
        assert_eq!(files, listed);
    }
}
