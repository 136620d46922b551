//! Groups that the model does not cover, with the reason a chemist reads.

use std::sync::LazyLock;

use super::matching::Patterns;
use crate::Molecule;

type Row = (&'static str, &'static str);

/// Reagents that react twice at one place, or at two places between which nothing decides.
const BIFUNCTIONAL: &[Row] = &[
    (
        "[F,Cl,Br]C(=O)[F,Cl,Br]",
        "phosgene and its kin hand over two groups, which is not covered",
    ),
    (
        "[Cl,Br]C(=O)C(=O)[Cl,Br]",
        "oxalyl chloride hands over two groups, which is not covered",
    ),
    (
        "ClC(Cl)(Cl)OC(=O)",
        "diphosgene and triphosgene hand over several groups, which is not covered",
    ),
    (
        "O=C1OC(=O)[CX3]=[CX3]1",
        "a maleic anhydride is attacked at its double bond and at its carbonyl groups: which of \
         them reacts is not covered",
    ),
];

/// Groups that react before or beside anything that is covered.
const REACTIVE: &[Row] = &[
    ("C=C=C", "an allene is not covered"),
    (
        "[OX2](C(=O)[#7])C(=O)",
        "an N-carboxyanhydride loses carbon dioxide, which is not covered",
    ),
    (
        "O=C1[#6]:[#6]C(=O)[#6]:[#6]1",
        "an anthraquinone takes electrons from carbanions, which is not covered",
    ),
    (
        "O=C1C(=O)[#6]=,:[#6][#6]=,:[#6]1",
        "an ortho-quinone takes electrons from carbanions, which is not covered",
    ),
    (
        "O=C1[#6]:[#6]C(=[CX3])[#6]:[#6]1",
        "a methylene anthrone is not covered",
    ),
    ("[I;X2,X3]", "a hypervalent iodine reagent is not covered"),
    ("[#7][F,Cl,Br,I]", "an N-halo amine is not covered"),
    ("[O][F,Cl,Br,I]", "an oxide of a halogen is not covered"),
    (
        "[#16,#34;!$([#16](=O)(=O)F)][F,Cl,Br,I]",
        "a halide of sulfur or selenium transfers sulfur, selenium or halogen, which is not covered",
    ),
    (
        "[SX2][#7]",
        "a sulfenamide is not covered: only N-thio imides are",
    ),
    ("[#34][#7]", "a selenenamide is not covered"),
    ("[P][F,Cl,Br,I]", "a phosphorus halide is not covered"),
    ("[#6]=[N+]=[N-]", "a diazo compound is not covered"),
    (
        "C(=O)N=[N+]=[N-]",
        "an acyl azide rearranges, which is not covered",
    ),
    (
        "P(=O)N=[N+]=[N-]",
        "a phosphoryl azide is not covered: only sulfonyl azides are",
    ),
    (
        "[#6]N=N[#6]",
        "an azo compound is not covered: only azodicarboxylates and their kin are",
    ),
    (
        "[CX4][NX2]=O",
        "a nitrosoalkane is a dimer or an oxime, which is not covered",
    ),
    (
        "[#7]=[SX2,SX3]=O",
        "an N-sulfinyl or N-sulfonyl amine is not covered",
    ),
    (
        "[CX3](=[#7])[F,Cl,Br,I]",
        "an imidoyl halide or chloroiminium ion is not covered",
    ),
    (
        "N#C[Cl,Br,I,$(S(=O)=O)]",
        "a cyanogen halide or sulfonyl cyanide hands over cyanide, which is not covered",
    ),
    ("C#C[Cl,Br,I]", "an alkynyl halide is not covered"),
    ("[OX2][OX2]", "a peroxide is not covered"),
    ("[NX4+,SX3+,PX4+]", "an onium ion is not covered"),
    ("[n+;!$([n+][O-])]", "an azinium ion is not covered"),
    (
        "[CX3]=[N+][O-]",
        "a nitrone adds as a 1,3-dipole as well, which is not covered",
    ),
    (
        "[CX3]=[CX3][CX3](=O)[OX2H,OX1-]",
        "an α,β-unsaturated acid is not covered: its carboxylate is no acceptor",
    ),
    ("[#6][CX3](=[SX1])[#6]", "a thioketone is not covered"),
];

/// Groups that are spectators beside a covered one and not covered alone.
const SLUGGISH: &[Row] = &[
    (
        "[CX3](=O)@[OX2]@[CX3]=[CX3]",
        "an enol lactone opens to a further acyl group, which is not covered",
    ),
    (
        "[CX3](=O)[OX2H,OX1-]",
        "a carboxylic acid is no electrophile for carbanions",
    ),
    (
        "[CX4;H1]([OX2])([OX2])[OX2,NX3]",
        "an orthoester or amide acetal reacts by way of a cation, which is not covered",
    ),
    (
        "[CX3](=O)[#7;!H0]",
        "an amide N–H is deprotonated before its carbonyl group is attacked",
    ),
    (
        "[#7,O][CX3](=O)[#7,O]",
        "a carbamate or urea is no acyl donor for carbanions",
    ),
    (
        "c[OX2]S(=O)=O",
        "an aryl sulfonate is attacked at sulfur, which is not covered",
    ),
    ("[OX2]P(=O)", "a phosphonate ester is not covered"),
    ("[c](=O)[o]", "a coumarin or pyranone is not covered"),
    ("[CX3]=[SX1]", "a thiocarbonyl compound is not covered"),
    (
        "[SX2][SX2]",
        "elemental sulfur and polysulfides are not covered",
    ),
    ("C1OCC1", "an oxetane is not covered"),
    (
        "C#N",
        "a nitrile as electrophile (Thorpe reaction) is not covered",
    ),
];

static BIFUNCTIONAL_PATTERNS: LazyLock<Patterns<&str>> =
    LazyLock::new(|| Patterns::compile(BIFUNCTIONAL));
static REACTIVE_PATTERNS: LazyLock<Patterns<&str>> = LazyLock::new(|| Patterns::compile(REACTIVE));
static SLUGGISH_PATTERNS: LazyLock<Patterns<&str>> = LazyLock::new(|| Patterns::compile(SLUGGISH));

/// Why a reagent with two ways to react is refused.
pub(super) fn bifunctional(molecule: &Molecule) -> Option<&'static str> {
    BIFUNCTIONAL_PATTERNS.first(molecule)
}

/// Why a molecule with a reactive group of a class that is not covered is refused.
pub(super) fn reactive(molecule: &Molecule) -> Option<&'static str> {
    REACTIVE_PATTERNS.first(molecule)
}

/// Why a molecule with nothing but a sluggish group is refused.
pub(super) fn sluggish(molecule: &Molecule) -> Option<&'static str> {
    SLUGGISH_PATTERNS.first(molecule)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_compiles() {
        assert_eq!(BIFUNCTIONAL_PATTERNS.len(), BIFUNCTIONAL.len());
        assert_eq!(REACTIVE_PATTERNS.len(), REACTIVE.len());
        assert_eq!(SLUGGISH_PATTERNS.len(), SLUGGISH.len());
    }
}
