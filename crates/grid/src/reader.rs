//! Takes values out of a TOML table; what cannot be taken is noted with its place.

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use crate::conditions::Quantity;
use crate::faults::Faults;
use crate::files::Notebook;
use crate::keys::{keys_of, remedy_for_key};
use crate::page::{Page, items, kind, number};
use crate::stock::QUANTITIES;
use crate::{AxisSpec, Entry, FaultCode, LibraryTable, Place, Sources, Stock};

pub(crate) type Value<'i> = Spanned<DeValue<'i>>;

/// A campaign file that is being read.
pub(crate) struct Reader<'a> {
    pub(crate) page: Page<'a>,
    pub(crate) faults: Faults,
    /// What was noticed and is no fault.
    pub(crate) notes: Vec<String>,
    /// Whether values may have been lost to faults of syntax.
    pub(crate) values_lost: bool,
    sources: &'a Sources,
}

/// A table of an `inline` list.
pub(crate) struct Inline<'t, 'i> {
    pub(crate) table: &'t DeTable<'i>,
    pub(crate) place: Place,
}

impl<'a> Reader<'a> {
    pub(crate) fn new(sources: &'a Sources) -> Reader<'a> {
        let page = Page::new(&sources.campaign_name, &sources.campaign);
        Reader {
            page,
            faults: Faults::default(),
            notes: Vec::new(),
            values_lost: false,
            sources,
        }
    }

    pub(crate) fn place(&self, value: &Value<'_>, path: &str) -> Place {
        self.page.place(&value.span(), path)
    }

    /// Notes each key that the table does not have; `""` is the top of the file.
    pub(crate) fn refuse_unknown_keys(&mut self, table: &str, found: &DeTable<'_>) {
        let known = keys_of(table);
        for key in found.keys() {
            let name = key.get_ref().as_ref();
            if known.contains(&name) {
                continue;
            }
            if self.faults.is_full() {
                break;
            }
            let path = if table.is_empty() {
                name.to_owned()
            } else {
                format!("{table}.{name}")
            };
            let place = self.page.place(&key.span(), path);
            let home = if table.is_empty() {
                "a campaign".to_owned()
            } else {
                format!("[{table}]")
            };
            let reason = format!("{home} has no key `{name}`");
            self.faults.note(
                FaultCode::KeyUnknown,
                place,
                name,
                reason,
                remedy_for_key(table, name),
            );
        }
    }

    /// A table below the top of the file, if it is there.
    pub(crate) fn table<'t, 'i>(
        &mut self,
        top: &'t DeTable<'i>,
        name: &str,
    ) -> Option<&'t DeTable<'i>> {
        let value = top.get(name)?;
        let DeValue::Table(table) = value.get_ref() else {
            self.wrong_kind(
                value,
                name,
                "a table",
                &format!("begin it with a line `[{name}]`"),
            );
            return None;
        };
        self.refuse_unknown_keys(name, table);
        Some(table)
    }

    pub(crate) fn text(&mut self, value: &Value<'_>, path: &str) -> Option<String> {
        match value.get_ref() {
            DeValue::String(text) => Some(text.to_string()),
            _ => {
                self.wrong_kind(value, path, "a text", "write it in quotation marks");
                None
            }
        }
    }

    /// The texts of a key, each with its place.
    pub(crate) fn texts(
        &mut self,
        table: &DeTable<'_>,
        name: &str,
        key: &str,
    ) -> Vec<(String, Place)> {
        let Some(value) = table.get(key) else {
            return Vec::new();
        };
        items(&format!("{name}.{key}"), value)
            .into_iter()
            .filter_map(|(path, item)| Some((self.text(item, &path)?, self.place(item, &path))))
            .collect()
    }

    /// A number in the range of a quantity.
    pub(crate) fn number(
        &mut self,
        quantity: &Quantity,
        path: &str,
        value: &Value<'_>,
    ) -> Option<f64> {
        let Some(found) = number(value.get_ref()) else {
            self.wrong_kind(
                value,
                path,
                "a number",
                "write it without quotation marks and unit",
            );
            return None;
        };
        match quantity.check(found) {
            Ok(number) => Some(number),
            Err(reason) => {
                let written = self.page.written(&value.span());
                let place = self.place(value, path);
                let remedy = quantity.remedy();
                self.faults
                    .note(FaultCode::ValueOutOfRange, place, written, reason, remedy);
                None
            }
        }
    }

    /// Where the reader of a file notes what it finds.
    pub(crate) fn notebook(&mut self) -> Notebook<'_> {
        Notebook {
            faults: &mut self.faults,
            notes: &mut self.notes,
        }
    }

