//! Reading: any bytes give a manuscript, and every place in it leads back to the bytes of the file.

use proptest::prelude::*;
use std::collections::HashMap;
use std::fmt::Write as _;
use tallyproof::intake::{Format, Unreadable, read};
use tallyproof::manuscript::{Block, BlockKind, Manuscript, Mark, MarkKind, SectionKind};
use tallyproof::text::{EncodingName, Span};

fn markdown(text: &str) -> Manuscript {
    let (manuscript, _) = read(text.as_bytes(), "draft.md", None).unwrap();
    check(&manuscript, text.as_bytes());
    manuscript
}

fn plain(text: &str) -> Manuscript {
    let (manuscript, _) = read(text.as_bytes(), "draft.txt", None).unwrap();
    check(&manuscript, text.as_bytes());
    manuscript
}

fn texts(manuscript: &Manuscript) -> Vec<&str> {
    manuscript.blocks.iter().map(|b| b.text.as_str()).collect()
}

/// The canonical text of one Markdown paragraph.
fn canonical(text: &str) -> String {
    let manuscript = markdown(text);
    assert_eq!(manuscript.blocks.len(), 1, "{:?}", texts(&manuscript));
    manuscript.blocks[0].text.clone()
}

fn marked(block: &Block, kind: MarkKind) -> Vec<&str> {
    let of_kind = block.marks.iter().filter(|m| m.kind == kind);
    of_kind.map(|m| &block.text[m.start as usize..m.end as usize]).collect()
}

/// The canonical text with its raised and lowered parts in braces.
fn scripts(text: &str) -> String {
    let manuscript = markdown(text);
    let block = &manuscript.blocks[0];
    let (mut out, mut at) = (String::new(), 0);
    for m in &block.marks {
        let sign = match m.kind {
            MarkKind::Superscript => '^',
            MarkKind::Subscript => '_',
            _ => continue,
        };
        let (start, end) = (m.start as usize, m.end as usize);
        write!(out, "{}{sign}{{{}}}", &block.text[at..start], &block.text[start..end]).unwrap();
        at = end;
    }
    out + &block.text[at..]
}

/// The bytes of the file that a quote is placed at.
fn source_of(manuscript: &Manuscript, bytes: &[u8], quote: &str) -> (String, bool, u32, u32) {
    let (block, start) = manuscript
        .blocks
        .iter()
        .enumerate()
        .find_map(|(i, b)| b.text.find(quote).map(|at| (i, at)))
        .unwrap_or_else(|| panic!("{quote} in {:?}", texts(manuscript)));
    let place = manuscript.locate(Span::new(block, start, start + quote.len()));
    let found = String::from_utf8_lossy(&bytes[place.start..place.end]).into_owned();
    (found, place.exact, place.line, place.column)
}

