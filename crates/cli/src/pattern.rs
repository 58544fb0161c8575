//! Patterns for the names of claims.

use linform_engine::title;
use linform_spec::Environment;

/// Does a claim match: by its name, by its name with index `trace[j=3,k=0]`, or by the short form `trace[3,0]`?
pub(crate) fn matches(pattern: &str, name: &str, index: &Environment) -> bool {
    let values: Vec<String> = index.values().map(i64::to_string).collect();
    let short = format!("{name}[{}]", values.join(","));
    [name, &title(name, index), &short]
        .iter()
        .any(|text| glob(pattern, text))
}

/// `*` stands for any text, everything else for itself.
fn glob(pattern: &str, text: &str) -> bool {
    let Some((first, others)) = pattern.split_once('*') else {
        return pattern == text;
    };
    let Some(mut rest) = text.strip_prefix(first) else {
        return false;
    };
    // The leftmost place for every inner part leaves the most text for those that follow.
    let (inner, last) = others.rsplit_once('*').unwrap_or(("", others));
    for part in inner.split('*') {
        match rest.find(part) {
            Some(position) => rest = &rest[position + part.len()..],
            None => return false,
        }
    }
    rest.ends_with(last)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_star_stands_for_any_text() {
        for (pattern, text) in [
            ("*", ""),
            ("*", "a"),
            ("a*", "a"),
            ("*c", "abc"),
            ("a*c", "abc"),
            ("a*b*c", "axbxbc"),
            ("**", "ab"),
        ] {
            assert!(glob(pattern, text), "{pattern} {text}");
        }
        for (pattern, text) in [
            ("", "a"),
            ("a", "ab"),
            ("a*a", "a"),
            ("a*b*c", "acb"),
            ("b*", "ab"),
        ] {
            assert!(!glob(pattern, text), "{pattern} {text}");
        }
    }

    #[test]
    fn a_claim_is_found_by_name_or_by_name_with_index() {
        let index = Environment::from_iter([("j".to_owned(), 3), ("k".to_owned(), 0)]);
        for pattern in ["trace", "tr*", "trace[j=3,k=0]", "trace[3,0]", "trace[3,*"] {
            assert!(matches(pattern, "trace", &index), "{pattern}");
        }
        assert!(!matches("trace[3,1]", "trace", &index));
    }
}
