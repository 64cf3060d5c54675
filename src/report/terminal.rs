//! The report for people.

use std::io::{self, Write};

use super::{Entry, Line, Report};

/// A galley with its queries in the margin.
#[derive(Clone, Copy, Debug)]
pub struct Terminal {
    /// Columns to fill.
    pub width: usize,
    /// Print every recomputation, also where nothing differs.
    pub workings: bool,
}

impl Report for Terminal {
    fn begin(&self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn manuscript(&self, entry: &Entry, out: &mut dyn Write) -> io::Result<()> {
        writeln!(out, "{}", entry.path)
    }

    fn between(&self, out: &mut dyn Write) -> io::Result<()> {
        writeln!(out)
    }

    fn end(&self, _lines: &[Line], _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }
}