/// What holds for every manuscript.
fn check(manuscript: &Manuscript, bytes: &[u8]) {
    let source = &manuscript.source.decoded;
    let positions = positions(&source.text);
    for (i, block) in manuscript.blocks.iter().enumerate() {
        let text = &block.text;
        assert!((block.section as usize) < manuscript.sections.len());
        let mut last = 0;
        for (here, there) in block.pieces.exact() {
            assert!(last <= here.start, "pieces in order");
            last = here.end;
            assert_eq!(text.get(here), source.text.get(there), "an exact piece is the same text");
        }
        let mut previous = 0;
        for m in &block.marks {
            assert!(m.start < m.end && m.end - m.start <= Mark::LONGEST && previous <= m.start);
            assert!(text.get(m.start as usize..m.end as usize).is_some(), "marks on boundaries: {m:?} in {text:?}");
            assert!(block.marked(m.kind, m.start, m.end));
            previous = m.start;
        }
        if let BlockKind::Table(grid) = &block.kind {
            assert_eq!(grid.cells.len() as u32, grid.rows * grid.columns);
            let mut at = 0;
            for cell in &grid.cells {
                assert_eq!(cell.start, at);
                let end = if cell.column + 1 == grid.columns { '\n' } else { '\t' };
                assert!(text[cell.end as usize..].starts_with(end));
                assert!(!text[cell.start as usize..cell.end as usize].contains(['\t', '\n']));
                assert_eq!(grid.cell_at(cell.start).map(|c| (c.row, c.column)), Some((cell.row, cell.column)));
                at = cell.end + 1;
            }
            assert_eq!(at as usize, text.len());
        }
        let bounds: Vec<usize> = text.char_indices().map(|(i, _)| i).chain([text.len()]).take(400).collect();
        for (n, &start) in bounds.iter().enumerate() {
            for &end in [n, n + 1, n + 3, n + 17].iter().filter_map(|&n| bounds.get(n)) {
                let span = Span::new(i, start, end);
                let place = manuscript.locate(span);
                assert!(place.start <= place.end && place.end <= bytes.len());
                let Some(range) = block.pieces.source(start, end) else {
                    assert_eq!(start, text.len(), "all text has a source");
                    continue;
                };
                let found = source.text.get(range.start..range.end).expect("on character boundaries");
                if range.exact {
                    assert_eq!(found, &text[start..end]);
                    assert_eq!(decoded(bytes, source.encoding, place.start..place.end), found);
                }
                assert_eq!(Some(&(place.line, place.column)), positions.get(&range.start));
            }
        }
    }
}

/// Line and column of every character, by a walk.
fn positions(text: &str) -> HashMap<usize, (u32, u32)> {
    let (mut found, mut line, mut column) = (HashMap::new(), 1, 1);
    for (i, c) in text.char_indices() {
        found.insert(i, (line, column));
        let ends = c == '\n' || (c == '\r' && !text[i + 1..].starts_with('\n'));
        (line, column) = if ends { (line + 1, 1) } else { (line, column + 1) };
    }
    found.insert(text.len(), (line, column));
    found
}

/// A stretch of the file as text, by the encoding's own definition.
fn decoded(bytes: &[u8], encoding: EncodingName, range: std::ops::Range<usize>) -> String {
    let bytes = &bytes[range];
    let units = |unit: fn([u8; 2]) -> u16| {
        // Half a unit at the end of a file is no character: a lone surrogate stands for it.
        let units: Vec<u16> =
            bytes.chunks(2).map(|c| c.get(1).map_or(0xD800, |&second| unit([c[0], second]))).collect();
        String::from_utf16_lossy(&units)
    };
    match encoding {
        EncodingName::Utf8 => String::from_utf8_lossy(bytes).into_owned(),
        EncodingName::Utf16Le => units(u16::from_le_bytes),
        EncodingName::Utf16Be => units(u16::from_be_bytes),
        EncodingName::Windows1252 => encoding_rs::WINDOWS_1252.decode_without_bom_handling(bytes).0.into_owned(),
    }
}

#[test]
fn scripts_inside_words() {
    let cases = [
        ("about 10^-4^ of", "about 10^{-4} of"),
        ("H~2~O and FiO~2~", "H_{2}O and FiO_{2}"),
        ("χ^2^~1~ = 5.6", "χ^{2}_{1} = 5.6"),
        ("t~28~ = 2.1", "t_{28} = 2.1"),
        ("85^a^ and 12.4^b,c^", "85^{a} and 12.4^{b,c}"),
        ("*ηp*^2^ = .1", "ηp^{2} = .1"),
        ("10^ −3^ g", "10^{−3} g"),
        ("a χ^2 ^test", "a χ^{2} test"),
        ("CLR^r & s^", "CLR^{r & s}"),
        ("**LF**^ **1** ^", "LF^{1}"),
        ("m<sup>2</sup> H<sub>2</sub>O", "m^{2} H_{2}O"),
        ("12^*^ and 13^*^", "12^{*} and 13^{*}"),
        ("12^\\*^ or", "12^{*} or"),
        ("10^4 to 10^5 cells", "10^4 to 10^5 cells"),
        ("10^-4 and 10^-5", "10^-4 and 10^-5"),
        ("~5 to ~10 kg", "~5 to ~10 kg"),
        ("(~5–~10)", "(~5–~10)"),
        ("3~5 and 6~8", "3~5 and 6~8"),
        ("~~gone~~ x~2~", "gone x_{2}"),
        ("`x^2^` y^2^", "x^2^ y^{2}"),
    ];
    for (text, expected) in cases {
        assert_eq!(scripts(text), expected, "{text}");
    }
}