    /// Entries of the key `library`.
    pub(crate) fn library(&mut self, table: &DeTable<'_>, name: &str) -> AxisSpec {
        let mut axis = AxisSpec::default();
        let Some(value) = table.get("library") else {
            return axis;
        };
        for (path, item) in items(&format!("{name}.library"), value) {
            match self.text(item, &path) {
                Some(text) if text == "all" => axis.all = true,
                Some(text) => {
                    let place = self.place(item, &path);
                    axis.entries.push(Entry {
                        name: text,
                        place,
                        ..Entry::default()
                    });
                }
                None => {}
            }
        }
        axis
    }

    /// The files of the key `file`; those that were not given are noted.
    pub(crate) fn files(&mut self, table: &DeTable<'_>, name: &str) -> Vec<(String, &'a [u8])> {
        let mut files = Vec::new();
        for (file, place) in self.texts(table, name, "file") {
            match self.sources.files.get(&file) {
                Some(bytes) => files.push((file, bytes.as_slice())),
                None => {
                    let reason = "the file could not be read";
                    let remedy = "put it beside the campaign file, or correct its name";
                    self.faults
                        .note(FaultCode::FileMissing, place, &file, reason, remedy);
                }
            }
        }
        files
    }

    /// The texts of the laboratory's own tables.
    pub(crate) fn library_tables(&mut self, table: &DeTable<'_>) -> Vec<LibraryTable> {
        let mut tables = Vec::new();
        for (name, bytes) in self.files(table, "library") {
            match std::str::from_utf8(bytes) {
                Ok(text) => tables.push(LibraryTable {
                    name,
                    text: text.to_owned(),
                }),
                Err(_) => {
                    let place = Place {
                        file: name,
                        line: 0,
                        field: "file".to_owned(),
                    };
                    let remedy = "save the file as UTF-8";
                    let reason = "the text is not UTF-8";
                    self.faults
                        .note(FaultCode::FileSyntax, place, "", reason, remedy);
                }
            }
        }
        tables
    }

    /// The tables of the key `inline`.
    pub(crate) fn inline<'t, 'i>(
        &mut self,
        table: &'t DeTable<'i>,
        name: &str,
    ) -> Vec<Inline<'t, 'i>> {
        let Some(value) = table.get("inline") else {
            return Vec::new();
        };
        let below = format!("{name}.inline");
        let mut tables = Vec::new();
        for (path, item) in items(&below, value) {
            match item.get_ref() {
                DeValue::Table(table) => {
                    self.refuse_unknown_keys(&below, table);
                    tables.push(Inline {
                        table,
                        place: self.place(item, &path),
                    });
                }
                _ => self.wrong_kind(
                    item,
                    &path,
                    "a table",
                    &format!("begin it with a line `[[{below}]]`"),
                ),
            }
        }
        tables
    }

    /// Name (empty where there is none) and SMILES of a table of an `inline` list.
    pub(crate) fn named_structure(&mut self, inline: &Inline<'_, '_>) -> Option<(String, String)> {
        let path = |key: &str| format!("{}.{key}", inline.place.field);
        let name = match inline.table.get("name") {
            Some(value) => self.text(value, &path("name")),
            None => Some(String::new()),
        };
        let smiles = match inline.table.get("smiles") {
            Some(value) => self.text(value, &path("smiles")),
            None => Some(String::new()),
        };
        name.zip(smiles)
    }

    /// What the laboratory has of a substance that is written in the campaign itself.
    pub(crate) fn stock(&mut self, inline: &Inline<'_, '_>) -> Stock {
        let path = |key: &str| format!("{}.{key}", inline.place.field);
        let numbers = QUANTITIES.map(|quantity| {
            let value = inline.table.get(quantity.key)?;
            self.number(&quantity, &path(quantity.key), value)
        });
        let texts = ["currency", "lot", "location"].map(|key| {
            let value = inline.table.get(key);
            let text = value.and_then(|value| self.text(value, &path(key)));
            text.unwrap_or_default()
        });
        Stock::from_columns(numbers, texts)
    }

    fn wrong_kind(&mut self, value: &Value<'_>, path: &str, wanted: &str, remedy: &str) {
        let place = self.place(value, path);
        let written = self.page.written(&value.span());
        let reason = format!("this is {} and should be {wanted}", kind(value.get_ref()));
        self.faults
            .note(FaultCode::ValueType, place, written, reason, remedy);
    }
}
