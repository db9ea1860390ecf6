//! The files of `routes/`, compiled into the program: name and text, in alphabetical order.

macro_rules! route_files {
    ($($name:literal),+ $(,)?) => {
        &[$(($name, include_str!(concat!("../../routes/", $name, ".toml")))),+]
    };
}

/// Name and text of every built-in route.
pub(super) const BUILTIN: &[(&str, &str)] = route_files![
    "creel-warping",
    "maypole-braiding",
    "rapier-weaving",
    "roll-up",
    "shuttle-weaving",
    "winding",
];

#[cfg(test)]
mod tests {
    use super::*;

    /// A file that is listed and missing does not compile; one that is there and not listed fails here.
    #[test]
    fn the_list_is_the_folder() {
        let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/routes");
        let mut files: Vec<String> = std::fs::read_dir(folder)
            .unwrap()
            .map(|entry| entry.unwrap().file_name().into_string().unwrap())
            .collect();
        files.sort();
        let listed: Vec<String> = BUILTIN
            .iter()
            .map(|(name, _)| format!("{name}.toml"))
            .collect();
        assert_eq!(files, listed);
    }
}