#[test]
fn emphasis_with_a_space_inside() {
    let cases = [
        ("(*P *< .05)", "(P < .05)"),
        ("*p *= 0.03", "p = 0.03"),
        ("*p<*0.001", "p<0.001"),
        ("*P=*0.120", "P=0.120"),
        ("**0.006** B", "0.006 B"),
        ("(* p* = 0.03)", "(p = 0.03)"),
        ("the *23S rRNA *gene", "the 23S rRNA gene"),
        ("^a^*P *values", "aP values"),
        ("Z = −*2.9", "Z = −2.9"),
        ("*P* < 0.05 and *p *= 0.2", "P < 0.05 and p = 0.2"),
        ("0.03* and 0.04**", "0.03* and 0.04**"),
        ("12.1*b, 13.2*b", "12.1*b, 13.2*b"),
        ("*P < 0.05, **P < 0.01", "*P < 0.05, **P < 0.01"),
        ("* P < 0.05 versus placebo", "* P < 0.05 versus placebo"),
        ("TIME * GROUP * SEX", "TIME * GROUP * SEX"),
        // CommonMark 0.31.2, examples 351 and 355: not emphasis.
        ("a * foo bar*", "a * foo bar*"),
        ("foo_bar_baz", "foo_bar_baz"),
    ];
    for (text, expected) in cases {
        assert_eq!(canonical(text), expected, "{text}");
    }
    let manuscript = markdown("a *P *< .05 **b**");
    assert_eq!(marked(&manuscript.blocks[0], MarkKind::Emphasis), ["P"]);
    assert_eq!(marked(&manuscript.blocks[0], MarkKind::Strong), ["b"]);
}

#[test]
fn entities_and_escapes_are_underlined_whole() {
    let text = "Change &minus;3.1, P \\= 0.03, P\\<0.05, a &amp; b, 5\u{a0}%";
    let manuscript = markdown(text);
    assert_eq!(texts(&manuscript), ["Change −3.1, P = 0.03, P<0.05, a & b, 5\u{a0}%"]);
    let of = |quote| source_of(&manuscript, text.as_bytes(), quote);
    assert_eq!(of("−3.1"), ("&minus;3.1".into(), false, 1, 8));
    assert_eq!(of("P = 0.03"), ("P \\= 0.03".into(), false, 1, 20));
    assert_eq!(of("<"), ("\\<".into(), false, 1, 32));
    assert_eq!(of("0.05"), ("0.05".into(), true, 1, 34));
    assert_eq!(of("5\u{a0}%"), ("5\u{a0}%".into(), true, 1, 51));
}

#[test]
fn breaks_and_html() {
    assert_eq!(canonical("one\ntwo  \nthree\\\nfour"), "one two three four");
    assert_eq!(canonical("one<br>two <span class=\"x\">three</span> <!-- c -->"), "one two three");
    let manuscript = markdown("<div>\n<p>Mean <b>3.1</b> &plusmn; 0.2</p>\n<p>P &lt; 0.05</p>\n</div>\n\nAfter.");
    assert_eq!(texts(&manuscript), ["Mean 3.1 ± 0.2", "P < 0.05", "After."]);
}

