//! JATS: what a reader sees of an article, and where it stands in the file. All texts are invented.

use proptest::prelude::*;
use std::fmt::Write as _;
use std::time::{Duration, Instant};
use tallyproof::audit::{audit, is_manuscript};
use tallyproof::intake::{Format, Unreadable, read};
use tallyproof::manuscript::{Block, BlockKind, Grid, Manuscript, Mark, MarkKind, SectionKind};
use tallyproof::text::{EncodingName, Span};

fn jats(text: &str) -> (Manuscript, Vec<String>) {
    let (manuscript, notices) = read(text.as_bytes(), "draft.xml", None).unwrap();
    assert_eq!(manuscript.source.format, "jats");
    check(&manuscript, text.as_bytes());
    (manuscript, notices.into_iter().map(|n| n.0).collect())
}

/// An article that is well-formed and known.
fn sound(text: &str) -> Manuscript {
    let (manuscript, notices) = jats(text);
    assert!(notices.is_empty(), "{notices:?}");
    manuscript
}

fn body(inner: &str) -> Manuscript {
    sound(&format!("<article><body>{inner}</body></article>"))
}

/// The one block of a body.
fn block(inner: &str) -> Block {
    let manuscript = body(inner);
    assert_eq!(manuscript.blocks.len(), 1, "{:?}", texts(&manuscript));
    manuscript.blocks[0].clone()
}

fn texts(manuscript: &Manuscript) -> Vec<&str> {
    manuscript.blocks.iter().map(|b| b.text.as_str()).collect()
}

fn kinds(manuscript: &Manuscript) -> Vec<String> {
    let name = |b: &Block| format!("{:?}", b.kind).split('(').next().unwrap_or("").to_owned();
    manuscript.blocks.iter().map(|b| format!("{}: {}", name(b), b.text)).collect()
}

fn marked(block: &Block, kind: MarkKind) -> Vec<&str> {
    let of_kind = block.marks.iter().filter(|m| m.kind == kind);
    of_kind.map(|m| &block.text[m.start as usize..m.end as usize]).collect()
}

fn grid(manuscript: &Manuscript) -> (&Block, &Grid) {
    let found = manuscript.blocks.iter().find_map(|b| match &b.kind {
        BlockKind::Table(grid) => Some((b, grid)),
        _ => None,
    });
    found.expect("a table")
}

/// Cells as `row,column+rows x columns: text`, spans only where they are.
fn cells(manuscript: &Manuscript) -> Vec<String> {
    let (block, grid) = grid(manuscript);
    let show = |c: &tallyproof::manuscript::Cell| {
        let mut s = format!("{},{}", c.row, c.column);
        if (c.row_span, c.column_span) != (1, 1) {
            write!(s, "+{}x{}", c.row_span, c.column_span).unwrap();
        }
        format!("{s} {}", &block.text[c.start as usize..c.end as usize])
    };
    grid.cells.iter().map(show).collect()
}

