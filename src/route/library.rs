//! The built-in routes, read when they are first wanted.

use super::Route;
use super::builtin::BUILTIN;
use super::file::{RouteError, read};
use std::sync::OnceLock;
use thiserror::Error;

/// Why a route was not found.
#[derive(Debug, Clone, PartialEq, Eq, Error)]
pub enum FindRouteError {
    /// No route has that name.
    #[error("no route is called `{query}`")]
    Unknown {
        /// What was asked for.
        query: String,
        /// The name that looks most like it, if one does.
        nearest: Option<&'static str>,
    },
    /// Its file is broken: a bug of this program.
    #[error(transparent)]
    Broken(#[from] RouteError),
}

fn all() -> &'static [Result<Route, RouteError>] {
    static ROUTES: OnceLock<Vec<Result<Route, RouteError>>> = OnceLock::new();
    ROUTES.get_or_init(|| {
        BUILTIN
            .iter()
            .map(|(name, text)| read(name, text))
            .collect()
    })
}

/// Below this two names are taken to have nothing to do with each other.
const LEAST_LIKENESS: f64 = 0.75;

/// The names of all routes, in alphabetical order.
pub fn names() -> impl Iterator<Item = &'static str> {
    BUILTIN.iter().map(|(name, _)| *name)
}

/// Every route, in alphabetical order.
pub fn iter() -> impl Iterator<Item = Result<&'static Route, &'static RouteError>> {
    all().iter().map(Result::as_ref)
}

/// The route of that name; case and blanks for hyphens aside.
///
/// # Errors
/// There is none, or its file is broken.
pub fn find(query: &str) -> Result<&'static Route, FindRouteError> {
    let wanted = query.trim().to_lowercase().replace([' ', '_'], "-");
    match names().position(|name| name == wanted) {
        Some(index) => Ok(all()[index].as_ref().map_err(Clone::clone)?),
        None => Err(FindRouteError::Unknown {
            query: query.to_owned(),
            nearest: names()
                .map(|name| (strsim::jaro_winkler(&wanted, name), name))
                .filter(|(likeness, _)| *likeness > LEAST_LIKENESS)
                .max_by(|a, b| a.0.total_cmp(&b.0))
                .map(|(_, name)| name),
        }),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fibre::library;
    use std::collections::BTreeSet;

    #[test]
    fn every_route_is_read() {
        for route in iter() {
            let route = route.unwrap();
            assert!(route.sentence.ends_with('.'), "{}", route.name);
        }
        assert!(names().count() >= 6);
    }

    #[test]
    fn families_are_those_of_the_fibre_library() {
        let families: BTreeSet<&str> = library()
            .iter()
            .map(|record| record.unwrap().family.as_str())
            .collect();
        let settings = iter()
            .flat_map(|route| &route.unwrap().stations)
            .flat_map(|station| &station.settings);
        for (family, _) in settings.flat_map(|(_, setting)| &setting.by_family) {
            assert!(families.contains(family.as_str()), "{family}");
        }
    }

    /// Heald eyes: steel for glass, 0.3 to 0.8 mm; plate or ceramic for carbon and ceramic, 1 to 2 mm.
    #[test]
    fn a_radius_may_hang_on_the_family() {
        let rapier = find("Rapier weaving").unwrap();
        let eye = rapier.stations.iter().find(|s| s.name == "heald eye");
        let radius = eye.unwrap().setting("radius").unwrap();
        assert_eq!(radius.of(Some("glass")).value, "0.3 mm");
        assert_eq!(radius.of(Some("ceramic")).value, "1 mm");
        assert_eq!(radius.of(None).value, "0.3 mm");
    }

    #[test]
    fn a_misspelt_name_gets_the_nearest() {
        let Err(FindRouteError::Unknown { nearest, .. }) = find("rapier-weving") else {
            panic!("found");
        };
        assert_eq!(nearest, Some("rapier-weaving"));
    }
}
