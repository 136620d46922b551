//! Shades of a fraction: five characters that grow darker, and colours that grow lighter with it.

use std::io::IsTerminal;

/// A fifth of the range from 0 to 1.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Shade(usize);

/// Characters, lowest fifth first.
const CHARACTERS: [char; 5] = [' ', '░', '▒', '▓', '█'];
/// Backgrounds of the 256 colours of terminals and what is legible on them; lightness grows from step to step, so that
/// they keep their order for who does not see hues.
const COLOURS: [(u8, u8); 5] = [(235, 250), (24, 255), (66, 16), (143, 16), (229, 16)];

impl Shade {
    pub(super) fn of(fraction: f64) -> Shade {
        Shade(((fraction * CHARACTERS.len() as f64) as usize).min(CHARACTERS.len() - 1))
    }

    pub(super) fn character(self) -> char {
        CHARACTERS[self.0]
    }

    /// What the characters mean.
    pub(super) fn legend() -> String {
        let steps = CHARACTERS.iter().enumerate().map(|(i, character)| {
            let shown = match character {
                ' ' => "blank".to_owned(),
                shade => format!("{shade}{shade}"),
            };
            let to = if i == 4 { 100 } else { 20 * (i + 1) - 1 };
            format!("{shown} {}–{to}", 20 * i)
        });
        steps.collect::<Vec<_>>().join("   ")
    }
}

/// Text on the background of a shade.
pub(super) fn painted(text: &str, Shade(step): Shade) -> String {
    let (background, letters) = COLOURS[step];
    format!("\u{1b}[48;5;{background};38;5;{letters}m{text}\u{1b}[0m")
}

/// Whether stdout may be coloured: a terminal that says what it is, and nobody who asked for none (<https://no-color.org>).
pub(crate) fn may_colour() -> bool {
    let unwanted = std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
    let plain = std::env::var_os("TERM").is_none_or(|term| term == "dumb");
    std::io::stdout().is_terminal() && !unwanted && !plain
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative luminance of one of the 256 colours, linear 0 to 1 (WCAG 2: sRGB coefficients).
    fn luminance(colour: u8) -> f64 {
        let levels = match colour {
            16..=231 => {
                let cube = [0.0, 95.0, 135.0, 175.0, 215.0, 255.0];
                let i = usize::from(colour - 16);
                [cube[i / 36], cube[i / 6 % 6], cube[i % 6]]
            }
            _ => [8.0 + 10.0 * f64::from(colour - 232); 3],
        };
        let linear = levels.map(|level| {
            let s = level / 255.0;
            if s <= 0.04045 {
                s / 12.92
            } else {
                f64::powf((s + 0.055) / 1.055, 2.4)
            }
        });
        0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]
    }

    #[test]
    fn colours_grow_lighter_and_their_numbers_are_legible() {
        let backgrounds = COLOURS.map(|(background, _)| luminance(background));
        assert!(backgrounds.is_sorted_by(|a, b| a < b), "{backgrounds:?}");
        for (background, letters) in COLOURS {
            let (a, b) = (luminance(background), luminance(letters));
            let contrast = (a.max(b) + 0.05) / (a.min(b) + 0.05);
            // WCAG 2 asks for 4.5 of text
            assert!(contrast >= 4.5, "{background}: {contrast}");
        }
    }

    #[test]
    fn fifths_have_their_characters() {
        let shades: String = [0.0, 0.19, 0.2, 0.5, 0.79, 0.8, 1.0]
            .map(|fraction| Shade::of(fraction).character())
            .into_iter()
            .collect();
        assert_eq!(shades, "  ░▒▓██");
    }
}