/// What holds for every manuscript.
fn check(manuscript: &Manuscript, bytes: &[u8]) {
    let source = &manuscript.source.decoded;
    for (i, block) in manuscript.blocks.iter().enumerate() {
        let text = &block.text;
        assert!((block.section as usize) < manuscript.sections.len());
        for (here, there) in block.pieces.exact() {
            assert_eq!(text.get(here), source.text.get(there), "an exact piece is the same text");
        }
        let mut previous = 0;
        for m in &block.marks {
            assert!(m.start < m.end && m.end - m.start <= Mark::LONGEST && previous <= m.start, "{m:?} in {text:?}");
            assert!(text.get(m.start as usize..m.end as usize).is_some(), "marks on boundaries: {m:?} in {text:?}");
            previous = m.start;
        }
        if let BlockKind::Table(grid) = &block.kind {
            let (mut at, mut last) = (0, None);
            for cell in &grid.cells {
                assert_eq!(cell.start, at);
                assert!(text[cell.end as usize..].starts_with(['\n', '\t']));
                assert!(!text[cell.start as usize..cell.end as usize].contains(['\t', '\n']));
                assert!(last < Some((cell.row, cell.column)), "cells in order, none twice");
                assert!(cell.row + cell.row_span <= grid.rows && cell.column + cell.column_span <= grid.columns);
                assert!(cell.row_span > 0 && cell.column_span > 0);
                last = Some((cell.row, cell.column));
                at = cell.end + 1;
            }
            assert_eq!(at as usize, text.len());
            assert!(grid.header_rows <= grid.rows);
        } else {
            assert!(!text.contains(['\n', '\t']) && !text.trim().is_empty());
        }
        let bounds: Vec<usize> = text.char_indices().map(|(i, _)| i).chain([text.len()]).take(300).collect();
        for (n, &start) in bounds.iter().enumerate() {
            for &end in [n, n + 1, n + 9].iter().filter_map(|&n| bounds.get(n)) {
                let place = manuscript.locate(Span::new(i, start, end));
                assert!(place.start <= place.end && place.end <= bytes.len() && place.line > 0);
                let Some(range) = block.pieces.source(start, end) else {
                    assert_eq!(start, text.len(), "all text has a source");
                    continue;
                };
                let found = source.text.get(range.start..range.end).expect("on character boundaries");
                assert!(!range.exact || found == &text[start..end]);
            }
        }
    }
}

#[test]
fn an_article_has_its_parts() {
    let m = sound(
        "<?xml version=\"1.0\"?>\n<!DOCTYPE article PUBLIC \"-//NLM//DTD JATS\" \"far.dtd\">\n<!-- P = 0.9 -->\n<article>
        <front><article-meta><title-group><article-title>Oat   beds for\n <italic>geese</italic></article-title></title-group>
        <contrib-group><contrib><name><surname>Nobody</surname></name></contrib></contrib-group>
        <abstract><sec><title>Background</title><p>Geese sleep.</p></sec><sec><title>Results</title><p>P = 0.03.</p></sec></abstract>
        <abstract abstract-type=\"graphical\"><p>A goose.</p></abstract>
        <abstract abstract-type=\"teaser\"><p>Geese!</p></abstract><kwd-group><kwd>goose</kwd></kwd-group></article-meta></front>
        <body><sec sec-type=\"intro\"><title>Why geese</title><p>One.</p></sec>
        <sec><label>2.</label><title>Methods</title><sec><title>Beds</title><p>Two.</p></sec><p>After.</p></sec>
        <sec sec-type=\"results\"><p>Three.<?note x?></p><sec><title>Objective steps</title><p>Four.</p></sec></sec></body>
        <back><ack><title>Thanks</title><p>To all.</p></ack><sec><title>Interests</title><p>None.</p></sec>
        <ref-list><ref><mixed-citation>P = 0.001</mixed-citation></ref></ref-list></back>
        <floats-group><fig><label>Figure 1</label><caption><p>Geese.</p></caption></fig></floats-group></article>",
    );
    assert_eq!(
        kinds(&m),
        [
            "Heading: Oat beds for geese",
            "Heading: Background",
            "Paragraph: Geese sleep.",
            "Heading: Results",
            "Paragraph: P = 0.03.",
            "Heading: Why geese",
            "Paragraph: One.",
            "Heading: 2. Methods",
            "Heading: Beds",
            "Paragraph: Two.",
            "Paragraph: After.",
            "Paragraph: Three.",
            "Heading: Objective steps",
            "Paragraph: Four.",
            "Heading: Thanks",
            "Paragraph: To all.",
            "Heading: Interests",
            "Paragraph: None.",
            "Caption: Figure 1 Geese.",
        ]
    );
    let section = |text: &str| &m.sections[m.blocks.iter().find(|b| b.text == text).expect(text).section as usize];
    use SectionKind::*;
    let expected = [
        ("Oat beds for geese", Title, false, 1),
        ("Geese sleep.", Introduction, true, 3),
        ("P = 0.03.", Results, true, 3),
        ("One.", Introduction, false, 2),
        ("Two.", Methods, false, 3),
        ("After.", Methods, false, 2),
        ("Three.", Results, false, 2),
        ("Four.", Results, false, 3),
        ("To all.", Back, false, 3),
        ("None.", Back, false, 3),
        ("Figure 1 Geese.", Unknown, false, 2),
    ];
    for (text, kind, in_abstract, level) in expected {
        let s = section(text);
        assert_eq!((s.kind, s.in_abstract, s.level), (kind, in_abstract, level), "{text}");
    }
    let two = section("Two.");
    assert_eq!(m.sections[two.parent.unwrap() as usize].title, "2. Methods");
    let (_, notices) = jats("<article><body><p>A.</p></body><response><body><p>No.</p></body></response></article>");
    assert!(notices.len() == 1 && notices[0].contains("attached"), "{notices:?}");
}

