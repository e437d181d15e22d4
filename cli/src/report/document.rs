//! What a report says, whatever it is written as.

/// A part of a report.
#[derive(Clone, Debug, PartialEq)]
pub enum Block {
    /// The heading of a chapter.
    Heading(String),
    /// A paragraph.
    Text(String),
    /// A paragraph that must not be overlooked.
    Caution(String),
    /// Short statements.
    List(Vec<String>),
    /// A table.
    Table(Table),
    /// A figure.
    Figure(Figure),
    /// Text as it stands in a file.
    Verbatim(String),
    /// Where the sheet for other section forces goes; nowhere in a text.
    Sheet,
    /// Lines for names, dates and signatures.
    Signatures,
}

/// A table: every row has as many cells as there are columns.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Table {
    /// What it shows.
    pub caption: String,
    /// Names of the columns; those that begin with `#` hold numbers, aligned to the right.
    pub columns: Vec<&'static str>,
    /// The rows.
    pub rows: Vec<Row>,
}

/// A row of a table.
#[derive(Clone, Debug, PartialEq)]
pub enum Row {
    /// A heading for the rows that follow.
    Group(String),
    /// Cells.
    Cells(Vec<String>),
}

/// A figure.
#[derive(Clone, Debug, PartialEq)]
pub struct Figure {
    /// The name of its file.
    pub file: String,
    /// Its SVG text.
    pub svg: String,
    /// What it shows.
    pub caption: String,
}
