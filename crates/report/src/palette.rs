//! The colours of shares from 0 to 1: one scale from oat over clay to ink, darker the greater.
//!
//! Lightness falls all the way, so that the scale keeps its order without colour vision and on a grey printer. A number
//! or a shape stands beside every colour.

/// Steps of the scale; `docs/report.md` shows them.
pub(crate) const STEPS: usize = 11;

/// The scale, lightest first, as red, green and blue.
pub(crate) const SCALE: [[u8; 3]; STEPS] = [
    [0xf7, 0xf2, 0xe8],
    [0xf0, 0xe2, 0xcf],
    [0xe9, 0xd0, 0xb4],
    [0xe2, 0xba, 0x9b],
    [0xd7, 0xa2, 0x86],
    [0xc6, 0x88, 0x76],
    [0xa0, 0x61, 0x67],
    [0x8f, 0x57, 0x65],
    [0x6e, 0x45, 0x5f],
    [0x4c, 0x34, 0x54],
    [0x2b, 0x24, 0x44],
];

/// Step of a share.
pub(crate) fn step(share: f64) -> usize {
    let last = (STEPS - 1) as f64;
    (share.clamp(0.0, 1.0) * last).round() as usize
}

/// Class of a share: `s0` to `s10`, `su` where it is unknown.
pub(crate) fn class(share: Option<f64>) -> &'static str {
    const CLASSES: [&str; STEPS] = [
        "s0", "s1", "s2", "s3", "s4", "s5", "s6", "s7", "s8", "s9", "s10",
    ];
    share.map_or("su", |share| CLASSES[step(share)])
}

/// Rules of style for the classes: as a background with text on it, and as a fill.
pub(crate) fn rules() -> String {
    let mut rules = String::new();
    for (i, rgb) in SCALE.iter().enumerate() {
        let (colour, text) = (hex(*rgb), hex(text_on(*rgb)));
        rules.push_str(&format!(
            ".s{i}{{background:{colour};color:{text};fill:{colour}}}svg text.t{i}{{fill:{text}}}"
        ));
    }
    rules
}

/// Class of the text on a share's colour in a picture.
pub(crate) fn text_class(share: Option<f64>) -> String {
    share.map_or("tu".to_owned(), |share| format!("t{}", step(share)))
}

fn hex([red, green, blue]: [u8; 3]) -> String {
    format!("#{red:02x}{green:02x}{blue:02x}")
}

const INK: [u8; 3] = [0x1f, 0x1b, 0x2e];
const PAPER: [u8; 3] = [0xff, 0xff, 0xff];

/// The better of ink and paper.
fn text_on(rgb: [u8; 3]) -> [u8; 3] {
    if contrast(INK, rgb) >= contrast(PAPER, rgb) {
        INK
    } else {
        PAPER
    }
}

/// Relative luminance by WCAG 2.1: `L = 0.2126 R + 0.7152 G + 0.0722 B` of linear red, green and blue.
fn luminance(rgb: [u8; 3]) -> f64 {
    let linear = |channel: u8| {
        let c = f64::from(channel) / 255.0;
        if c <= 0.040_45 {
            c / 12.92
        } else {
            ((c + 0.055) / 1.055).powf(2.4)
        }
    };
    let [red, green, blue] = rgb.map(linear);
    0.2126 * red + 0.7152 * green + 0.0722 * blue
}

/// Contrast by WCAG 2.1: `(L_light + 0.05) / (L_dark + 0.05)`.
fn contrast(one: [u8; 3], other: [u8; 3]) -> f64 {
    let (one, other) = (luminance(one), luminance(other));
    (one.max(other) + 0.05) / (one.min(other) + 0.05)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// What makes the scale readable without colour vision.
    #[test]
    fn each_step_is_darker_than_the_last() {
        for pair in SCALE.windows(2) {
            assert!(luminance(pair[0]) > 1.1 * luminance(pair[1]), "{pair:?}");
        }
    }

    /// WCAG 2.1 AA for text of usual size: 4.5.
    #[test]
    fn numbers_on_every_step_can_be_read() {
        for rgb in SCALE {
            assert!(contrast(text_on(rgb), rgb) >= 4.5, "{}", hex(rgb));
        }
    }

    /// Black on white has the greatest contrast that there is, 21, by the definition of WCAG 2.1.
    #[test]
    fn black_on_white_has_a_contrast_of_21() {
        assert!((contrast([0; 3], [255; 3]) - 21.0).abs() < 1e-9);
    }

    #[test]
    fn shares_take_their_steps() {
        for (share, name) in [(0.0, "s0"), (0.5, "s5"), (1.0, "s10"), (7.0, "s10")] {
            assert_eq!(class(Some(share)), name);
        }
        assert_eq!(class(None), "su");
    }
}