#[test]
fn lists_quotes_boxes_and_notes_are_blocks() {
    let m = body(
        "<p>Before <list><list-item><label>1.</label><p>first</p><p>more</p></list-item><list-item><p>second</p></list-item></list> after.</p>
         <disp-quote><p>Quoth.</p></disp-quote><boxed-text><title>Box</title><p>Boxed.</p></boxed-text>
         <p>A sentence<fn><label>a</label><p>The note.</p></fn> goes on
         <fig><label>Fig 2</label><caption><title>Weights</title><p>Mean (SD).</p></caption><graphic/></fig>to its end.</p>",
    );
    assert_eq!(
        kinds(&m),
        [
            "Paragraph: Before",
            "ListItem: 1. first",
            "ListItem: more",
            "ListItem: second",
            "Paragraph: after.",
            "Paragraph: Quoth.",
            "Paragraph: Box",
            "Paragraph: Boxed.",
            "Paragraph: A sentence goes on to its end.",
            "Footnote: a The note.",
            "Caption: Fig 2 Weights. Mean (SD).",
        ]
    );
    let note = m.blocks.iter().find(|b| b.kind == BlockKind::Footnote).unwrap();
    assert_eq!(marked(note, MarkKind::Superscript), ["a"]);
}

#[test]
fn tables_have_spans_heads_captions_and_notes() {
    let m = body(
        "<table-wrap><label>Table 1</label><caption><title>Outcomes</title><p>Values are mean (SD)</p></caption>
         <alternatives><graphic/><table><colgroup><col/><col/></colgroup>
         <thead><tr><th rowspan=\"2\">Item</th><th colspan='2'>Arm</th><th rowspan=\"2\">P</th></tr>
         <tr><th>Oats<break/>(n = 20)</th><th>Hay</th></tr><tr><td colspan=\"4\"><hr/></td></tr></thead>
         <tbody><tr><td>Sleep</td><td>12.3 <sup>a</sup></td><td>&#8722;4.5</td><td>0.03<xref ref-type=\"table-fn\">b</xref></td></tr></tbody>
         <tbody><tr><td rowspan='0'>Rest</td><td colspan=\"9999999999\"/></tr><tr><td><p>1</p><p>2</p></td></tr></tbody>
         <tfoot><tr><td>All</td></tr></tfoot></table></alternatives>
         <table-wrap-foot><fn><label>a</label><p>Adjusted.</p><p>Twice.</p></fn><fn><p><sup>b</sup>Exact.</p></fn><p>Plain.</p><attrib>* p &lt; 0.05</attrib></table-wrap-foot></table-wrap>",
    );
    let kinds = kinds(&m);
    assert_eq!(kinds[0], "Caption: Table 1 Outcomes. Values are mean (SD)");
    assert!(kinds[1].starts_with("Table"));
    assert_eq!(
        kinds[2..],
        ["Footnote: a Adjusted. Twice.", "Footnote: bExact.", "Footnote: Plain.", "Footnote: * p < 0.05"]
    );
    let (block, grid) = grid(&m);
    assert_eq!((grid.rows, grid.columns, grid.header_rows), (6, 69 - 1, 2));
    assert_eq!(
        cells(&m),
        [
            "0,0+2x1 Item",
            "0,1+1x2 Arm",
            "0,3+2x1 P",
            "1,1 Oats (n = 20)",
            "1,2 Hay",
            "2,0 Sleep",
            "2,1 12.3 a",
            "2,2 −4.5",
            "2,3 0.03b",
            "3,0+2x1 Rest",
            "3,1+1x67 ",
            "4,1 1 2",
            "5,0 All",
        ]
    );
    assert_eq!(marked(block, MarkKind::Superscript), ["a", "b"]);
}

