//! Plates of 24, 96, 384 and 1536 wells.

use std::fmt;
use std::ops::RangeInclusive;

use serde::{Deserialize, Serialize};

use crate::Well;

/// How many wells a plate has.
///
/// Stored as that number. Positions of the wells: [`Geometry`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(try_from = "u16", into = "u16")]
pub enum PlateFormat {
    /// 4 × 6; outside the standard.
    Wells24,
    /// 8 × 12.
    Wells96,
    /// 16 × 24.
    Wells384,
    /// 32 × 48.
    Wells1536,
}

/// Why a plate was refused.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum FormatError {
    /// No plate has so many wells.
    #[error("no plate has {wells} wells; choose 24, 96, 384 or 1536")]
    Wells {
        /// What was asked for.
        wells: u16,
    },
    /// The wells would not fit on the plate.
    #[error(
        "a pitch of {pitch_mm} mm is not possible with {format}; it must be above 0 and at most {most_mm} mm"
    )]
    Pitch {
        /// The plate.
        format: PlateFormat,
        /// What was asked for, mm.
        pitch_mm: f64,
        /// The largest pitch with which the wells stay on the plate, mm.
        most_mm: f64,
    },
}

impl PlateFormat {
    /// All formats, small to large.
    pub const ALL: [PlateFormat; 4] = [
        PlateFormat::Wells24,
        PlateFormat::Wells96,
        PlateFormat::Wells384,
        PlateFormat::Wells1536,
    ];

    /// Rows.
    pub const fn rows(self) -> u8 {
        match self {
            PlateFormat::Wells24 => 4,
            PlateFormat::Wells96 => 8,
            PlateFormat::Wells384 => 16,
            PlateFormat::Wells1536 => 32,
        }
    }

    /// Columns.
    pub const fn columns(self) -> u8 {
        match self {
            PlateFormat::Wells24 => 6,
            PlateFormat::Wells96 => 12,
            PlateFormat::Wells384 => 24,
            PlateFormat::Wells1536 => 48,
        }
    }

    /// Wells.
    pub const fn wells(self) -> usize {
        self.rows() as usize * self.columns() as usize
    }

    /// Whether the plate has this well.
    pub const fn has(self, well: Well) -> bool {
        well.row < self.rows() && well.column < self.columns()
    }

    /// Whether the well is on the outer ring, 36 of 96.
    pub const fn is_edge(self, well: Well) -> bool {
        well.row == 0
            || well.column == 0
            || well.row + 1 == self.rows()
            || well.column + 1 == self.columns()
    }

    /// All wells, down the first column, then down the second.
    pub fn by_columns(self) -> impl Iterator<Item = Well> {
        let rows = self.rows();
        (0..self.columns()).flat_map(move |column| (0..rows).map(move |row| Well { row, column }))
    }

    /// Volumes that are usually worked with in a well, µL.
    ///
    /// `common practice`: 24 vials of a few mL, 96 vials or deep wells of about 1 mL, 384 wells of
    /// about 0.1 mL, 1536 wells of about 0.01 mL, filled so far that they can be stirred or shaken.
    pub const fn usual_volume_ul(self) -> RangeInclusive<f64> {
        match self {
            PlateFormat::Wells24 => 300.0..=2_500.0,
            PlateFormat::Wells96 => 50.0..=800.0,
            PlateFormat::Wells384 => 10.0..=80.0,
            PlateFormat::Wells1536 => 1.0..=8.0,
        }
    }

    /// Volume of a reaction where nobody says another, µL (common practice).
    pub const fn default_volume_ul(self) -> f64 {
        match self {
            PlateFormat::Wells24 => 500.0,
            PlateFormat::Wells96 => 100.0,
            PlateFormat::Wells384 => 40.0,
            PlateFormat::Wells1536 => 5.0,
        }
    }
}

impl fmt::Display for PlateFormat {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} wells", self.wells())
    }
}

impl TryFrom<u16> for PlateFormat {
    type Error = FormatError;

    fn try_from(wells: u16) -> Result<PlateFormat, FormatError> {
        let mut formats = PlateFormat::ALL.into_iter();
        formats
            .find(|format| format.wells() == usize::from(wells))
            .ok_or(FormatError::Wells { wells })
    }
}

impl From<PlateFormat> for u16 {
    fn from(format: PlateFormat) -> u16 {
        u16::from(format.rows()) * u16::from(format.columns())
    }
}

/// Where the wells of a plate are, mm from its left and upper edge.
///
/// # Source
/// ANSI/SLAS 4-2004 (R2012), well positions of 96, 384 and 1536 wells; ANSI/SLAS 1-2004, footprint of
/// 127.76 × 85.48 mm. 24 wells are in no standard: 18.0 mm is `common practice`, centred like the others.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Geometry {
    /// From one well to the next in a row and in a column, mm.
    pub pitch_mm: f64,
    /// Centre of A1 from the left edge, mm.
    pub a1_x_mm: f64,
    /// Centre of A1 from the upper edge, mm.
    pub a1_y_mm: f64,
}

