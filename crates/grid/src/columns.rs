//! Scores of a run of cells, column by column, and their stored form.

use enolattice_model::{Channel, Score};

/// Version of the stored form that is written.
const VERSION: u8 = 1;
/// Bytes before the first column: version and number of cells.
const HEAD_BYTES: usize = 5;
/// Bytes of one cell over all columns.
const CELL_BYTES: usize = 11;

/// Quantised scores of the cells of one block, in the order of their numbers.
///
/// Quantisation: yield and p_hit in steps of 1/65534 with 65535 for unknown;
/// selectivity and feasibility in steps of 1/254 with 255 for unknown; the
/// largest loss by its number with 0 for none or unknown.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Columns {
    /// Expected yield.
    pub expected_yield: Vec<u16>,
    /// Probability of a hit.
    pub p_hit: Vec<u16>,
    /// Selectivity.
    pub selectivity: Vec<u8>,
    /// Feasibility.
    pub feasibility: Vec<u8>,
    /// Largest loss.
    pub largest_loss: Vec<u8>,
    /// Caution bits.
    pub cautions: Vec<u32>,
}

impl Columns {
    /// Empty columns with room for `cells` cells.
    pub fn with_capacity(cells: usize) -> Columns {
        Columns {
            expected_yield: Vec::with_capacity(cells),
            p_hit: Vec::with_capacity(cells),
            selectivity: Vec::with_capacity(cells),
            feasibility: Vec::with_capacity(cells),
            largest_loss: Vec::with_capacity(cells),
            cautions: Vec::with_capacity(cells),
        }
    }

    /// Appends a score. Numbers outside 0–1 are taken to the nearer end; NaN is unknown.
    pub fn push(&mut self, score: &Score) {
        self.expected_yield.push(to_u16(score.expected_yield));
        self.p_hit.push(to_u16(score.p_hit));
        self.selectivity.push(to_u8(score.selectivity));
        self.feasibility.push(to_u8(score.feasibility));
        self.largest_loss
            .push(score.largest_loss.map_or(0, |channel| channel as u8));
        self.cautions.push(score.cautions);
    }

    /// Number of cells.
    pub fn len(&self) -> usize {
        self.expected_yield.len()
    }

    /// Whether there are no cells.
    pub fn is_empty(&self) -> bool {
        self.expected_yield.is_empty()
    }

    /// The score of the `i`-th cell, to the precision of the stored form.
    ///
    /// # Panics
    /// If `i` is not below [`Columns::len`].
    pub fn score(&self, i: usize) -> Score {
        Score {
            expected_yield: from_u16(self.expected_yield[i]),
            p_hit: from_u16(self.p_hit[i]),
            selectivity: from_u8(self.selectivity[i]),
            feasibility: from_u8(self.feasibility[i]),
            largest_loss: Channel::from_number(self.largest_loss[i]),
            cautions: self.cautions[i],
        }
    }

    /// The stored form, version 1 (documented in `docs/columns.md`).
    pub fn to_bytes(&self) -> Vec<u8> {
        let mut bytes = Vec::with_capacity(HEAD_BYTES + CELL_BYTES * self.len());
        bytes.push(VERSION);
        bytes.extend((self.len() as u32).to_le_bytes());
        bytes.extend(
            self.expected_yield
                .iter()
                .flat_map(|code| code.to_le_bytes()),
        );
        bytes.extend(self.p_hit.iter().flat_map(|code| code.to_le_bytes()));
        bytes.extend(&self.selectivity);
        bytes.extend(&self.feasibility);
        bytes.extend(&self.largest_loss);
        bytes.extend(self.cautions.iter().flat_map(|bits| bits.to_le_bytes()));
        bytes
    }