#[test]
fn tables_without_a_head_and_tables_as_pictures() {
    let m = body("<table><tr><th>A</th><th>B</th></tr><tr><th>1</th><td>2</td></tr></table>");
    assert_eq!(grid(&m).1.header_rows, 1);
    let (m, notices) = jats(
        "<article><body><table-wrap><label>Table 1.</label><caption><p>Geese</p></caption><graphic/></table-wrap></body></article>",
    );
    assert_eq!(kinds(&m), ["Caption: Table 1. Geese"]);
    assert_eq!(notices, ["One table is a picture, whose figures were not read."]);
}

#[test]
fn marks_follow_the_markup() {
    let b = block(
        "<p><italic>P</italic>=3 &#xD7; 10<sup>&#x2212;4</sup>, H<sub>2</sub>O, <bold>so</bold> <monospace>x=1</monospace></p>",
    );
    assert_eq!(b.text, "P=3 × 10−4, H2O, so x=1");
    let of = |kind| marked(&b, kind);
    assert_eq!(of(MarkKind::Superscript), ["−4"]);
    assert_eq!(of(MarkKind::Subscript), ["2"]);
    assert_eq!(of(MarkKind::Emphasis), ["P"]);
    assert_eq!(of(MarkKind::Strong), ["so"]);
    assert_eq!(of(MarkKind::Code), ["x=1"]);
    // Markdown's own signs are only signs here.
    assert_eq!(block("<p>a^2^ and *b* and H~2~</p>").text, "a^2^ and *b* and H~2~");
}

#[test]
fn references_to_the_literature_are_marked_with_their_brackets() {
    let x = |n: u32| format!("<xref ref-type=\"bibr\" rid=\"b{n}\">{n}</xref>");
    let cases = [
        (format!("in 2003 [{}]", x(12)), vec!["[12]"]),
        (format!("seen [{}, {}&#8211;{}] twice", x(1), x(3), x(5)), vec!["[1, 3–5]"]),
        (format!("seen<sup>{},{}</sup> twice", x(1), x(3)), vec!["1,3"]),
        (format!("seen ({}) twice", x(7)), vec!["(7)"]),
        (format!("was 10{} here", x(7)), vec!["7"]),
        ("<xref ref-type=\"table\" rid=\"t\">Table 2</xref> shows".into(), vec![]),
    ];
    for (text, expected) in cases {
        let b = block(&format!("<p>{text}</p>"));
        assert_eq!(marked(&b, MarkKind::Reference), expected, "{}", b.text);
        assert!(marked(&b, MarkKind::Superscript).is_empty());
    }
}

#[test]
fn simple_mathematics_is_text_and_other_mathematics_is_not_read() {
    let math = |inner: &str| {
        block(&format!(
            "<p>so <inline-formula><alternatives><tex-math>\\x</tex-math><mml:math>{inner}</mml:math></alternatives></inline-formula> it is</p>"
        ))
    };
    let b = math(" <mml:msup><mml:mi>χ</mml:mi> <mml:mn>2</mml:mn></mml:msup><mml:mo> = </mml:mo><mml:mn>4.1</mml:mn>");
    assert_eq!((b.text.as_str(), marked(&b, MarkKind::Superscript)), ("so χ2=4.1 it is", vec!["2"]));
    let b =
        math("<mml:msubsup><mml:mi>a</mml:mi><mml:mn>1</mml:mn><mml:mrow><mml:mn>2</mml:mn></mml:mrow></mml:msubsup>");
    assert_eq!((marked(&b, MarkKind::Subscript), marked(&b, MarkKind::Superscript)), (vec!["1"], vec!["2"]));
    let b = math("<mml:mfrac><mml:mn>1</mml:mn><mml:msup><mml:mi>a</mml:mi><mml:mn>2</mml:mn></mml:msup></mml:mfrac>");
    assert_eq!((b.text.as_str(), marked(&b, MarkKind::Math)), ("so 1a2 it is", vec!["1a2"]));
    assert!(marked(&b, MarkKind::Superscript).is_empty());
    let tex = |t: &str| block(&format!("<p>so <inline-formula><tex-math>{t}</tex-math></inline-formula> it is</p>"));
    assert_eq!(tex("$P &lt; 0.05$").text, "so P < 0.05 it is");
    assert_eq!(tex("<![CDATA[$12 \\pm 3$]]>").text, "so 12 ± 3 it is");
    assert_eq!(marked(&tex("\\frac{1}{2}"), MarkKind::Math), ["\\frac{1}{2}"]);
}

