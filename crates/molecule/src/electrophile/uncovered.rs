//! Groups that the model does not cover, with the reason a chemist reads.

use std::sync::LazyLock;

use chematic::smarts::{self, MatchConfig, QueryMolecule};

use crate::Molecule;

type Row = (&'static str, &'static str);

/// Groups that react before or beside anything that is covered.
const REACTIVE: &[Row] = &[
    (
        "[CX3](=[OX1])[F,Cl,Br,I]",
        "an acyl halide acylates, which is not covered",
    ),
    (
        "[CX3](=O)[OX2][CX3]=O",
        "an anhydride acylates, which is not covered",
    ),
    (
        "[NX2]=C=[O,S,NX2]",
        "an isocyanate, isothiocyanate or carbodiimide is not covered",
    ),
    ("C=C=[O,S]", "a ketene is not covered"),
    ("[O,S]=C=[O,S]", "carboxylation is not covered"),
    ("C=C=C", "an allene is not covered"),
    ("C1OC1", "an epoxide opens its ring, which is not covered"),
    ("C1NC1", "an aziridine opens its ring, which is not covered"),
    ("C1SC1", "a thiirane opens its ring, which is not covered"),
    (
        "O=C1OCC1",
        "a β-lactone opens its ring, which is not covered",
    ),
    (
        "O=C1[#6]=,:[#6]C(=O)[#6]=,:[#6]1",
        "a quinone takes electrons as well, which is not covered",
    ),
    (
        "O=C1C(=O)[#6]=,:[#6][#6]=,:[#6]1",
        "a quinone takes electrons as well, which is not covered",
    ),
    (
        "O=C1[#6]=,:[#6]C(=[CX3])[#6]=,:[#6]1",
        "a quinone methide is not covered",
    ),
    (
        "[F,Cl,Br,I][F,Cl,Br,I]",
        "a halogen halogenates, which is not covered",
    ),
    ("[#7,O][F,Cl,Br,I]", "a halogenating agent is not covered"),
    ("[I;X2,X3]", "a hypervalent iodine reagent is not covered"),
    (
        "[#16,#34][F,Cl,Br,I]",
        "a halide of sulfur or selenium transfers sulfur, selenium or halogen, which is not covered",
    ),
    (
        "[SX2][SX2]",
        "a disulfide sulfenylates, which is not covered",
    ),
    (
        "[SX2]S(=O)=O",
        "a thiosulfonate sulfenylates, which is not covered",
    ),
    (
        "[SX2][#7]",
        "an N-thio compound sulfenylates, which is not covered",
    ),
    ("[#34][#34,#7]", "a selenenylating agent is not covered"),
    ("S(=O)(=O)OS(=O)=O", "a sulfonic anhydride is not covered"),
    (
        "[Si][F,Cl,Br,I]",
        "a silyl halide silylates at oxygen, which is not covered",
    ),
    (
        "[Si]OS(=O)=O",
        "a silyl sulfonate silylates at oxygen, which is not covered",
    ),
    ("[P][F,Cl,Br,I]", "a phosphorus halide is not covered"),
    ("[#6]=[N+]=[N-]", "a diazo compound is not covered"),
    ("[#6][N+]#N", "a diazonium ion is not covered"),
    (
        "S(=O)(=O)N=[N+]=[N-]",
        "a sulfonyl azide transfers its diazo group, which is not covered",
    ),
    (
        "[#6]N=N[#6]",
        "an azo compound aminates, which is not covered",
    ),
    ("[#6][NX2]=O", "a nitroso compound is not covered"),
    ("O[NX2]=O", "a nitrite nitrosates, which is not covered"),
    (
        "[CX3;!$(*[O,N,S])]=[N;!$(N[O,N])]",
        "an imine or iminium ion (Mannich reaction) is not covered",
    ),
    (
        "[CX3](=[NX2])[F,Cl,Br,I]",
        "an imidoyl halide is not covered",
    ),
    ("C#C[Cl,Br,I]", "an alkynyl halide is not covered"),
    (
        "C#C[$(C=O),$(C#N),$(S(=O)=O),$([N+](=O)[O-])]",
        "an acceptor alkyne is not covered",
    ),
    ("[OX2][OX2]", "a peroxide is not covered"),
    ("[NX4+,SX3+,OX3+,PX4+]", "an onium ion is not covered"),
    (
        "[CX3H1](=O)[CX3]=O",
        "an aldehyde next to another carbonyl group is not covered",
    ),
    (
        "[CX3]=[CX3][CX3](=O)[OX2H,OX1-]",
        "an α,β-unsaturated acid is not covered: its carboxylate is no acceptor",
    ),
    (
        "[CX3]=[CX3][CX3](=O)[SX2]",
        "an α,β-unsaturated thioester is not covered",
    ),
    ("[CX3]=[CX3][SX3]=O", "a vinyl sulfoxide is not covered"),
    (
        "[CX3]=[CX3]S(=O)(=O)[O,N]",
        "a vinyl sulfonate or sulfonamide is not covered",
    ),
    ("[CX3]=[CX3][PX4](=O)", "a vinyl phosphonate is not covered"),
    (
        "[CX3H2]=[CX3][$(c:n),$(c:c:c:n)]",
        "a vinylpyridine is not covered",
    ),
];