/// ANSI/SLAS 1-2004.
const FOOTPRINT_MM: (f64, f64) = (127.76, 85.48);
/// The middle of the footprint.
const CENTRE_MM: (f64, f64) = (63.88, 42.74);
/// `common practice`
const PITCH_OF_24_MM: f64 = 18.0;

impl Geometry {
    /// The usual plate of a format.
    pub fn of(format: PlateFormat) -> Geometry {
        let (pitch_mm, a1_x_mm, a1_y_mm) = match format {
            PlateFormat::Wells24 => return Geometry::centred(format, PITCH_OF_24_MM),
            PlateFormat::Wells96 => (9.0, 14.38, 11.24),
            PlateFormat::Wells384 => (4.5, 12.13, 8.99),
            PlateFormat::Wells1536 => (2.25, 11.005, 7.865),
        };
        Geometry {
            pitch_mm,
            a1_x_mm,
            a1_y_mm,
        }
    }

    /// A plate with another pitch than the usual, its wells around the middle of the footprint.
    ///
    /// # Errors
    /// [`FormatError::Pitch`] where the wells would not be on the plate.
    pub fn with_pitch(format: PlateFormat, pitch_mm: f64) -> Result<Geometry, FormatError> {
        // half a pitch lies between the outermost centres and the edge at least
        let most_mm = (FOOTPRINT_MM.0 / f64::from(format.columns()))
            .min(FOOTPRINT_MM.1 / f64::from(format.rows()));
        if pitch_mm > 0.0 && pitch_mm <= most_mm {
            return Ok(Geometry::centred(format, pitch_mm));
        }
        Err(FormatError::Pitch {
            format,
            pitch_mm,
            most_mm,
        })
    }

    fn centred(format: PlateFormat, pitch_mm: f64) -> Geometry {
        let before = |wells: u8| 0.5 * (f64::from(wells) - 1.0) * pitch_mm;
        Geometry {
            pitch_mm,
            a1_x_mm: CENTRE_MM.0 - before(format.columns()),
            a1_y_mm: CENTRE_MM.1 - before(format.rows()),
        }
    }

    /// Centre of a well from the left and the upper edge, mm.
    pub fn centre_mm(&self, well: Well) -> (f64, f64) {
        (
            self.a1_x_mm + f64::from(well.column) * self.pitch_mm,
            self.a1_y_mm + f64::from(well.row) * self.pitch_mm,
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Published positions of A1 and pitch put the middle of every plate at the middle of the footprint.
    #[test]
    fn plates_are_centred_on_the_footprint() {
        for format in PlateFormat::ALL {
            let geometry = Geometry::of(format);
            let first = geometry.centre_mm(Well::new(0, 0));
            let last = geometry.centre_mm(Well::new(format.rows() - 1, format.columns() - 1));
            let (x, y) = (0.5 * (first.0 + last.0), 0.5 * (first.1 + last.1));
            assert!(
                (x - 63.88).abs() < 1e-9 && (y - 42.74).abs() < 1e-9,
                "{format}: {x} {y}"
            );
            assert!(format.by_columns().all(|well| {
                let (x, y) = geometry.centre_mm(well);
                x > 0.0 && x < FOOTPRINT_MM.0 && y > 0.0 && y < FOOTPRINT_MM.1
            }));
        }
    }

    #[test]
    fn wells_and_edges_are_counted() {
        for (format, wells, edge) in [
            (PlateFormat::Wells24, 24, 16),
            (PlateFormat::Wells96, 96, 36),
            (PlateFormat::Wells384, 384, 76),
            (PlateFormat::Wells1536, 1_536, 156),
        ] {
            let all: Vec<Well> = format.by_columns().collect();
            assert_eq!((format.wells(), all.len()), (wells, wells));
            assert_eq!(
                all.iter().filter(|well| format.is_edge(**well)).count(),
                edge
            );
            assert_eq!(all[1].to_string(), "B1");
            assert!(all.iter().all(|well| format.has(*well)));
            assert!(!format.has(Well::new(format.rows(), 0)));
        }
    }

    #[test]
    fn pitch_and_number_of_wells_are_checked() {
        let geometry = Geometry::with_pitch(PlateFormat::Wells24, 19.0).unwrap();
        assert_eq!(
            geometry.centre_mm(Well::new(3, 5)),
            (63.88 + 2.5 * 19.0, 42.74 + 1.5 * 19.0)
        );
        for pitch_mm in [0.0, -1.0, 25.0, f64::NAN] {
            let error = Geometry::with_pitch(PlateFormat::Wells24, pitch_mm).unwrap_err();
            assert!(error.to_string().contains("with 24 wells"), "{error}");
        }
        let error = PlateFormat::try_from(48).unwrap_err();
        assert_eq!(
            error.to_string(),
            "no plate has 48 wells; choose 24, 96, 384 or 1536"
        );
    }
}