#[test]
fn entities_stand_for_their_characters() {
    let m = sound(
        "<!DOCTYPE article [<!ENTITY unit \"mg&#x2009;l\"><!ENTITY pl '&plusmn;'>]>
         <article><body><p>1 &#x0003c; 2 &gt; 0 &amp; 3&thinsp;&plusmn;&nbsp;4 &le; 5&unit; 6&pl;7 a&shy;b<![CDATA[ <i> & ]]>\u{ad}x</p></body></article>",
    );
    assert_eq!(texts(&m), ["1 < 2 > 0 & 3\u{2009}±\u{a0}4 ≤ 5mg\u{2009}l 6±7 ab <i> & x"]);
    let (m, notices) = jats("<article><body><p>3 &nosuch; 4 & 5 P < 0.05</p></body></article>");
    assert_eq!(texts(&m), ["3 &nosuch; 4 & 5 P < 0.05"]);
    assert!(notices.iter().any(|n| n.contains("&nosuch;")), "{notices:?}");
    assert!(notices.iter().any(|n| n.contains("line 1")), "{notices:?}");
}

#[test]
fn places_lead_back_to_the_file() {
    let text = "<article><body>\n<p>Sheep é slept;\n  <italic>P</italic> = 0.03 &#x3c; 0.05.</p></body></article>";
    let (m, _) = jats(text);
    let find = |quote: &str| {
        let start = m.blocks[0].text.find(quote).unwrap_or_else(|| panic!("{quote} in {:?}", texts(&m)));
        m.locate(Span::new(0, start, start + quote.len()))
    };
    let place = find("slept");
    assert_eq!((&text[place.start..place.end], place.exact, place.line, place.column), ("slept", true, 2, 12));
    let place = find("= 0.03");
    assert_eq!((&text[place.start..place.end], place.exact, place.line), ("= 0.03", true, 3));
    let place = find("P = 0.03");
    assert_eq!((&text[place.start..place.end], place.exact), ("P</italic> = 0.03", false));
    let place = find("<");
    assert_eq!((&text[place.start..place.end], place.exact), ("&#x3c;", false));
}

#[test]
fn encodings_are_as_marked_or_declared() {
    let text = "<?xml version=\"1.0\" encoding=\"ISO-8859-1\"?><article><body><p>é 3 ± 4</p></body></article>";
    let (latin, _, _) = encoding_rs::WINDOWS_1252.encode(text);
    let (m, notices) = read(&latin, "x.nxml", None).unwrap();
    assert_eq!((texts(&m), m.source.decoded.encoding), (vec!["é 3 ± 4"], EncodingName::Windows1252));
    assert!(notices.is_empty());
    check(&m, &latin);
    // A declaration that is not so.
    let m = sound(text);
    assert_eq!((texts(&m), m.source.decoded.encoding), (vec!["é 3 ± 4"], EncodingName::Utf8));
    for (marked, unit) in
        [(true, u16::to_le_bytes as fn(u16) -> [u8; 2]), (false, u16::to_le_bytes), (false, u16::to_be_bytes)]
    {
        let text = text.replace("ISO-8859-1", "UTF-16");
        let units = marked.then_some(0xFEFF).into_iter().chain(text.encode_utf16());
        let bytes: Vec<u8> = units.flat_map(unit).collect();
        let (m, _) = read(&bytes, "-", None).unwrap();
        assert_eq!(texts(&m), ["é 3 ± 4"]);
        check(&m, &bytes);
        let place = m.locate(Span::new(0, 3, 4));
        assert_eq!(&bytes[place.start..place.end], &unit(u16::from(b'3')));
    }
}

