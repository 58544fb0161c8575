//! "Did you mean": the nearest of the names that would have been right.

/// The candidate nearest to `name`, if it is near enough to be a slip of the pen.
///
/// Near means an edit distance (with transpositions) of at most a third of the longer name, and at least 1;
/// names that differ in case alone are always near. Long names get no suggestion, and of very many candidates
/// only the first are looked at.
pub fn did_you_mean<'a>(
    name: &str,
    candidates: impl IntoIterator<Item = &'a str>,
) -> Option<String> {
    const LONGEST: usize = 64;
    const MOST: usize = 2000;
    if name.len() > LONGEST {
        return None;
    }
    candidates
        .into_iter()
        .take(MOST)
        .filter(|candidate| candidate.len() <= LONGEST && *candidate != name)
        .filter_map(|candidate| {
            let length = name.chars().count().max(candidate.chars().count());
            let distance = if name.to_lowercase() == candidate.to_lowercase() {
                0
            } else {
                strsim::damerau_levenshtein(name, candidate)
            };
            // One letter for another of length 1 is no slip but another name.
            (distance <= (length / 3).max(1) && distance < length).then_some((distance, candidate))
        })
        .min_by_key(|(distance, _)| *distance)
        .map(|(_, candidate)| candidate.to_owned())
}

#[cfg(test)]
mod tests {
    use super::did_you_mean;

    #[test]
    fn the_nearest_name_is_offered_and_a_far_one_is_not() {
        let keys = ["target", "terms", "title"];
        assert_eq!(did_you_mean("tarfet", keys).as_deref(), Some("target"));
        assert_eq!(did_you_mean("Terms", keys).as_deref(), Some("terms"));
        assert_eq!(did_you_mean("generators", keys), None);
        assert_eq!(did_you_mean("p", ["q", "t"]), None);
        assert_eq!(did_you_mean("p'", ["p", "q''"]).as_deref(), Some("p"));
        assert_eq!(did_you_mean(&"x".repeat(100_000), keys), None);
    }
}
