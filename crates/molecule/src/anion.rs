//! Classes of anions, by the atom and group that carry the charge.

/// The kind of anion that a site leaves behind; decides how a medium moves its pKa.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum AnionClass {
    /// Enolate of an alkyl ketone.
    Ketone,
    /// Enolate of an aryl ketone.
    ArylKetone,
    /// Enolate of an aldehyde.
    Aldehyde,
    /// Enolate of an ester or lactone.
    Ester,
    /// Enolate of an amide or lactam.
    Amide,
    /// Carbanion next to a nitrile.
    Nitrile,
    /// Nitronate.
    Nitronate,
    /// Carbanion next to a sulfone or sulfoxide.
    Sulfone,
    /// Anion of an acyclic 1,3-dicarbonyl compound (malonates, acetoacetates, 1,3-diketones).
    BetaDicarbonyl,
    /// Anion of a cyclic 1,3-diketone.
    CyclicBetaDicarbonyl,
    /// Anion of a cyclic 1,3-diester.
    CyclicDiester,
    /// Any other carbanion.
    Carbanion,
    /// Alkoxide.
    Alkoxide,
    /// Hydroxide.
    Hydroxide,
    /// Phenoxide.
    Phenoxide,
    /// Carboxylate.
    Carboxylate,
    /// Carbonate and hydrogencarbonate.
    Carbonate,
    /// Anion of a carboxamide or lactam N–H.
    AmideNitrogen,
    /// Anion of an imide or sulfonamide N–H.
    ImideNitrogen,
    /// Anion of an azole N–H.
    AzoleNitrogen,
    /// Anion of an aniline.
    ArylNitrogen,
    /// Metal amide of a dialkylamine.
    AlkylNitrogen,
    /// Metal amide of a disilylamine.
    SilylNitrogen,
    /// Thiolate.
    Thiolate,
    /// Fluoride.
    Fluoride,
    /// Hydride.
    Hydride,
    /// A neutral base whose conjugate acid is a cation (amines, amidines).
    Neutral,
}

impl AnionClass {
    /// Whether the charge sits on carbon.
    pub fn is_carbanion(self) -> bool {
        self <= AnionClass::Carbanion
    }

    /// Whether two carbonyl groups share the charge.
    pub fn is_dicarbonyl(self) -> bool {
        matches!(
            self,
            AnionClass::BetaDicarbonyl
                | AnionClass::CyclicBetaDicarbonyl
                | AnionClass::CyclicDiester
        )
    }
}
