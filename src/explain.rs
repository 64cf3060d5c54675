//! The catalogue on the terminal: all rules in a list, or one with its sources and cases.

use std::io::{self, Write};

use anstyle::Style;
use tallyproof::report::galley::Galley;
use tallyproof::rule::Rule;

const PLAIN: Style = Style::new();
const BOLD: Style = Style::new().bold();
const FAINT: Style = Style::new().dimmed();

/// Every rule with its highest level, by family.
pub fn list(rules: &[Rule], out: &mut dyn Write, width: usize) -> io::Result<()> {
    let mut galley = Galley::new(out, width);
    let mut family = "";
    for rule in rules {
        let own = rule.id.split('/').next().unwrap_or("");
        if own != family {
            if !family.is_empty() {
                galley.gap()?;
            }
            galley.across(&[(BOLD, own)])?;
            family = own;
        }
        galley.note(FAINT, rule.level.name());
        galley.text(&[(BOLD, &rule.id)])?;
        galley.text(&[(PLAIN, &rule.title)])?;
    }
    galley.gap()?;
    galley.across(&[(
        FAINT,
        "The level is the highest that a query of the rule can have. One rule with its sources: tallyproof rules NAME",
    )])
}

/// One rule with everything that its file says.
pub fn rule(rule: &Rule, out: &mut dyn Write, width: usize) -> io::Result<()> {
    let mut galley = Galley::new(out, width);
    galley.across(&[(BOLD, &rule.id)])?;
    galley.across(&[(PLAIN, &rule.title)])?;
    galley.gap()?;
    let mut part = |name: &str, texts: &[&str]| -> io::Result<()> {
        galley.note(FAINT, name);
        for text in texts {
            galley.text(&[(PLAIN, text)])?;
        }
        galley.flush()
    };
    let all = |texts: &[String]| texts.to_vec();
    part("at most", &[rule.level.name()])?;
    part("asks", &[&rule.asks])?;
    part("why", &[&rule.why])?;
    for (name, texts) in
        [("assumes", all(&rule.assumes)), ("sources", all(&rule.sources)), ("formerly", all(&rule.formerly))]
    {
        if !texts.is_empty() {
            part(name, &texts.iter().map(String::as_str).collect::<Vec<_>>())?;
        }
    }
    for case in &rule.cases {
        galley.gap()?;
        galley.note(BOLD, if case.raises { "raises it" } else { "does not" });
        if !case.shows.is_empty() {
            galley.text(&[(FAINT, &case.shows)])?;
        }
        for line in case.text.trim().lines() {
            if line.starts_with('|') { galley.as_it_stands(line)? } else { galley.text(&[(PLAIN, line)])? }
        }
        galley.flush()?;
    }
    Ok(())
}