#[test]
fn code_mathematics_links_and_references() {
    let text = "See `p = 0.03` or $p < 0.05$ and [the site](http://example.org/p=1) as shown [[23]], [4, 6–8].";
    let manuscript = markdown(text);
    let block = &manuscript.blocks[0];
    assert_eq!(block.text, "See p = 0.03 or p < 0.05 and the site as shown [[23]], [4, 6–8].");
    assert_eq!(marked(block, MarkKind::Code), ["p = 0.03"]);
    assert_eq!(marked(block, MarkKind::Math), ["p < 0.05"]);
    assert_eq!(marked(block, MarkKind::Link), ["the site"]);
    assert_eq!(marked(block, MarkKind::Reference), ["[[23]]", "[4, 6–8]"]);
    let manuscript = markdown("Median 10 [8–12] days, 24 [12] of 200, IQR [1–3], 95% CI [1–3], costs $5 and $7 (3$).");
    assert!(manuscript.blocks[0].marks.is_empty());
    let manuscript = markdown("    p = 0.03\n    q\n\n```\nx^2^ *a *b\n```\n\n![p = 0.04](f.png) end");
    assert_eq!(texts(&manuscript), ["p = 0.03 q", "x^2^ *a *b", "end"]);
    assert!(manuscript.blocks[0].marked(MarkKind::Code, 0, 8));
}

#[test]
fn footnotes_and_notes() {
    let manuscript = markdown("Of 85[^a] and 3[^zz].\n\n[^a]: By *t* test.\n\n[a]: P<0.05\n\n[b]: P<0.01\n");
    assert_eq!(texts(&manuscript), ["Of 85 and 3[^zz].", "By t test.", "[a]: P<0.05", "[b]: P<0.01"]);
    assert_eq!(manuscript.blocks[1].kind, BlockKind::Footnote);
    assert_eq!(marked(&manuscript.blocks[0], MarkKind::Reference), ["[^zz]"]);
}

#[test]
fn tables() {
    let text = "**Table 1.** Outcomes\n\n| Outcome | A (n = 12) | *P* |\r\n|---|:-:|--:|\r\n| Pain, mm^2^ | 3.1 ± 0.2* | .03 |\r\n\
                | a \\| b | x<br>y |\r\n| 1 | 2 | 3 | 0.04 |\r\n\r\n* Chi-square test\r\n";
    let manuscript = markdown(text);
    let kinds: Vec<_> = manuscript.blocks.iter().map(|b| &b.kind).collect();
    assert!(matches!(kinds[..], [BlockKind::Caption, BlockKind::Table(_), BlockKind::Paragraph]), "{kinds:?}");
    assert_eq!(
        manuscript.blocks[1].text,
        "Outcome\tA (n = 12)\tP\t\nPain, mm2\t3.1 ± 0.2*\t.03\t\na | b\tx y\t\t\n1\t2\t3\t0.04\n"
    );
    assert_eq!(manuscript.blocks[2].text, "* Chi-square test");
    let BlockKind::Table(grid) = kinds[1] else { unreachable!() };
    assert_eq!((grid.rows, grid.columns, grid.header_rows), (4, 4, 1));
    let at = manuscript.blocks[1].text.find(".03").unwrap();
    let place = manuscript.locate(Span::new(1, at, at + 3));
    assert_eq!((&text[place.start..place.end], place.line), (".03", 5));
    let cell = place.cell.unwrap();
    assert_eq!((cell.table, cell.row, cell.column), (0, 1, 2));
    // An empty cell has a place too.
    let empty = grid.cells.iter().find(|c| c.row == 2 && c.column == 2).unwrap();
    assert_eq!(manuscript.locate(Span::new(1, empty.start as usize, empty.start as usize)).line, 6);
}

#[test]
fn captions_stand_before_tables_or_name_one() {
    let table = "\n\n| a | b |\n|---|---|\n| 1 | 2 |\n\n";
    let of = |text: &str| markdown(&format!("{text}{table}")).blocks[0].kind.clone();
    assert_eq!(of("Table 2 Baseline values"), BlockKind::Caption);
    assert_eq!(of("Table\u{a0}1. Demographic data"), BlockKind::Caption);
    assert_eq!(of("### Table S1: More"), BlockKind::Caption);
    assert_eq!(of("Table 2 shows the changes."), BlockKind::Paragraph);
    assert_eq!(of("Tables were made."), BlockKind::Paragraph);
    let manuscript = markdown(&format!("a{table}b{table}"));
    assert_eq!(manuscript.locate(Span::new(3, 0, 1)).cell.unwrap().table, 1);
}

