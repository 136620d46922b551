//! What hands over an acyl group, an atom or a small group.

/// What an acyl group is bound to before it is handed over.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum AcylDonor {
    /// Acyl chloride, bromide or fluoride.
    Halide,
    /// Carboxylic anhydride.
    Anhydride,
    /// N-acyl imidazole, triazole or benzotriazole.
    Azole,
    /// Acyl cyanide, cyanoformate.
    Cyanide,
    /// Alkyl chloroformate.
    Chloroformate,
    /// Dialkyl dicarbonate.
    Dicarbonate,
    /// Ester of a phenol, enol, fluoroalcohol or N-hydroxy compound, β-lactone, N-acyl imide.
    ActiveEster,
    /// Thioester.
    Thioester,
    /// Ester whose carbonyl bears another acceptor (oxalates, trifluoroacetates).
    Oxalate,
    /// Formate ester.
    Formate,
    /// Alkyl ester or lactone.
    Ester,
    /// Ester of a tertiary alcohol.
    TertAlkylEster,
    /// Dialkyl carbonate.
    Carbonate,
    /// N-methoxy-N-methyl amide and N-acyl aziridine.
    ChelatingAmide,
    /// Dimethylformamide and other amides.
    Amide,
    /// Carbamoyl chloride.
    CarbamoylChloride,
    /// Sulfonyl chloride or fluoride, sulfonic anhydride, N-aryl sulfonimide: a sulfonyl group is
    /// handed over.
    Sulfonyl,
}

/// What hands a halogen over.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum HalogenDonor {
    /// The element or an interhalogen.
    Element,
    /// N-halo imide, hydantoin or isocyanurate.
    Imide,
    /// N-halo sulfonimide or sulfonamide.
    Sulfonimide,
    /// N-halo ammonium or pyridinium salt.
    Ammonium,
    /// Hypohalite.
    Hypohalite,
    /// Tetrahalomethane, hexachloroethane, 1,2-dibromotetrachloroethane, trihalomethyl.
    Polyhaloalkane,
    /// Sulfonyl halide as source of its halogen.
    SulfonylHalide,
}

/// What hands sulfur or selenium over.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum ChalcogenDonor {
    /// R–S–Cl, R–Se–Cl, R–Se–Br.
    Halide,
    /// Disulfide, diselenide.
    Dichalcogenide,
    /// Thiosulfonate.
    Thiosulfonate,
    /// N-thio imide, N-seleno imide.
    Imide,
}

/// What hands over an atom or group.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Donor {
    /// A halogen; its atomic number.
    Halogen(u8, HalogenDonor),
    /// Sulfur (16) or selenium (34) with what it bears.
    Chalcogen(u8, ChalcogenDonor),
    /// Azodicarboxylate: nitrogen is attacked, nothing leaves.
    Azo,
    /// Nitrosoarene: nitrogen is attacked, nothing leaves.
    Nitroso,
    /// Alkyl nitrite: NO is handed over.
    Nitrite,
    /// Sulfonyl azide: two hydrogens of the site are replaced by N2.
    SulfonylAzide,
    /// Arenediazonium ion: the terminal nitrogen is attacked.
    Diazonium,
    /// Oxaziridine: oxygen is handed over.
    Oxaziridine,
}