    /// The score of the `i`-th cell of a stored form, the rest unread.
    ///
    /// # Errors
    /// A sentence that says what is wrong with the bytes.
    pub fn score_in(bytes: &[u8], i: usize) -> Result<Score, String> {
        let cells = match bytes.split_first_chunk::<HEAD_BYTES>() {
            Some(([VERSION, a, b, c, d], _)) => u32::from_le_bytes([*a, *b, *c, *d]) as usize,
            _ => return Err(format!("columns of another version than {VERSION}")),
        };
        if bytes.len() != HEAD_BYTES + CELL_BYTES * cells || i >= cells {
            return Err(format!("columns of {cells} cells have no cell {i}"));
        }
        let at = |column: usize, width: usize| &bytes[HEAD_BYTES + column * cells + i * width..];
        let u16_at = |column| u16::from_le_bytes([at(column, 2)[0], at(column, 2)[1]]);
        let cautions = at(7, 4);
        Ok(Score {
            expected_yield: from_u16(u16_at(0)),
            p_hit: from_u16(u16_at(2)),
            selectivity: from_u8(at(4, 1)[0]),
            feasibility: from_u8(at(5, 1)[0]),
            largest_loss: Channel::from_number(at(6, 1)[0]),
            cautions: u32::from_le_bytes([cautions[0], cautions[1], cautions[2], cautions[3]]),
        })
    }

    /// Reads the stored form.
    ///
    /// # Errors
    /// A sentence that says what is wrong with the bytes.
    pub fn from_bytes(bytes: &[u8]) -> Result<Columns, String> {
        let (version, rest) = bytes.split_first().ok_or("columns of no bytes at all")?;
        if *version != VERSION {
            return Err(format!(
                "columns of version {version}; this program reads version {VERSION}"
            ));
        }
        let (count, rest) = rest
            .split_first_chunk::<4>()
            .ok_or("columns end before their number of cells")?;
        let cells = u32::from_le_bytes(*count) as usize;
        if rest.len() as u64 != cells as u64 * CELL_BYTES as u64 {
            return Err(format!(
                "columns of {cells} cells have {} bytes of codes instead of {}",
                rest.len(),
                cells as u64 * CELL_BYTES as u64
            ));
        }
        let mut rest = rest;
        let columns = Columns {
            expected_yield: u16s(take(&mut rest, 2 * cells)),
            p_hit: u16s(take(&mut rest, 2 * cells)),
            selectivity: take(&mut rest, cells).to_vec(),
            feasibility: take(&mut rest, cells).to_vec(),
            largest_loss: take(&mut rest, cells).to_vec(),
            cautions: take(&mut rest, 4 * cells)
                .as_chunks()
                .0
                .iter()
                .map(|bits| u32::from_le_bytes(*bits))
                .collect(),
        };
        match columns
            .largest_loss
            .iter()
            .find(|code| usize::from(**code) > Channel::ALL.len())
        {
            Some(code) => Err(format!("columns name a channel {code} that does not exist")),
            None => Ok(columns),
        }
    }
}

fn take<'b>(rest: &mut &'b [u8], bytes: usize) -> &'b [u8] {
    let (head, tail) = rest.split_at(bytes);
    *rest = tail;
    head
}

fn u16s(bytes: &[u8]) -> Vec<u16> {
    bytes
        .as_chunks()
        .0
        .iter()
        .map(|code| u16::from_le_bytes(*code))
        .collect()
}

fn to_u16(value: Option<f64>) -> u16 {
    match value {
        Some(value) if !value.is_nan() => (value.clamp(0.0, 1.0) * 65534.0).round() as u16,
        _ => u16::MAX,
    }
}

fn from_u16(code: u16) -> Option<f64> {
    (code != u16::MAX).then(|| f64::from(code) / 65534.0)
}

fn to_u8(value: Option<f64>) -> u8 {
    match value {
        Some(value) if !value.is_nan() => (value.clamp(0.0, 1.0) * 254.0).round() as u8,
        _ => u8::MAX,
    }
}