#[test]
fn sections_inherit_their_kind() {
    let manuscript = markdown(
        "---\ntitle: A trial\n---\n# A trial\n\nx\n\n## Abstract\n\n### Results\n\ny\n\n## Methods\n\n### Patients\n\nz\n\n\
         **Results**\n\nw\n\n## Odds and ends\n\nv\n",
    );
    let of = |text: &str| {
        let block = manuscript.blocks.iter().find(|b| b.text == text).unwrap();
        let section = &manuscript.sections[block.section as usize];
        (section.kind, section.in_abstract)
    };
    assert_eq!(of("x"), (SectionKind::Title, false));
    assert_eq!(of("y"), (SectionKind::Results, true));
    assert_eq!(of("z"), (SectionKind::Methods, false));
    assert_eq!(of("w"), (SectionKind::Results, false));
    assert_eq!(of("v"), (SectionKind::Unknown, false));
    assert_eq!(manuscript.blocks[0].text, "A trial");
}

#[test]
fn lists_quotes_and_rules_keep_their_text() {
    let text = "---\n\nOne\n\n---\n\n## Two\n\n---\n\n- a\n- b\n  - c\n\n> q *r*\n> s\n\n1. d\n\n   e\n";
    let manuscript = markdown(text);
    assert_eq!(texts(&manuscript), ["One", "Two", "a", "b", "c", "q r s", "d", "e"]);
    assert_eq!(manuscript.blocks[4].kind, BlockKind::ListItem);
    assert_eq!(manuscript.blocks[5].kind, BlockKind::Paragraph);
}

#[test]
fn bom_and_crlf_leave_places_exact() {
    let text = "\u{feff}# Résultats\r\n\r\nα ± β; *P* = 0.03\r\nand P = 0.04\r\n";
    let manuscript = markdown(text);
    assert_eq!(texts(&manuscript), ["Résultats", "α ± β; P = 0.03 and P = 0.04"]);
    assert_eq!(source_of(&manuscript, text.as_bytes(), "= 0.03"), ("= 0.03".into(), true, 3, 12));
    assert_eq!(source_of(&manuscript, text.as_bytes(), "P = 0.04"), ("P = 0.04".into(), true, 4, 5));
}

#[test]
fn utf16_places_are_bytes_of_the_file() {
    let text = "# Results\n\nThe mean was 3.1 ± 0.2 𝑝, *P* = 0.03.\n".repeat(60);
    for (bom, unit) in [([0xFF, 0xFE], u16::to_le_bytes as fn(u16) -> [u8; 2]), ([0xFE, 0xFF], u16::to_be_bytes)] {
        let mut bytes = bom.to_vec();
        bytes.extend(text.encode_utf16().flat_map(unit));
        let (manuscript, notices) = read(&bytes, "draft.md", None).unwrap();
        assert!(notices.is_empty());
        assert_eq!(manuscript.blocks.len(), 120);
        check(&manuscript, &bytes);
    }
}

#[test]
fn other_encodings_are_read_with_a_notice() {
    let bytes = b"Mean 3.1 \xB1 0.2, 3\x965 days; P\xA0= 0.03.".repeat(50);
    let (manuscript, notices) = read(&bytes, "draft.txt", None).unwrap();
    assert!(notices.len() == 1 && notices[0].0.contains("Windows-1252"), "{notices:?}");
    assert!(manuscript.blocks[0].text.starts_with("Mean 3.1 ± 0.2, 3–5 days; P\u{a0}= 0.03."));
    check(&manuscript, &bytes);
    let cut = "Mean 3.1 ± 0.2 ±".as_bytes();
    let (manuscript, notices) = read(&cut[..cut.len() - 1], "draft.txt", None).unwrap();
    assert!(notices.len() == 1 && notices[0].0.contains("one place"), "{notices:?}");
    assert_eq!(texts(&manuscript), ["Mean 3.1 ± 0.2 \u{fffd}"]);
    check(&manuscript, &cut[..cut.len() - 1]);
}

