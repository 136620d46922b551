//! The groups at which carbon is attacked.

/// The carbon skeleton at the reacting carbon of an alkylating agent.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum AlkylGroup {
    /// CH3–X.
    Methyl,
    /// CH3CH2–X.
    Ethyl,
    /// RCH2CH2–X without branch at the β carbon.
    Primary,
    /// R2CHCH2–X.
    Isobutyl,
    /// R3CCH2–X.
    Neopentyl,
    /// R2CH–X, open chain or ring of other size.
    Secondary,
    /// Cyclohexyl.
    Cyclohexyl,
    /// R3C–X.
    Tertiary,
    /// C=C–CH2–X.
    Allyl,
    /// C≡C–CH2–X.
    Propargyl,
    /// Aryl–CH2–X.
    Benzyl,
    /// Aryl–CHR–X, C=C–CHR–X, C≡C–CHR–X and X–CHR–C(=O)R.
    SecondaryActivated,
    /// X–CH2–C(=O)R and X–CH2–CN.
    AlphaCarbonyl,
    /// X–CH2–O, X–CH2–N and X–CH2–S (chloromethyl ethers and their kin).
    AlphaHetero,
    /// X–CH2–X′ (diiodomethane, dibromomethane).
    Halomethyl,
}

/// What leaves.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum LeavingGroup {
    /// Fluoride.
    Fluoride,
    /// Chloride.
    Chloride,
    /// Bromide.
    Bromide,
    /// Iodide.
    Iodide,
    /// Arenesulfonate.
    Tosylate,
    /// Alkanesulfonate.
    Mesylate,
    /// Perfluoroalkanesulfonate.
    Triflate,
    /// Monoalkyl sulfate (from a dialkyl sulfate).
    Sulfate,
    /// Dialkyl phosphate (from a trialkyl phosphate).
    Phosphate,
    /// Dialkyl ether (from a trialkyloxonium ion).
    Ether,
}

/// The group that makes an alkene or alkyne a Michael acceptor, strongest first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Acceptor {
    /// Quinone methide: the attacked carbon stands outside a ring that becomes a phenol.
    QuinoneMethide,
    /// Nitro.
    Nitro,
    /// Quinone: the ring becomes a hydroquinone.
    Quinone,
    /// Aldehyde.
    Aldehyde,
    /// Ketone.
    Ketone,
    /// Imide and N-acyl sulfonamide (maleimides, N-acryloyl oxazolidinones).
    Imide,
    /// Thioester.
    Thioester,
    /// Sulfone.
    Sulfone,
    /// Sulfonic ester or sulfonamide.
    Sulfonate,
    /// Ester.
    Ester,
    /// Nitrile.
    Nitrile,
    /// Phosphonate or phosphine oxide.
    Phosphonate,
    /// Sulfoxide.
    Sulfoxide,
    /// Pyridine bound at its 2 or 4 position, and other azines.
    Pyridyl,
    /// Amide.
    Amide,
}

/// What the nitrogen of a C=N bears.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum ImineNitrogen {
    /// An iminium ion.
    Iminium,
    /// Sulfonyl.
    Sulfonyl,
    /// Acyl or alkoxycarbonyl.
    Acyl,
    /// Phosphinoyl or sulfinyl.
    Phosphinoyl,
    /// Alkyl or aryl.
    Plain,
}

/// The heteroatom of a three-membered ring.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum RingHeteroatom {
    /// Epoxide.
    Oxygen,
    /// Aziridine with sulfonyl or acyl on nitrogen.
    ActivatedNitrogen,
    /// Other aziridine.
    Nitrogen,
    /// Thiirane.
    Sulfur,
}

/// A heterocumulene.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Cumulene {
    /// CO2.
    CarbonDioxide,
    /// CS2.
    CarbonDisulfide,
    /// COS.
    CarbonylSulfide,
    /// Isocyanate.
    Isocyanate,
    /// Isothiocyanate.
    Isothiocyanate,
    /// Carbodiimide.
    Carbodiimide,
    /// Ketene.
    Ketene,
}