/// Groups that are spectators beside a covered one and not covered alone.
const SLUGGISH: &[Row] = &[
    (
        "[F,Cl,Br,I][c;$(c:n),$(c:c:c:n),$(c:c[N+](=O)[O-]),$(c:c:c:c[N+](=O)[O-])]",
        "an activated aryl halide reacts by SNAr, which is not covered",
    ),
    (
        "Fc1c(F)c(F)c(F)c(F)c1",
        "a polyfluoroarene reacts by SNAr, which is not covered",
    ),
    (
        "[#6][CX3](=O)[#6]",
        "a ketone as electrophile is not covered: the addition of a carbanion is uphill",
    ),
    (
        "[OX2][CX3](=O)[OX2]",
        "a carbonate acylates, which is not covered",
    ),
    (
        "[#6,#1][CX3](=O)[OX2][#6]",
        "an ester acylates (Claisen condensation), which is not covered",
    ),
    (
        "[CX3H1](=O)[OX2][#6]",
        "a formate formylates, which is not covered",
    ),
    (
        "[CX3](=O)[SX2]",
        "a thioester acylates, which is not covered",
    ),
    (
        "[CX3](=O)[OX2H,OX1-]",
        "a carboxylic acid is no electrophile for carbanions",
    ),
    ("[CX3](=O)[#7]", "an amide as electrophile is not covered"),
    (
        "c[OX2]S(=O)=O",
        "an aryl sulfonate is attacked at sulfur, which is not covered",
    ),
    (
        "[OX2]P(=O)",
        "a phosphate or phosphonate ester is not covered",
    ),
    ("[c](=O)[o]", "a coumarin or pyranone is not covered"),
    (
        "C#N",
        "a nitrile as electrophile (Thorpe reaction) is not covered",
    ),
];

static REACTIVE_PATTERNS: LazyLock<Vec<(QueryMolecule, &'static str)>> =
    LazyLock::new(|| compile(REACTIVE));
static SLUGGISH_PATTERNS: LazyLock<Vec<(QueryMolecule, &'static str)>> =
    LazyLock::new(|| compile(SLUGGISH));

fn compile(rows: &[Row]) -> Vec<(QueryMolecule, &'static str)> {
    rows.iter()
        .filter_map(|(pattern, reason)| Some((smarts::parse_smarts(pattern).ok()?, *reason)))
        .collect()
}

/// Why a molecule with a reactive group of a class that is not covered is refused.
pub(super) fn reactive(molecule: &Molecule) -> Option<&'static str> {
    first(&REACTIVE_PATTERNS, molecule)
}

/// Why a molecule with nothing but a sluggish group is refused.
pub(super) fn sluggish(molecule: &Molecule) -> Option<&'static str> {
    first(&SLUGGISH_PATTERNS, molecule)
}

fn first(patterns: &[(QueryMolecule, &'static str)], molecule: &Molecule) -> Option<&'static str> {
    let config = MatchConfig::default();
    patterns
        .iter()
        .find(|(query, _)| smarts::has_match_perceived(query, &molecule.kekule, &config))
        .map(|(_, reason)| *reason)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_compiles() {
        assert_eq!(REACTIVE_PATTERNS.len(), REACTIVE.len());
        assert_eq!(SLUGGISH_PATTERNS.len(), SLUGGISH.len());
    }
}