#[test]
fn what_is_no_text_says_what_to_do() {
    assert_eq!(read(b"", "a.md", None).unwrap_err(), Unreadable::Empty);
    assert_eq!(read(b"\xEF\xBB\xBF \r\n", "a.md", None).unwrap_err(), Unreadable::Empty);
    for bytes in [&b"PK\x03\x04rest"[..], b"%PDF-1.7", b"abc\0def", b"\x89PNG\r\n"] {
        let error = read(bytes, "a.md", None).unwrap_err();
        assert_eq!(error, Unreadable::Binary);
        assert!(error.to_string().contains("please"));
    }
}

#[test]
fn the_format_follows_name_then_content() {
    let of = |text: &str, name, hint| read(text.as_bytes(), name, hint).unwrap().0.source.format;
    assert_eq!(of("a *b* c", "x.MD", None), "markdown");
    assert_eq!(of("# a", "x.txt", None), "text");
    assert_eq!(of("x\n\n## Results\n", "-", None), "markdown");
    assert_eq!(of("| a |\n|---|\n", "-", None), "markdown");
    assert_eq!(of("P = 0.03 #1\n-----\n", "-", None), "text");
    assert_eq!(of("# a", "x.md", Some(Format::Plain)), "text");
}

#[test]
fn plain_text_joins_lines_and_words() {
    let cases = [
        ("a signifi-\ncant change", "a significant change"),
        ("from 0.5-\n1.2 mm", "from 0.5-1.2 mm"),
        ("a mean of -\n0.4 mm", "a mean of -0.4 mm"),
        ("the P-\r\nvalue was", "the P-value was"),
        ("pre-\nand post-treat-\nment", "pre- and post-treatment"),
        ("COX-\n2 and vitamin-\nD", "COX-2 and vitamin-D"),
        ("soft\u{ad}\nened", "softened"),
        ("CI 3.1–\n4.5", "CI 3.1–4.5"),
        ("this -\nand that", "this - and that"),
        ("x * y ^2^ *p* ~a~", "x * y ^2^ *p* ~a~"),
    ];
    for (text, expected) in cases {
        assert_eq!(texts(&plain(text)), [expected], "{text:?}");
    }
    let text = "a signifi-\ncant change, P = 0.03";
    let manuscript = plain(text);
    assert_eq!(source_of(&manuscript, text.as_bytes(), "significant").0, "signifi-\ncant");
    assert_eq!(source_of(&manuscript, text.as_bytes(), "P = 0.03"), ("P = 0.03".into(), true, 2, 14));
}

#[test]
fn plain_text_headings() {
    let manuscript = plain(
        "\u{feff}A TRIAL OF REST\n\nAbstract\n\nWe tried.\n\n2. Methods\n\n2.1 Patients\n\nMany.\u{c}Results\n\n\
         Results: P = 0.03\n\n12 patients left\n\nNo difference was seen.\n\nTable 1. Values\n",
    );
    let headings = manuscript.blocks.iter().filter(|b| b.kind == BlockKind::Heading);
    let headings: Vec<_> = headings.map(|b| b.text.as_str()).collect();
    assert_eq!(headings, ["A TRIAL OF REST", "Abstract", "2. Methods", "2.1 Patients", "Results"]);
    let many = manuscript.blocks.iter().find(|b| b.text == "Many.").unwrap();
    assert_eq!(manuscript.sections[many.section as usize].kind, SectionKind::Methods);
    assert_eq!(manuscript.blocks.last().unwrap().kind, BlockKind::Caption);
}