#[test]
fn jats_is_known_by_its_content() {
    let article = "<article><body><p>A.</p></body></article>";
    let format = |text: &str, name: &str| read(text.as_bytes(), name, None).map(|(m, _)| m.source.format);
    assert_eq!(format(article, "-"), Ok("jats"));
    assert_eq!(format(&format!("\u{feff}\n<?xml version='1.0'?>{article}"), "a.txt"), Ok("jats"));
    assert_eq!(format(&format!("<!DOCTYPE article>{article}"), "a.dat"), Ok("jats"));
    assert_eq!(format(&format!("<set><record>{article}</record></set>"), "a.xml"), Ok("jats"));
    assert_eq!(format("# Geese\n\n<article>", "a.md"), Ok("markdown"));
    for other in ["<?xml version='1.0'?><svg/>", "<!-- no end", "words", "<", "<?xml"] {
        assert_eq!(format(other, "a.xml"), Err(Unreadable::OtherXml), "{other}");
    }
    assert!(Unreadable::OtherXml.to_string().contains("not a JATS article"));
    assert!(is_manuscript("A.XML") && is_manuscript("b.nxml"));
}

#[test]
fn broken_xml_is_read_as_far_as_it_goes() {
    let whole = "<article><body><sec><title>Results</title><p>One P = 0.03.</p><p>Two <italic>x</italic> y.</p></sec></body></article>";
    for end in 9..whole.len() {
        let (manuscript, notices) = jats(&whole[..end]);
        assert!(!notices.is_empty());
        assert!(end < 62 || texts(&manuscript)[1].starts_with("One P = 0.03."), "{end}");
    }
    let (m, notices) = jats("<article><body><p>One <bold>two</italic> three</p></oops><p>Four</body></article>");
    assert_eq!(texts(&m), ["One two three", "Four"]);
    assert!(notices.iter().any(|n| n.contains("not well-formed")), "{notices:?}");
    let (_, notices) = jats("<article/>");
    assert!(notices.iter().any(|n| n.contains("No title, abstract or body")), "{notices:?}");
}

#[test]
fn hostile_xml_costs_no_more_than_its_length() {
    let mut bomb = String::from("<!DOCTYPE article [<!ENTITY l0 'lol'><!ENTITY e0 ''>");
    for i in 1..30 {
        let ten = |c: char| format!("&{c}{};", i - 1).repeat(10);
        write!(bomb, "<!ENTITY l{i} '{}'><!ENTITY e{i} \"{}\">", ten('l'), ten('e')).unwrap();
    }
    let many = "&l2;".repeat(100_000);
    write!(bomb, "]><article><body><p>P = 0.03 &l29; &e29; {many}</p></body></article>").unwrap();
    let n = 100_000;
    let deep = |open: &str, close: &str| {
        format!("<article><body>{}P = 0.03{}</body></article>", open.repeat(n), close.repeat(n))
    };
    let wide = |inner: String| format!("<article><body><p>P = 0.03</p>{inner}</body></article>");
    let texts = [
        bomb,
        deep("<sec>", "</sec>"),
        deep("<p>", ""),
        deep("<fn>", "</fn>"),
        deep("<table><tr><td>", ""),
        deep("<sup><xref ref-type='bibr'>", "</xref></sup>"),
        wide("<".repeat(n)),
        wide("<a ".repeat(n)),
        wide("</a>".repeat(n)),
        wide("<!--".repeat(n)),
        wide("<p>&".repeat(n)),
        wide("<sup>".repeat(n) + &"</sub>".repeat(n)),
        wide(format!("<p id=\"{}\">x</p>", "y".repeat(10 * n))),
        wide(format!("<xref {}>x</xref>", "a='1' ".repeat(n))),
        wide(format!("<table>{}</table>", "<tr><td rowspan='60000' colspan='60000'>1</td></tr>".repeat(20_000))),
        wide(format!(
            "<table><tr>{}</tr>{}</table>",
            "<td>1</td>".repeat(20_000),
            "<tr><td>2</td></tr>".repeat(20_000)
        )),
        wide("<p>x<fn><p>y</p></fn>".repeat(20_000)),
        wide("<math><msup>".repeat(20_000)),
        wide("<inline-formula><tex-math>{".repeat(20_000)),
    ];
    for (i, text) in texts.iter().enumerate() {
        let start = Instant::now();
        let (manuscript, _) = read(text.as_bytes(), "x.xml", None).unwrap();
        assert!(manuscript.blocks.iter().any(|b| b.text.contains("P = 0.03")), "number {i}");
        assert!(start.elapsed() < Duration::from_secs(5), "number {i} took {:?}", start.elapsed());
    }
}

