//! Mathematics: which of its elements a line of text can hold, and TeX that is plain enough to read.

use crate::manuscript::MarkKind;

/// Elements that cannot be set in one line of text.
pub(super) fn is_complex(name: &str) -> bool {
    matches!(
        name,
        "mfrac"
            | "msqrt"
            | "mroot"
            | "mtable"
            | "munder"
            | "munderover"
            | "mfenced"
            | "menclose"
            | "mphantom"
            | "mmultiscripts"
            | "maction"
    )
}

/// Elements whose text is shown.
pub(super) fn is_token(name: &str) -> bool {
    matches!(name, "mi" | "mn" | "mo" | "mtext" | "ms")
}

/// How child number `index` (from 0) of a script element is set.
pub(super) fn script(parent: &str, index: u32) -> Option<MarkKind> {
    match (parent, index) {
        ("msup", 1) | ("msubsup", 2) => Some(MarkKind::Superscript),
        ("msub" | "msubsup", 1) => Some(MarkKind::Subscript),
        _ => None,
    }
}

/// TeX commands that are one sign.
const SIGNS: &[(&str, &str)] = &[
    ("pm", "±"),
    ("times", "×"),
    ("le", "≤"),
    ("leq", "≤"),
    ("leqslant", "≤"),
    ("ge", "≥"),
    ("geq", "≥"),
    ("geqslant", "≥"),
    ("lt", "<"),
    ("gt", ">"),
    ("ne", "≠"),
    ("neq", "≠"),
    ("approx", "≈"),
    ("sim", "∼"),
    ("cdot", "·"),
    ("alpha", "α"),
    ("beta", "β"),
    ("gamma", "γ"),
    ("delta", "δ"),
    ("Delta", "Δ"),
    ("eta", "η"),
    ("kappa", "κ"),
    ("lambda", "λ"),
    ("mu", "μ"),
    ("rho", "ρ"),
    ("sigma", "σ"),
    ("tau", "τ"),
    ("chi", "χ"),
    ("%", "%"),
    ("&", "&"),
    (",", " "),
    (";", " "),
    (":", " "),
    (" ", " "),
    ("quad", " "),
];

/// The longest TeX that is tried, in bytes.
const LONGEST: usize = 400;

/// What TeX between its delimiters shows, if it is a line of plain signs.
pub(super) fn shown(tex: &str) -> Option<String> {
    if tex.len() > LONGEST {
        return None;
    }
    let mut out = String::new();
    let mut rest = tex;
    while let Some(c) = rest.chars().next() {
        rest = &rest[c.len_utf8()..];
        match c {
            '\\' => {
                let letters = rest.len() - rest.trim_start_matches(|c: char| c.is_ascii_alphabetic()).len();
                let length = if letters > 0 { letters } else { rest.chars().next()?.len_utf8() };
                let (name, after) = rest.split_at(length);
                out.push_str(SIGNS.iter().find(|(n, _)| *n == name)?.1);
                rest = after;
            }
            '{' | '}' => {}
            '^' | '_' | '#' | '&' | '<' => return None,
            '~' => out.push(' '),
            c => out.push(c),
        }
    }
    Some(out.split_whitespace().collect::<Vec<_>>().join(" "))
}

/// What stands between the delimiters of a TeX document or formula.
pub(super) fn body(tex: &str) -> &str {
    let from = tex.find("\\begin{document}").map_or(0, |i| i + 16);
    let tex = &tex[from..];
    let tex = &tex[..tex.find("\\end{document}").unwrap_or(tex.len())];
    let tex = tex.trim().trim_matches('$').trim();
    let inner = tex.strip_prefix("\\(").and_then(|t| t.strip_suffix("\\)"));
    inner.or_else(|| tex.strip_prefix("\\[").and_then(|t| t.strip_suffix("\\]"))).unwrap_or(tex).trim()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn plain_tex_is_read_and_other_tex_is_not() {
        let document = "\\documentclass{minimal}\\begin{document}$$P\\le 0.05$$\\end{document}";
        assert_eq!(shown(body(document)).as_deref(), Some("P≤ 0.05"));
        assert_eq!(shown(body("\\(12.1 \\pm 3.4\\)")).as_deref(), Some("12.1 ± 3.4"));
        for tex in ["x^2", "\\frac{1}{2}", "\\", "\\bar x"] {
            assert_eq!(shown(body(tex)), None, "{tex}");
        }
    }
}