fn from_u8(code: u8) -> Option<f64> {
    (code != u8::MAX).then(|| f64::from(code) / 254.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Written by the script quoted in `docs/columns.md`, independent of this code.
    const VERSION_1: &[u8] = include_bytes!("../testdata/columns_v1.bin");

    /// The four cells stated in `docs/columns.md`.
    fn cells_of_version_1() -> [Score; 4] {
        [
            Score {
                expected_yield: Some(0.5),
                p_hit: Some(1.0),
                selectivity: Some(0.75),
                feasibility: Some(1.0),
                largest_loss: Some(Channel::WeakBase),
                cautions: 0,
            },
            Score {
                cautions: 0x8000_0001,
                ..Score::default()
            },
            Score {
                expected_yield: Some(0.0),
                p_hit: Some(0.0),
                selectivity: Some(0.0),
                feasibility: Some(0.0),
                largest_loss: Some(Channel::TooLittleReagent),
                cautions: 5,
            },
            Score {
                expected_yield: Some(0.123_456),
                p_hit: Some(0.987_654),
                selectivity: Some(0.333),
                feasibility: Some(0.999),
                largest_loss: None,
                cautions: 0x0102_0304,
            },
        ]
    }

    fn close(got: Option<f64>, expected: Option<f64>, half_step: f64) -> bool {
        match (got, expected) {
            (Some(got), Some(expected)) => (got - expected).abs() <= half_step,
            (None, None) => true,
            _ => false,
        }
    }

    #[test]
    fn bytes_of_version_1_stay_readable() {
        let columns = Columns::from_bytes(VERSION_1).expect("the golden file is well formed");
        assert_eq!(columns.len(), 4);
        for (i, expected) in cells_of_version_1().iter().enumerate() {
            let got = columns.score(i);
            assert!(
                close(got.expected_yield, expected.expected_yield, 0.5 / 65534.0),
                "{i}"
            );
            assert!(close(got.p_hit, expected.p_hit, 0.5 / 65534.0), "{i}");
            assert!(
                close(got.selectivity, expected.selectivity, 0.5 / 254.0),
                "{i}"
            );
            assert!(
                close(got.feasibility, expected.feasibility, 0.5 / 254.0),
                "{i}"
            );
            assert_eq!(got.largest_loss, expected.largest_loss, "{i}");
            assert_eq!(got.cautions, expected.cautions, "{i}");
        }
    }

    #[test]
    fn bytes_of_version_1_are_still_what_is_written() {
        let mut columns = Columns::default();
        cells_of_version_1()
            .iter()
            .for_each(|score| columns.push(score));
        assert_eq!(columns.to_bytes(), VERSION_1);
    }

    #[test]
    fn channels_are_documented_by_number() {
        let page = include_str!("../docs/columns.md")
            .split_whitespace()
            .collect::<Vec<_>>()
            .join(" ");
        for channel in Channel::ALL {
            let entry = format!(" {} {}", channel as u8, channel.name());
            assert!(page.contains(&entry), "{entry}");
        }
    }

    #[test]
    fn every_code_survives_a_read_and_a_write() {
        let mut columns = Columns::default();
        for code in 0..=u16::MAX {
            let score = Score {
                expected_yield: from_u16(code),
                p_hit: from_u16(u16::MAX - code),
                selectivity: from_u8(code as u8),
                feasibility: from_u8((code >> 8) as u8),
                largest_loss: Channel::from_number((code % 18) as u8),
                cautions: u32::from(code) << 16,
            };
            columns.push(&score);
            assert_eq!(columns.score(usize::from(code)), score);
        }
        assert_eq!(Columns::from_bytes(&columns.to_bytes()), Ok(columns));
    }

    #[test]
    fn a_number_that_is_none_is_unknown_and_no_zero() {
        let mut columns = Columns::default();
        columns.push(&Score {
            expected_yield: Some(f64::NAN),
            selectivity: Some(1.5),
            ..Score::default()
        });
        assert_eq!(columns.score(0).expected_yield, None);
        assert_eq!(columns.score(0).selectivity, Some(1.0));
    }

    #[test]
    fn damaged_bytes_are_refused() {
        for end in 0..VERSION_1.len() {
            assert!(
                Columns::from_bytes(&VERSION_1[..end]).is_err(),
                "cut at {end}"
            );
        }
        let mut longer = VERSION_1.to_vec();
        longer.push(0);
        assert!(Columns::from_bytes(&longer).is_err());
        let mut newer = VERSION_1.to_vec();
        newer[0] = 2;
        assert!(Columns::from_bytes(&newer).is_err_and(|reason| reason.contains("version 2")));
        let mut unknown_channel = VERSION_1.to_vec();
        unknown_channel[5 + 4 * 6] = 18;
        assert!(Columns::from_bytes(&unknown_channel).is_err_and(|reason| reason.contains("18")));
    }
}
