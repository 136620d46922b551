//! Elements that molecules are read with.

/// Symbol of an element that molecules are read with; `?` for any other.
pub fn element_symbol(atomic_number: u8) -> &'static str {
    match atomic_number {
        1 => "H",
        5 => "B",
        6 => "C",
        7 => "N",
        8 => "O",
        9 => "F",
        14 => "Si",
        15 => "P",
        16 => "S",
        17 => "Cl",
        33 => "As",
        34 => "Se",
        35 => "Br",
        53 => "I",
        _ => "?",
    }
}