const SAMPLE: &str = "<?xml version=\"1.0\"?><!DOCTYPE article [<!ENTITY pm '&plusmn;'>]><article><front><article-meta>\
    <title-group><article-title>Hay</article-title></title-group><abstract><p>A &lt; b.</p></abstract></article-meta></front>\
    <body><sec><label>1</label><title>Results</title><p>So <italic>P</italic> = 0.03 [<xref ref-type=\"bibr\">3</xref>]<fn><label>a</label><p>n</p></fn>\
    <inline-formula><mml:math><mml:msup><mml:mi>r</mml:mi><mml:mn>2</mml:mn></mml:msup></mml:math></inline-formula>.</p>\
    <list><list-item><p>é</p></list-item></list><table-wrap><label>Table 1</label><caption><p>C</p></caption><table><thead><tr>\
    <th rowspan=\"2\">A</th><th colspan=\"2\">B</th></tr></thead><tbody><tr><td>3&pm;4</td><td><hr/></td></tr></tbody></table>\
    <table-wrap-foot><fn><p><sup>a</sup> x</p></fn></table-wrap-foot></table-wrap></sec></body><back><ref-list/></back></article>";

/// The sample cut at its tags, the parts dropped, doubled and shuffled.
fn mutations() -> impl Strategy<Value = String> {
    let bits: Vec<&str> = SAMPLE.split_inclusive('>').flat_map(|s| s.split_inclusive(['<', ' ', ';'])).collect();
    let count = bits.len();
    prop::collection::vec((0..count, 0..count, 0..4u8), 0..12).prop_map(move |edits| {
        let mut bits: Vec<&str> = bits.clone();
        for (a, b, kind) in edits {
            let (a, b) = (a % bits.len(), b % bits.len());
            match kind {
                0 => drop(bits.remove(a)),
                1 => bits.insert(a, bits[b]),
                2 => bits.swap(a, b),
                _ => bits.truncate(a.max(20)),
            }
        }
        bits.concat()
    })
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 300, max_shrink_iters: 300, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn any_mutation_keeps_its_places(text in mutations()) {
        if let Ok((manuscript, _)) = read(text.as_bytes(), "x.xml", Some(Format::Jats)) {
            check(&manuscript, text.as_bytes());
        }
        let _ = audit(text.as_bytes(), "x.xml");
    }

    #[test]
    fn any_bytes_are_read(bytes in prop::collection::vec(any::<u8>(), 0..200), at in 0..SAMPLE.len()) {
        let mut mixed = SAMPLE.as_bytes()[..at].to_vec();
        mixed.extend(bytes.iter().map(|b| b.max(&1)));
        mixed.extend(&SAMPLE.as_bytes()[at..]);
        for bytes in [&bytes, &mixed] {
            if let Ok((manuscript, _)) = read(bytes, "x.nxml", None) {
                check(&manuscript, bytes);
            }
        }
    }
}
