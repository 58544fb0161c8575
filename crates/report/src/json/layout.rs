//! The text of a JSON tree: laid out for reading, and the canonical text of the digest.

use super::node::Node;

/// Values that fit into this many columns stand on one line.
const WIDTH: usize = 120;

/// The text with two spaces of indent a level, ending in a line break.
pub(crate) fn pretty(node: &Node) -> String {
    let mut out = String::new();
    write(node, 0, 0, &mut out);
    out.push('\n');
    out
}

/// Writes a node that begins in column `column` of a line with the given indent.
fn write(node: &Node, indent: usize, column: usize, out: &mut String) {
    let open = out.len();
    if let Node::List(_) | Node::Object(_) = node {
        if compact(node, WIDTH.saturating_sub(column), out) {
            return;
        }
        out.truncate(open);
    }
    let inner = indent + 2;
    let line = |out: &mut String, first: bool, width: usize| {
        out.push_str(if first { "\n" } else { ",\n" });
        out.extend(std::iter::repeat_n(' ', width));
    };
    match node {
        Node::List(items) => {
            out.push('[');
            for (position, item) in items.iter().enumerate() {
                line(out, position == 0, inner);
                write(item, inner, inner, out);
            }
            out.push('\n');
            out.extend(std::iter::repeat_n(' ', indent));
            out.push(']');
        }
        Node::Object(fields) => {
            out.push('{');
            for (position, (name, value)) in fields.iter().enumerate() {
                line(out, position == 0, inner);
                let start = out.len();
                scalar(&Node::Text(name.clone()), out);
                out.push_str(": ");
                write(value, inner, inner + out.len() - start, out);
            }
            out.push('\n');
            out.extend(std::iter::repeat_n(' ', indent));
            out.push('}');
        }
        other => scalar(other, out),
    }
}

/// Writes a node on one line and says whether it fits; stops early if not.
fn compact(node: &Node, width: usize, out: &mut String) -> bool {
    let limit = out.len() + width;
    match node {
        Node::List(items) => {
            out.push('[');
            for (position, item) in items.iter().enumerate() {
                out.push_str(if position == 0 { "" } else { ", " });
                if !compact(item, limit.saturating_sub(out.len()), out) {
                    return false;
                }
            }
            out.push(']');
        }
        Node::Object(fields) => {
            out.push('{');
            for (position, (name, value)) in fields.iter().enumerate() {
                out.push_str(if position == 0 { "" } else { ", " });
                scalar(&Node::Text(name.clone()), out);
                out.push_str(": ");
                if !compact(value, limit.saturating_sub(out.len()), out) {
                    return false;
                }
            }
            out.push('}');
        }
        other => scalar(other, out),
    }
    out.len() <= limit
}

fn scalar(node: &Node, out: &mut String) {
    match node {
        Node::Null | Node::List(_) | Node::Object(_) => out.push_str("null"),
        Node::Bool(value) => out.push_str(if *value { "true" } else { "false" }),
        Node::Signed(value) => out.push_str(&value.to_string()),
        Node::Unsigned(value) => out.push_str(&value.to_string()),
        Node::Real(value) => out.push_str(&serde_json::Value::from(*value).to_string()),
        Node::Text(text) => quote(text, out),
    }
}

fn quote(text: &str, out: &mut String) {
    out.push('"');
    for c in text.chars() {
        match c {
            '"' => out.push_str("\\\""),
            '\\' => out.push_str("\\\\"),
            '\n' => out.push_str("\\n"),
            '\r' => out.push_str("\\r"),
            '\t' => out.push_str("\\t"),
            '\u{8}' => out.push_str("\\b"),
            '\u{c}' => out.push_str("\\f"),
            c if c < ' ' => out.push_str(&format!("\\u{:04x}", u32::from(c))),
            c => out.push(c),
        }
    }
    out.push('"');
}

/// The canonical text: no spaces, fields sorted by their names, characters unescaped where JSON allows it.
///
/// Python's `json.dumps(value, sort_keys=True, separators=(",", ":"), ensure_ascii=False)` gives the same text, so that
/// a third party can recompute a digest in one line.
pub(crate) fn canonical(node: &Node, out: &mut String) {
    match node {
        Node::List(items) => {
            out.push('[');
            for (position, item) in items.iter().enumerate() {
                out.push_str(if position == 0 { "" } else { "," });
                canonical(item, out);
            }
            out.push(']');
        }
        Node::Object(fields) => canonical_object(fields.iter(), out),
        other => scalar(other, out),
    }
}

/// The canonical text of an object with these fields.
pub(crate) fn canonical_object<'a>(
    fields: impl Iterator<Item = &'a (String, Node)>,
    out: &mut String,
) {
    let mut sorted: Vec<&(String, Node)> = fields.collect();
    sorted.sort_by(|a, b| a.0.cmp(&b.0));
    out.push('{');
    for (position, (name, value)) in sorted.into_iter().enumerate() {
        out.push_str(if position == 0 { "" } else { "," });
        quote(name, out);
        out.push(':');
        canonical(value, out);
    }
    out.push('}');
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::json::node::parse;

    #[test]
    fn short_values_share_a_line_and_long_ones_do_not() {
        let short = Node::object([("a", Node::count(1)), ("b", Node::List(vec![]))]);
        assert_eq!(pretty(&short), "{\"a\": 1, \"b\": []}\n");
        let long = Node::object([("x", Node::text("y".repeat(130))), ("z", Node::Signed(-2))]);
        assert_eq!(
            pretty(&long),
            format!("{{\n  \"x\": \"{}\",\n  \"z\": -2\n}}\n", "y".repeat(130))
        );
    }

    #[test]
    fn canonical_text_ignores_layout_and_order_of_fields() {
        let mut texts = Vec::new();
        for source in [
            r#"{"b": [1, -2, "ä\u0001\/"], "a": null}"#,
            "{\"a\":null ,\n \"b\":[1,-2,\"\\u00e4\\u0001/\"]}",
        ] {
            let mut text = String::new();
            canonical(&parse(source).unwrap(), &mut text);
            texts.push(text);
        }
        assert_eq!(texts[0], "{\"a\":null,\"b\":[1,-2,\"ä\\u0001/\"]}");
        assert_eq!(texts[0], texts[1]);
    }

    #[test]
    fn written_text_is_read_back() {
        let node = Node::object([
            ("control \u{1b}[0m \" \\", Node::text("\n\u{7f}\u{2028}∂")),
            (
                "numbers",
                Node::List(vec![
                    Node::Unsigned(u64::MAX),
                    Node::Signed(i64::MIN),
                    Node::Real(0.5),
                ]),
            ),
        ]);
        assert_eq!(parse(&pretty(&node)).unwrap(), node);
    }

    #[test]
    fn deep_nesting_and_repeated_fields_are_errors() {
        assert!(parse(&"[".repeat(1_000_000)).is_err());
        assert!(
            parse(r#"{"a": 1, "a": 2}"#)
                .unwrap_err()
                .to_string()
                .contains("stands twice")
        );
    }
}