/// Hostile text of a few hundred kilobytes must not take minutes; the bound is generous, because
/// the machine may be busy, and still far below what a quadratic pass would need.
#[test]
fn hostile_text_is_read_in_time() {
    let start = std::time::Instant::now();
    for unit in ["[", "±", "*", "^", "^a ", "~a", "*a ", "a* ", "[[1", "x^2^ ", "*p *= ", "<b>", "$a ", "&lt;", "- a\n"]
    {
        let text = format!("x{}", unit.repeat(100_000));
        let (manuscript, _) = read(text.as_bytes(), "draft.md", None).unwrap();
        let _ = read(text.as_bytes(), "draft.txt", None).unwrap();
        let last = manuscript.blocks.len() - 1;
        let end = manuscript.blocks[last].text.chars().count().min(20_000);
        for i in 0..end {
            let at = manuscript.blocks[last].text.floor_char_boundary(i);
            manuscript.locate(Span::new(last, at, at));
            manuscript.blocks[last].marked(MarkKind::Math, at as u32, at as u32 + 1);
        }
    }
    assert!(start.elapsed().as_secs() < 120, "{:?}", start.elapsed());
}

/// Text made of what gives readers of Markdown trouble.
fn fragments() -> impl Strategy<Value = String> {
    let bits = vec![
        "*",
        "**",
        "_",
        "^",
        "~",
        "~~",
        "`",
        "```\n",
        "$",
        "|",
        "\\",
        "[",
        "]",
        "[^1]",
        "[^1]: ",
        "[a]: ",
        "(",
        ")",
        "<",
        ">",
        "<sup>",
        "</sup>",
        "<br>",
        "<div>\n",
        "<!--",
        "-->",
        "&minus;",
        "&lt;",
        "&",
        "\n",
        "\r\n",
        "\r",
        "\n\n",
        "    ",
        "\t",
        " ",
        "# ",
        "- ",
        "* ",
        "1. ",
        "> ",
        "---\n",
        "| a | b |\n|---|---|\n",
        "| 1 |\n",
        "Table 1. ",
        "P",
        "p = 0.03",
        "2",
        "10",
        "−",
        "±",
        "χ",
        "\u{a0}",
        "\u{2009}",
        "𝑝",
        "word",
        "signifi-\n",
        "cant",
        "\u{feff}",
        "\u{c}",
        "[12]",
        "![x](y)",
        "[x](y)",
        "\u{fffd}",
        "Results\n\n",
        ".",
        ",",
    ];
    prop::collection::vec(prop::sample::select(bits), 0..60).prop_map(|v| v.concat())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, max_shrink_iters: 300, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn any_markdown_keeps_its_places(text in fragments()) {
        for format in [Format::Markdown, Format::Plain] {
            if let Ok((manuscript, _)) = read(text.as_bytes(), "x", Some(format)) {
                check(&manuscript, text.as_bytes());
            }
        }
    }

    #[test]
    fn any_utf16_keeps_its_places(text in fragments(), odd in any::<bool>()) {
        let mut bytes = vec![0xFF, 0xFE];
        bytes.extend(text.encode_utf16().flat_map(u16::to_le_bytes));
        bytes.extend(odd.then_some(0x41));
        if let Ok((manuscript, _)) = read(&bytes, "x.md", None) {
            check(&manuscript, &bytes);
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 80, max_shrink_iters: 300, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn any_bytes_give_a_manuscript(bytes in prop::collection::vec(any::<u8>(), 0..300), text in fragments()) {
        // Random bytes nearly always hold a NUL, so they are also tried without.
        let others: Vec<u8> = bytes.iter().map(|&b| b.max(1)).chain(text.bytes()).collect();
        for bytes in [&bytes, &others] {
            for name in ["x.md", "x.txt", "-"] {
                if let Ok((manuscript, _)) = read(bytes, name, None) {
                    check(&manuscript, bytes);
                }
            }
        }
    }
}
