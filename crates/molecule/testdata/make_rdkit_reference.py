"""Makes rdkit_reference.csv, rdkit_products.csv and rdkit_side_products.csv with RDKit.

Run it in this directory: python make_rdkit_reference.py
It needs RDKit and nothing else; the values do not come from the crate that they test.
"""

import csv

from rdkit import Chem, rdBase
from rdkit.Chem import AllChem, Descriptors
from rdkit.Chem.rdMolDescriptors import CalcMolFormula

PRODUCT_COLUMNS = ["canonical_flat", "canonical", "formula", "exact_mass", "molar_mass"]

ACCEPTOR = "$(C=O),$(C#N),$([N+](=O)[O-]),$(S(=O)(=O)[#6])"
FURTHER_ACCEPTOR = "$(S(=O)),$(P=O),$(c:n),$(c:c:c:n),$(C(=O))"
SULFONATE = "[OX2]S(=O)(=O)[#6,#8]"

# One reaction SMARTS a kind; the reacting atom of the substrate is marked by the isotope 99.
REACTIONS = {
    "alkyl halide": "[99#6;!H0:1].[CX4;!$(C(F)(F)F):2]-[Cl,Br,I]>>[#6:1]-[C:2]",
    "alkyl fluoride": "[99#6;!H0:1].[CX4:2]-F>>[#6:1]-[C:2]",
    "alkyl sulfonate": f"[99#6;!H0:1].[CX4:2]-{SULFONATE}>>[#6:1]-[C:2]",
    "michael": f"[99#6;!H0:1].[C:2]=[C:3]-[{ACCEPTOR}:4]>>[#6:1]-[C:2]-[C:3]-[*:4]",
    "alkyl sulfonate of a ring": "[99#6;!H0:1].[CX4:2]@[O:3]@[S:4]>>([#6:1]-[C:2].[O:3]-[S:4])",
    "alkyl oxonium": "[99#6;!H0:1].[CX4:2]-[O+]>>[#6:1]-[C:2]",
    "alkyl phosphate": "[99#6;!H0:1].[CX4:2]-OP(=O)>>[#6:1]-[C:2]",
    "aldehyde": "[99#6;!H0:1].[CX3;!H0:2](=[O:3])[#6,#1:4]>>[#6:1]-[C:2](-[O:3])[*:4]",
    "formaldehyde": "[99#6;!H0:1].[CH2:2]=[O:3]>>[#6:1]-[C:2]-[O:3]",
    "aldol dehydrated": "[99#6;!H0:1].[CX3;!H0:2](=[O:3])[#6,#1:4]>>[#6:1]=[C:2]-[*:4]",
    "enolate O-alkyl halide": "[99#6;!H0:1]-[C:2]=[O:3].[CX4:4]-[Cl,Br,I]>>[#6:1]=[C:2]-[O:3]-[C:4]",
    "enolate O-alkyl sulfonate": f"[99#6;!H0:1]-[C:2]=[O:3].[CX4:4]-{SULFONATE}>>[#6:1]=[C:2]-[O:3]-[C:4]",
    "nitronate O-alkyl halide": "[99#6;!H0:1]-[N+:2](=[O:3])[O-:5].[CX4:4]-[Cl,Br,I]>>[#6:1]=[N+:2](-[O:3]-[C:4])[O-:5]",
    "heteroatom alkyl halide": "[99*;!H0:1].[CX4:2]-[Cl,Br,I]>>[*:1]-[C:2]",
    "heteroatom alkyl sulfonate": f"[99*;!H0:1].[CX4:2]-{SULFONATE}>>[*:1]-[C:2]",
    "heteroatom michael": f"[99*;!H0:1].[C:2]=[C:3]-[{ACCEPTOR}:4]>>[*:1]-[C:2]-[C:3]-[*:4]",
    "michael to alkyne": f"[99#6;!H0:1].[C:2]#[C:3]-[{ACCEPTOR}:4]>>[#6:1]-[C:2]=[C:3]-[*:4]",
    "michael, other acceptors": f"[99#6;!H0:1].[C:2]=[C:3]-[{FURTHER_ACCEPTOR}:4]>>[#6:1]-[C:2]-[C:3]-[*:4]",
    "quinone": "[99#6;!H0:1].[C;!H0:2]1=[C:3][C:4](=[O:5])[C:6]=[C:7][C:8]1=[O:9]"
    ">>[#6:1]-[C:2]1=[C:8](-[O:9])-[C:7]=[C:6]-[C:4](-[O:5])=[C:3]1",
    "naphthoquinone": "[99#6;!H0:1].[C;!H0:2]1=[C:3][C:4](=[O:5])[c:6]:[c:7][C:8]1=[O:9]"
    ">>[#6:1]-[C:2]1=[C:8](-[O:9])-[c:7]:[c:6]-[C:4](-[O:5])=[C:3]1",
    "para-quinone methide": "[99#6;!H0:1].[C:2]=[C:3]1[C:4]=[C:5][C:6](=[O:7])[C:8]=[C:9]1"
    ">>[#6:1]-[C:2]-[C:3]1=[C:4]-[C:5]=[C:6](-[O:7])-[C:8]=[C:9]1",
    "ortho-quinone methide": "[99#6;!H0:1].[C:2]=[C:3]1[C:4]=[C:5][C:6]=[C:8][C:9]1=[O:7]"
    ">>[#6:1]-[C:2]-[C:3]1=[C:9](-[O:7])-[C:8]=[C:6]-[C:5]=[C:4]1",
    "ketone": "[99#6;!H0:1].[#6:4][CX3:2](=[O:3])[#6:5]>>[#6:1]-[C:2](-[O:3])([#6:4])[#6:5]",
    "aldol of a ketone dehydrated": "[99#6;!H0:1].[#6:4][CX3:2](=[O:3])[#6:5]>>[#6:1]=[C:2]([#6:4])[#6:5]",
    "imine": "[99#6;!H0:1].[CX3:2]=[NX2:3]>>[#6:1]-[C:2]-[N:3]",
    "iminium": "[99#6;!H0:1].[CX3:2]=[N+:3]>>[#6:1]-[C:2]-[N+0:3]",
    "acyl halide": "[99#6;!H0:1].[CX3:2](=[O:3])-[F,Cl,Br,I]>>[#6:1]-[C:2]=[O:3]",
    "acyl oxygen": "[99#6;!H0:1].[CX3;!$(C([OX2])[OX2]):2](=[O:3])-[OX2]>>[#6:1]-[C:2]=[O:3]",
    "acyl carbonate": "[99#6;!H0:1].[CX3:2](=[O:3])([OX2:4])-[OX2]>>[#6:1]-[C:2](=[O:3])[O:4]",
    "acyl dicarbonate": "[99#6;!H0:1].[CX3:2](=[O:3])([OX2:4][CX4:5])-[OX2]C=O>>[#6:1]-[C:2](=[O:3])[O:4][C:5]",
    "acyl oxygen of a ring": "[99#6;!H0:1].[C:2](=[O:3])@[O:4]>>([#6:1]-[C:2]=[O:3].[O:4])",
    "acyl nitrogen": "[99#6;!H0:1].[CX3:2](=[O:3])-[N,n]>>[#6:1]-[C:2]=[O:3]",
    "acyl nitrogen of a ring": "[99#6;!H0:1].[C:2](=[O:3])@[N:4]>>([#6:1]-[C:2]=[O:3].[N:4])",
    "acyl sulfur": "[99#6;!H0:1].[CX3:2](=[O:3])-[SX2]>>[#6:1]-[C:2]=[O:3]",
    "acyl cyanide": "[99#6;!H0:1].[CX3:2](=[O:3])-C#N>>[#6:1]-[C:2]=[O:3]",
    "sulfonyl": "[99#6;!H0:1].[SX4:2](=[O:3])(=[O:5])-[F,Cl,$(OS),$(N(c)S)]>>[#6:1]-[S:2](=[O:3])=[O:5]",
    "strained ring": "[99#6;!H0:1].[CX4;H2:2]1[CX4:3][O,N,S:4]1>>[#6:1]-[C:2]-[C:3]-[*:4]",
    "strained ring at CH": "[99#6;!H0:1].[CX4;H1:2]1[CX4:3][O,N,S:4]1>>[#6:1]-[C:2]-[C:3]-[*:4]",
    "carbon dioxide and kin": "[99#6;!H0:1].[O,S:2]=[C:3]=[O,S:4]>>[#6:1]-[C:3](=[*:2])-[*:4]",
    "carbonyl sulfide": "[99#6;!H0:1].[O:2]=[C:3]=[S:4]>>[#6:1]-[C:3](=[O:2])-[S:4]",
    "isocyanate and kin": "[99#6;!H0:1].[O,S:2]=[C:3]=[N:4]>>[#6:1]-[C:3](=[*:2])-[N:4]",
    "carbodiimide": "[99#6;!H0:1].[N:2]=[C:3]=[N:4]>>[#6:1]-[C:3](=[N:2])-[N:4]",
    "ketene": "[99#6;!H0:1].[O:2]=[C:3]=[C:4]>>[#6:1]-[C:3](=[O:2])-[C:4]",
    "aryl halide": "[99#6;!H0:1].[c:2]-[F,Cl,Br,I]>>[#6:1]-[c:2]",
    "halogen from N or O": "[99#6;!H0:1].[#7,#8]-[F,Cl,Br,I:2]>>[#6:1]-[*:2]",
    "halogen from an element": "[99#6;!H0:1].[Br,I:2]-[Br,I,Cl]>>[#6:1]-[*:2]",
    "iodine from iodine chloride": "[99#6;!H0:1].[I:2]-[Cl]>>[#6:1]-[I:2]",
    "bromine from carbon": "[99#6;!H0:1].[CX4]-[Br:2]>>[#6:1]-[Br:2]",
    "chlorine from carbon or sulfur": "[99#6;!H0:1].[CX4,SX4]-[Cl:2]>>[#6:1]-[Cl:2]",
    "iodine from carbon": "[99#6;!H0:1].[CX4]-[I:2]>>[#6:1]-[I:2]",
    "chalcogen": "[99#6;!H0:1].[SX2,SeX2:2](-[#6:3])-[!#6]>>[#6:1]-[*:2]-[#6:3]",
    "azo": "[99#6;!H0:1].[N;$(NC=O):2]=[N:3]>>[#6:1]-[N:2]-[N:3]",
    "nitroso": "[99#6;!H0:1].[c:4]-[N:2]=[O:3]>>[#6:1]-[N:2](-[O:3])-[c:4]",
    "nitrosation": "[99#6;!H0:1].[N:2](=[O:3])-[O,Cl]>>[#6:1]-[N:2]=[O:3]",
    "nitrosation, two hydrogens": "[99#6;!H0:1].[N:2](=[O:3])-[O,Cl]>>[#6:1]=[N:2]-[O:3]",
    "diazonium": "[99#6;!H0:1].[N:2]#[N+:3]>>[#6:1]-[N:2]=[N+0:3]",
    "diazonium, two hydrogens": "[99#6;!H0:1].[N:2]#[N+:3]>>[#6:1]=[N:2]-[N+0:3]",
    "diazo transfer, two hydrogens": "[99#6;!H0:1].[N-:2]=[N+:3]=N>>[#6:1]=[N+:2]=[N-:3]",
    "oxaziridine": "[99#6;!H0:1].[O:2]1NC1>>[#6:1]-[O:2]",
    "silyl": "[99#6;!H0:1].[Si:2]-[Cl,Br,I,$(OS)]>>[#6:1]-[Si:2]",
    "enolate O-acyl": "[99#6;!H0:1]-[C:2]=[O:3].[CX3:4](=[O:5])-[F,Cl,$(OC=O)]>>[#6:1]=[C:2]-[O:3]-[C:4]=[O:5]",
    "enolate O-sulfonyl": "[99#6;!H0:1]-[C:2]=[O:3].[SX4:4](=[O:5])(=[O:6])-[Cl,$(OS),$(N(c)S)]"
    ">>[#6:1]=[C:2]-[O:3]-[S:4](=[O:5])=[O:6]",
    "enolate O-silyl": "[99#6;!H0:1]-[C:2]=[O:3].[Si:4]-[Cl,$(OS)]>>[#6:1]=[C:2]-[O:3]-[Si:4]",
    "nitronate O-silyl": "[99#6;!H0:1]-[N+:2](=[O:3])[O-:5].[Si:4]-[Cl,$(OS)]>>[#6:1]=[N+:2](-[O:3]-[Si:4])[O-:5]",
    "heteroatom acyl halide": "[99*;!H0:1].[CX3:2](=[O:3])-[F,Cl,Br,I]>>[*:1]-[C:2]=[O:3]",
    "heteroatom strained ring": "[99*;!H0:1].[CX4;H2:2]1[CX4:3][O,N,S:4]1>>[*:1]-[C:2]-[C:3]-[*:4]",
    "heteroatom isocyanate": "[99*;!H0:1].[O,S:2]=[C:3]=[N:4]>>[*:1]-[C:3](=[*:2])-[N:4]",
    "heteroatom silyl": "[99*;!H0:1].[Si:2]-[Cl,Br,I,$(OS)]>>[*:1]-[Si:2]",
    "heteroatom aryl halide": "[99*;!H0:1].[c:2]-[F,Cl,Br,I]>>[*:1]-[c:2]",
    "heteroatom chalcogen": "[99*;!H0:1].[SX2,SeX2:2](-[#6:3])-[!#6]>>[*:1]-[*:2]-[#6:3]",
    "self aldol": "[99#6;!H0:1].[98C:2](=[O:3])>>[#6:1]-[C:2](-[O:3])",
    "self claisen of a ring": "[99#6;!H0:1].[98C:2](=[O:3])@[O:4]>>([#6:1]-[C:2]=[O:3].[O:4])",
    # what becomes of electrophile, base and substrate beside the wanted bond; some have one reactant
    "substitution by an alkoxide": "[99O-:1].[CX4:2]-[Cl,Br,I]>>[O+0:1]-[C:2]",
    "substitution by an amide": "[99N-:1].[CX4:2]-[Cl,Br,I]>>[N+0:1]-[C:2]",
    "substitution by a carbanion": "[99#6-:1].[CX4:2]-[Cl,Br,I]>>[#6+0:1]-[C:2]",
    "substitution by a tertiary amine": "[99#7;H0:1].[CX4:2]-[Cl,Br,I]>>[#7+:1]-[C:2]",
    "substitution by a secondary amine": "[99N;!H0:1].[CX4:2]-[Cl,Br,I]>>[N:1]-[C:2]",
    "substitution at acyl by an alkoxide": "[99O-:1].[CX3:2](=[O:3])-[Cl]>>[O+0:1]-[C:2]=[O:3]",
    "substitution at acyl by an amine": "[99N;!H0:1].[CX3:2](=[O:3])-[Cl]>>[N:1]-[C:2]=[O:3]",
    "substitution at silicon by an amide": "[99N-:1].[Si:2]-[Cl]>>[N+0:1]-[Si:2]",
    "carbonyl adduct": "[99#6-:1].[CX3;$([CX3;H1]),$(C([#6])[#6]):2]=[O:3]>>[#6+0:1]-[C:2]-[O:3]",
    "carbonyl of an ester": "[99*:1].[CX3:2](=[O:3])-[OX2][#6]>>[*+0:1]-[C:2]=[O:3]",
    "carbonyl of a lactone": "[99*:1].[C:2](=[O:3])@[O:4]>>([*+0:1]-[C:2]=[O:3].[O:4])",
    "carbonyl of an amide": "[99*:1].[CX3:2](=[O:3])-N>>[*+0:1]-[C:2]=[O:3]",
    "alcohol of an ester": "[99C](=O)-[OX2:1]-[#6:2]>>[O:1]-[#6:2]",
    "acid by disproportionation": "[99C:1](=[O:2]).[O:3]>>[C:1](=[O:2])-[O:3]",
    "alcohol by disproportionation": "[99C:1]=[O:2]>>[C:1]-[O:2]",
    "alkene": "[99C:1](-[Cl,Br,I])-[CX4;!H0:2]>>[C:1]=[C:2]",
    "alkene from a sulfonate": f"[99C:1](-{SULFONATE})-[CX4;!H0:2]>>[C:1]=[C:2]",
    "dehalogenation": "[#6:1]-[99Br,99I]>>[#6:1]",
    "self claisen": "[99#6;!H0:1].[98C:2](=[O:3])-[O;!$(O=*)]-[#6]>>[#6:1]-[C:2](=[O:3])",
}

# kind, substrate, index of the reacting atom, electrophile (for self condensations: the carbonyl atom)
ROWS = [
    # alkylation at carbon
    ("alkyl halide", "OC(=O)Cc1ccccc1", 3, "CCCCBr"),
    ("alkyl halide", "CC(=O)CC(C)=O", 3, "CI"),
    ("alkyl halide", "CC1CCCCC1=O", 5, "BrCc1ccccc1"),
    ("alkyl halide", "CC(=O)C1CCOC1=O", 3, "BrCc1ccccc1"),
    ("alkyl halide", "CCOC(=O)CC(C)=O", 7, "CCCCBr"),
    ("alkyl halide", "CC(=O)Cc1ccccc1", 3, "CI"),
    ("alkyl halide", "CCCCCC(C)=O", 6, "BrCc1ccccc1"),
    ("alkyl halide", "O=C1CC2CCC1C2", 2, "CI"),
    ("alkyl halide", "CCOC(=O)CC(=O)OCC", 5, "BrC1CCCCC1"),
    ("alkyl halide", "CCOC(=O)CC(=O)OCC", 5, "BrCCCCBr"),
    ("alkyl halide", "CC(=O)c1ccccc1", 0, "C=CCBr"),
    ("alkyl halide", "N#CCc1ccccc1", 2, "C#CCBr"),
    ("alkyl halide", "CN(C)C(C)=O", 4, "BrCC(=O)OCC"),
    ("alkyl halide", "CC[N+](=O)[O-]", 1, "ClCc1ccc([N+](=O)[O-])cc1"),
    ("alkyl halide", "CS(=O)(=O)c1ccccc1", 0, "CCI"),
    ("alkyl halide", "O=C1CCCO1", 2, "ICC(C)C"),
    ("alkyl halide", "CC(C)C(=O)OC", 1, "BrCC(C)=CCCC(C)=C"),
    ("alkyl halide", "CC(C)C=O", 1, "BrC/C=C/c1ccccc1"),
    ("alkyl halide", "O=C1CCCc2ccccc12", 2, "BrCC#N"),
    ("alkyl halide", "C[C@H](CC(C)=O)c1ccccc1", 4, "CCI"),
    ("alkyl halide", "CC(=O)C/C=C/C", 3, "C/C=C\\CBr"),
    ("alkyl halide", "CC(C)(C)OC(=O)CN=C(c1ccccc1)c1ccccc1", 7, "BrCc1cccnc1"),
    ("alkyl fluoride", "CCOC(=O)CC#N", 5, "CCF"),
    ("alkyl sulfonate", "CCOC(=O)CC(=O)OCC", 5, "CCCCOS(=O)(=O)c1ccc(C)cc1"),
    ("alkyl sulfonate", "O=C1CCCCC1", 2, "COS(=O)(=O)C(F)(F)F"),
    ("alkyl sulfonate", "CC(=O)C1CCCCC1=O", 3, "CC(C)OS(C)(=O)=O"),
    ("alkyl sulfonate", "CC(C)C#N", 1, "CCOS(=O)(=O)OCC"),
    # conjugate addition
    ("michael", "COC(=O)CCC[N+](=O)[O-]", 6, "C=CC(=O)OC"),
    ("michael", "CCOC(=O)CC(=O)OCC", 5, "O=[N+]([O-])/C=C/c1ccccc1"),
    ("michael", "CCOC(=O)CC(=O)OCC", 5, "C=CC(C)=O"),
    ("michael", "CC(=O)CC(C)=O", 3, "O=C1C=CCCC1"),
    ("michael", "CC1C(=O)CCCC1=O", 1, "C=CC(C)=O"),
    ("michael", "N#CCc1ccccc1", 2, "C=CC#N"),
    ("michael", "CC(C)[N+](=O)[O-]", 1, "C=CS(=O)(=O)c1ccccc1"),
    ("michael", "CC(=O)CC(=O)OCC", 3, "C/C=C/C(=O)OCC"),
    ("michael", "CC(=O)c1ccccc1", 0, "O=C(/C=C/c1ccccc1)c1ccccc1"),
    ("michael", "N#CCC#N", 2, "CCOC(=O)C(=Cc1ccccc1)C(=O)OCC"),
    ("michael", "CCOC(=O)CC(=O)OCC", 5, "CN1C(=O)C=CC1=O"),
    ("michael", "C[N+](=O)[O-]", 0, "C=CC=O"),
    ("michael", "CCOC(=O)CC#N", 5, "C=CC(=O)N(C)C"),
    ("michael", "CC(=O)CC(C)=O", 3, "CCOC(=O)/C=C/C(=O)OCC"),
    # addition to aldehydes
    ("aldehyde", "CC(=O)c1ccccc1", 0, "O=Cc1ccccc1"),
    ("aldehyde", "CC[N+](=O)[O-]", 1, "O=Cc1ccc(Cl)cc1"),
    ("aldehyde", "CC(C)=O", 0, "CC(C)C=O"),
    ("aldehyde", "O=C1CCCCC1", 2, "O=Cc1ccc([N+](=O)[O-])cc1"),
    ("aldehyde", "CCOC(C)=O", 4, "CCC=O"),
    ("formaldehyde", "CC(C)C=O", 1, "C=O"),
    ("aldol dehydrated", "CC(=O)c1ccccc1", 0, "O=Cc1ccccc1"),
    ("aldol dehydrated", "CCOC(=O)CC#N", 5, "O=Cc1ccco1"),
    ("aldol dehydrated", "CCOC(=O)CC(=O)OCC", 5, "CC(C)C=O"),
    ("aldol dehydrated", "C[N+](=O)[O-]", 0, "O=Cc1ccc(OC)cc1"),
    # attack by the enolate oxygen
    ("enolate O-alkyl halide", "CC(=O)c1ccccc1", 0, "CI"),
    ("enolate O-alkyl halide", "O=C1CCCC(=O)C1", 7, "BrCc1ccccc1"),
    ("enolate O-alkyl halide", "CC(C)C=O", 1, "C=CCBr"),
    ("enolate O-alkyl halide", "CCOC(C)=O", 4, "CCI"),
    ("enolate O-alkyl halide", "C/C=C/C(=O)C/C=C/c1ccccc1", 5, "CCI"),
    ("enolate O-alkyl sulfonate", "O=C1CCCCC1", 2, "COS(=O)(=O)OC"),
    ("nitronate O-alkyl halide", "CC(C)[N+](=O)[O-]", 1, "BrCc1ccccc1"),
    # attack by O-H, N-H, S-H
    ("heteroatom alkyl halide", "CC(=O)c1ccc(O)cc1", 7, "BrCc1ccccc1"),
    ("heteroatom alkyl halide", "O=C1CCCN1", 5, "BrCc1ccccc1"),
    ("heteroatom alkyl halide", "OC(=O)Cc1ccccc1", 0, "CCCCBr"),
    ("heteroatom alkyl halide", "c1ccc2[nH]ccc2c1", 4, "CI"),
    ("heteroatom alkyl halide", "CC(=O)c1ccc(S)cc1", 7, "C=CCBr"),
    ("heteroatom alkyl sulfonate", "CC(=O)Nc1ccccc1", 3, "COS(=O)(=O)OC"),
    ("heteroatom michael", "SCC(=O)OC", 0, "C=CC#N"),
    # further alkylating agents
    ("alkyl halide", "CCOC(=O)CC(=O)OCC", 5, "COCCl"),
    ("alkyl halide", "N#CCc1ccccc1", 2, "ICI"),
    ("alkyl sulfonate of a ring", "CCOC(=O)CC(=O)OCC", 5, "O=S1(=O)CCCO1"),
    ("alkyl oxonium", "O=C1CCCCC1", 2, "CC[O+](CC)CC.F[B-](F)(F)F"),
    ("alkyl phosphate", "CC(=O)CC(C)=O", 3, "COP(=O)(OC)OC"),
    # further Michael acceptors
    ("michael to alkyne", "CCOC(=O)CC(=O)OCC", 5, "C#CC(=O)OCC"),
    ("michael to alkyne", "CC(=O)CC(C)=O", 3, "COC(=O)C#CC(=O)OC"),
    ("michael to alkyne", "CC1C(=O)CCCC1=O", 1, "C#CC(C)=O"),
    ("michael, other acceptors", "CCOC(=O)CC#N", 5, "C=CS(=O)c1ccccc1"),
    ("michael, other acceptors", "CCOC(=O)CC(=O)OCC", 5, "C=CP(=O)(OCC)OCC"),
    ("michael, other acceptors", "CC(C)[N+](=O)[O-]", 1, "C=Cc1ccccn1"),
    ("michael, other acceptors", "CCOC(=O)CC(=O)OCC", 5, "C=Cc1ccncc1"),
    ("michael, other acceptors", "CC(=O)CC(=O)OCC", 3, "C=CS(=O)(=O)N(C)C"),
    ("michael, other acceptors", "CC(=O)CC(C)=O", 3, "C=CC(=O)SCC"),
    ("michael, other acceptors", "CCOC(=O)CC(=O)OCC", 5, "C=CS(=O)(=O)F"),
    ("michael, other acceptors", "CC(=O)CC(=O)OCC", 3, "C=C1CCOC1=O"),
    ("quinone", "CCOC(=O)CC(=O)OCC", 5, "O=C1C=CC(=O)C=C1"),
    ("naphthoquinone", "CC(=O)CC(=O)OCC", 3, "O=C1C=CC(=O)c2ccccc12"),
    ("para-quinone methide", "CCOC(=O)CC(=O)OCC", 5, "CC(C)(C)C1=CC(=Cc2ccccc2)C=C(C(C)(C)C)C1=O"),
    ("ortho-quinone methide", "CC(=O)CC(C)=O", 3, "C=C1C=CC=CC1=O"),
    # aldehydes, ketones, imines
    ("aldehyde", "CC(=O)c1ccccc1", 0, "CCOC(=O)C=O"),
    ("aldehyde", "C[N+](=O)[O-]", 0, "O=CC(Cl)(Cl)Cl"),
    ("ketone", "CCOC(C)=O", 4, "CC(=O)c1ccccc1"),
    ("ketone", "CC#N", 0, "O=C1CCCCC1"),
    ("ketone", "C[N+](=O)[O-]", 0, "CCOC(=O)C(C)=O"),
    ("ketone", "CC(=O)c1ccccc1", 0, "CN1C(=O)C(=O)c2ccccc21"),
    ("aldol of a ketone dehydrated", "CCOC(=O)CC#N", 5, "O=C1CCCCC1"),
    ("imine", "CCOC(=O)CC(=O)OCC", 5, "Cc1ccc(S(=O)(=O)N=Cc2ccccc2)cc1"),
    ("imine", "CC[N+](=O)[O-]", 1, "CC(C)(C)OC(=O)/N=C/c1ccccc1"),
    ("imine", "CCOC(C)=O", 4, "CC(C)(C)S(=O)N=Cc1ccccc1"),
    ("imine", "COC(=O)C(C)C", 4, "C(=Nc1ccccc1)c1ccccc1"),
    ("imine", "CC(=O)c1ccccc1", 0, "CC(C)=NC"),
    ("iminium", "CC(=O)c1ccccc1", 0, "C=[N+](C)C.[I-]"),
    ("iminium", "O=C1CCCCC1", 2, "C(c1ccccc1)=[N+]1CCCCC1.[Cl-]"),
    # acyl groups
    ("acyl halide", "CCOC(=O)CC(=O)OCC", 5, "CC(=O)Cl"),
    ("acyl halide", "CC(=O)c1ccccc1", 0, "O=C(Cl)C(C)(C)C"),
    ("acyl halide", "CCOC(C)=O", 4, "CCOC(=O)Cl"),
    ("acyl halide", "CC(C)C#N", 1, "CN(C)C(=O)Cl"),
    ("acyl halide", "CCOC(=O)CC#N", 5, "ClCC(=O)Cl"),
    ("acyl oxygen", "CC(=O)c1ccccc1", 0, "CC(=O)OC(C)=O"),
    ("acyl oxygen", "CC(=O)c1ccccc1", 0, "CCOC(=O)c1ccccc1"),
    ("acyl oxygen", "O=C1CCCCC1", 2, "CCOC=O"),
    ("acyl oxygen", "CC(C)=O", 0, "CCOC(=O)C(=O)OCC"),
    ("acyl oxygen", "CC(=O)c1ccccc1", 0, "CCOC(=O)C(F)(F)F"),
    ("acyl oxygen", "CCOC(C)=O", 4, "CC(=O)Oc1ccccc1"),
    ("acyl oxygen", "CC#N", 0, "CC(=O)OC(C)(C)C"),
    ("acyl carbonate", "CC(=O)c1ccccc1", 0, "COC(=O)OC"),
    ("acyl dicarbonate", "N#CCc1ccccc1", 2, "CC(C)(C)OC(=O)OC(=O)OC(C)(C)C"),
    ("acyl oxygen of a ring", "CC(=O)c1ccccc1", 0, "O=C1CCCO1"),
    ("acyl oxygen of a ring", "CCOC(C)=O", 4, "O=C1CCC(=O)O1"),
    ("acyl oxygen of a ring", "CC(=O)c1ccccc1", 0, "O=C1OCCO1"),
    ("acyl oxygen of a ring", "CC(=O)c1ccccc1", 0, "O=C1CCO1"),
    ("acyl nitrogen", "CCOC(C)=O", 4, "CC(=O)n1ccnc1"),
    ("acyl nitrogen", "CC(=O)c1ccccc1", 0, "CON(C)C(C)=O"),
    ("acyl nitrogen", "O=C1CCCCC1", 2, "CN(C)C=O"),
    ("acyl nitrogen of a ring", "CCOC(C)=O", 4, "CN1CCCC1=O"),
    ("acyl sulfur", "CC(=O)c1ccccc1", 0, "CC(=O)SCC"),
    ("acyl cyanide", "O=C1CCCCC1", 2, "COC(=O)C#N"),
    ("acyl cyanide", "CC(=O)c1ccccc1", 0, "CC(=O)C#N"),
    ("sulfonyl", "CCOC(=O)CC(=O)OCC", 5, "Cc1ccc(S(=O)(=O)Cl)cc1"),
    ("sulfonyl", "CC(=O)CC(C)=O", 3, "O=S(=O)(OS(=O)(=O)C(F)(F)F)C(F)(F)F"),
    # strained rings
    ("strained ring", "CCOC(=O)CC(=O)OCC", 5, "C1CO1"),
    ("strained ring", "CC#N", 0, "CC1CO1"),
    ("strained ring", "CC(=O)CC(C)=O", 3, "C1OC1c1ccccc1"),
    ("strained ring", "CCOC(=O)CC(=O)OCC", 5, "Cc1ccc(S(=O)(=O)N2CC2)cc1"),
    ("strained ring", "CC(=O)CC(=O)OCC", 3, "C1CS1"),
    ("strained ring at CH", "CCOC(=O)CC#N", 5, "C1CCC2OC2C1"),
    # heterocumulenes
    ("carbon dioxide and kin", "CC(=O)c1ccccc1", 0, "O=C=O"),
    ("carbon dioxide and kin", "CC(=O)c1ccccc1", 0, "S=C=S"),
    ("carbonyl sulfide", "N#CCc1ccccc1", 2, "O=C=S"),
    ("isocyanate and kin", "CCOC(=O)CC#N", 5, "O=C=Nc1ccccc1"),
    ("isocyanate and kin", "CC(=O)CC(C)=O", 3, "S=C=Nc1ccccc1"),
    ("carbodiimide", "CC(=O)CC(C)=O", 3, "CC(C)N=C=NC(C)C"),
    ("ketene", "CCOC(=O)CC(=O)OCC", 5, "O=C=C(c1ccccc1)c1ccccc1"),
    # aromatic substitution
    ("aryl halide", "CCOC(=O)CC(=O)OCC", 5, "O=[N+]([O-])c1ccc(F)cc1"),
    ("aryl halide", "CC(=O)CC(=O)OCC", 3, "O=[N+]([O-])c1ccc(Cl)c([N+](=O)[O-])c1"),
    ("aryl halide", "CCOC(=O)CC#N", 5, "COc1cc2ncnc(Cl)c2cc1OC"),
    ("aryl halide", "CC(C)C#N", 1, "Clc1ncccn1"),
    ("aryl halide", "CCOC(=O)CC#N", 5, "Fc1c(F)c(F)c(F)c(F)c1F"),
    # transfer of halogen
    ("halogen from N or O", "CCOC(=O)CC(C)=O", 7, "O=C1CCC(=O)N1Cl"),
    ("halogen from N or O", "CC(=O)c1ccccc1", 0, "O=C1CCC(=O)N1Br"),
    ("halogen from N or O", "CC(=O)CC(C)=O", 3, "CC1(C)N(Br)C(=O)N(Br)C1=O"),
    ("halogen from N or O", "CCOC(=O)C1CCCC1=O", 5, "O=S(=O)(N(F)S(=O)(=O)c1ccccc1)c1ccccc1"),
    ("halogen from N or O", "CC(=O)CC(=O)OCC", 3, "F[N+]12CC[N+](CCl)(CC1)CC2.F[B-](F)(F)F.F[B-](F)(F)F"),
    ("halogen from N or O", "O=C1CCCCC1", 2, "CC(C)(C)OCl"),
    ("halogen from an element", "CC(=O)c1ccccc1", 0, "BrBr"),
    ("halogen from an element", "O=C1CCCCC1", 2, "II"),
    ("iodine from iodine chloride", "CC(=O)CC(C)=O", 3, "ICl"),
    ("bromine from carbon", "CC(C)C#N", 1, "BrC(Br)(Br)Br"),
    ("bromine from carbon", "CCOC(=O)C(C)C", 5, "BrC(Cl)(Cl)C(Cl)(Cl)Br"),
    ("chlorine from carbon or sulfur", "CC(C)C(=O)OC", 1, "ClC(Cl)(Cl)Cl"),
    ("chlorine from carbon or sulfur", "CC(=O)CC(=O)OCC", 3, "O=S(=O)(Cl)C(F)(F)F"),
    ("iodine from carbon", "CC(C)C#N", 1, "FC(F)(F)I"),
    # transfer of sulfur, selenium, nitrogen, oxygen
    ("chalcogen", "O=C1CCCCC1", 2, "c1ccc(SSc2ccccc2)cc1"),
    ("chalcogen", "CCOC(C)=O", 4, "CSS(C)(=O)=O"),
    ("chalcogen", "CC(=O)CC(=O)OCC", 3, "ClSc1ccccc1"),
    ("chalcogen", "CC(=O)CC(=O)OCC", 3, "O=C1c2ccccc2C(=O)N1SC(F)(F)F"),
    ("chalcogen", "O=C1CCCCC1", 2, "Cl[Se]c1ccccc1"),
    ("chalcogen", "O=C1CCCO1", 2, "c1ccc([Se][Se]c2ccccc2)cc1"),
    ("azo", "CC(=O)CC(=O)OCC", 3, "CCOC(=O)/N=N/C(=O)OCC"),
    ("azo", "CCOC(=O)CC#N", 5, "O=C1N=NC(=O)N1c1ccccc1"),
    ("nitroso", "O=C1CCCCC1", 2, "O=Nc1ccccc1"),
    ("nitrosation", "CC(C)C(=O)c1ccccc1", 1, "CC(C)(C)ON=O"),
    ("nitrosation, two hydrogens", "CCOC(=O)CC(=O)OCC", 5, "CC(C)CCON=O"),
    ("nitrosation, two hydrogens", "CC(=O)c1ccccc1", 0, "CC(C)(C)ON=O"),
    ("diazonium", "CC(=O)C(C)C(=O)OCC", 3, "N#[N+]c1ccccc1.F[B-](F)(F)F"),
    ("diazonium, two hydrogens", "CCOC(=O)CC(C)=O", 5, "N#[N+]c1ccc([N+](=O)[O-])cc1.F[B-](F)(F)F"),
    ("diazo transfer, two hydrogens", "CCOC(=O)CC(C)=O", 5, "Cc1ccc(S(=O)(=O)N=[N+]=[N-])cc1"),
    ("diazo transfer, two hydrogens", "O=C1CCCC(=O)C1", 7, "[N-]=[N+]=NS(=O)(=O)C(F)(F)F"),
    ("oxaziridine", "CC(=O)c1ccccc1", 0, "O=S(=O)(N1OC1c1ccccc1)c1ccccc1"),
    # silyl groups, and oxygen against acyl, sulfonyl and silyl
    ("silyl", "CCOC(C)=O", 4, "C[Si](C)(C)Cl"),
    ("silyl", "CC#N", 0, "CC(C)(C)[Si](C)(C)OS(=O)(=O)C(F)(F)F"),
    ("enolate O-silyl", "O=C1CCCCC1", 2, "C[Si](C)(C)Cl"),
    ("enolate O-silyl", "CCOC(C)=O", 4, "CC(C)(C)[Si](C)(C)Cl"),
    ("enolate O-silyl", "CC(C)C=O", 1, "CC(C)[Si](OS(=O)(=O)C(F)(F)F)(C(C)C)C(C)C"),
    ("nitronate O-silyl", "CC[N+](=O)[O-]", 1, "C[Si](C)(C)Cl"),
    ("enolate O-acyl", "CC(=O)c1ccccc1", 0, "CC(=O)Cl"),
    ("enolate O-acyl", "O=C1CCCC(=O)C1", 7, "CC(=O)OC(C)=O"),
    ("enolate O-sulfonyl", "O=C1CCCCC1", 2, "O=S(=O)(N(c1ccccc1)S(=O)(=O)C(F)(F)F)C(F)(F)F"),
    # heteroatoms against the new classes
    ("heteroatom acyl halide", "CC(=O)c1ccc(O)cc1", 7, "O=C(Cl)c1ccccc1"),
    ("heteroatom strained ring", "CC(=O)c1ccc(O)cc1", 7, "CC1CO1"),
    ("heteroatom isocyanate", "CC(=O)c1ccc(N)cc1", 7, "O=C=Nc1ccccc1"),
    ("heteroatom silyl", "CC(=O)CCO", 5, "CC(C)(C)[Si](C)(C)Cl"),
    ("heteroatom aryl halide", "COC(=O)CS", 5, "O=[N+]([O-])c1ccc(F)cc1"),
    ("heteroatom chalcogen", "COC(=O)CS", 5, "CSS(C)(=O)=O"),
    # a second attack
    ("double alkyl halide", "CCOC(=O)CC(=O)OCC", 5, "CCI"),
    ("double michael", "CCOC(=O)CC#N", 5, "C=CC#N"),
    ("double halogen from N or O", "CC(=O)c1ccccc1", 0, "O=C1CCC(=O)N1Br"),
    ("double acyl halide", "CC#N", 0, "O=C(Cl)c1ccccc1"),
    # condensation of a substrate with itself
    ("self aldol", "CC(C)=O", 0, 1),
    ("self aldol", "O=C1CCCCC1", 2, 1),
    ("self aldol", "CCC=O", 1, 2),
    ("self claisen", "CCOC(C)=O", 4, 3),
    ("self claisen", "COC(=O)Cc1ccccc1", 4, 2),
    ("self claisen of a ring", "O=C1CCCO1", 2, 1),
]

# kind, first reactant, index of its marked atom, second reactant where there is one
SIDE_ROWS = [
    ("substitution by an alkoxide", "CC[O-]", 2, "CCCCBr"),
    ("substitution by an alkoxide", "CC(C)(C)[O-]", 4, "BrCc1ccccc1"),
    ("substitution by an alkoxide", "[OH-]", 0, "BrCC(=O)OCC"),
    ("substitution by an amide", "CC(C)[N-]C(C)C", 3, "CI"),
    ("substitution by a carbanion", "[CH2-]CCC", 0, "BrCc1ccccc1"),
    ("substitution by a carbanion", "c1cccc[c-]1", 5, "CI"),
    ("substitution by a tertiary amine", "CCN(CC)CC", 2, "BrCc1ccccc1"),
    ("substitution by a tertiary amine", "c1ccncc1", 3, "CI"),
    ("substitution by a secondary amine", "C1CCNCC1", 3, "C=CCBr"),
    ("substitution at acyl by an alkoxide", "C[O-]", 1, "O=C(Cl)c1ccccc1"),
    ("substitution at acyl by an amine", "C1CCNCC1", 3, "CC(=O)Cl"),
    ("substitution at silicon by an amide", "CC(C)[N-]C(C)C", 3, "C[Si](C)(C)Cl"),
    ("carbonyl adduct", "[CH2-]CCC", 0, "CC(=O)c1ccccc1"),
    ("carbonyl adduct", "[CH3-]", 0, "O=C1CCCCC1"),
    ("carbonyl adduct", "c1cccc[c-]1", 5, "CC(C)C=O"),
    ("carbonyl of an ester", "[CH2-]CCC", 0, "COC(=O)Cc1ccccc1"),
    ("carbonyl of an ester", "O", 0, "CCOC(=O)Cc1ccccc1"),
    ("carbonyl of an ester", "CC(C)[O-]", 3, "CCOC(=O)CC(=O)C"),
    ("carbonyl of a lactone", "O", 0, "O=C1CCCO1"),
    ("carbonyl of an amide", "[CH2-]CCC", 0, "CN(C)C(=O)Cc1ccccc1"),
    ("alcohol of an ester", "CC(C)OC(=O)Cc1ccccc1", 4, ""),
    ("acid by disproportionation", "O=Cc1ccccc1", 1, "O"),
    ("alcohol by disproportionation", "O=Cc1ccccc1", 1, ""),
    ("alkene", "CC(C)Br", 1, ""),
    ("alkene", "BrC1CCCCC1", 1, ""),
    ("alkene", "BrCCc1ccccc1", 1, ""),
    ("alkene", "C[C@H](Br)C(=O)OC", 1, ""),
    ("alkene from a sulfonate", "CCCCOS(=O)(=O)c1ccc(C)cc1", 3, ""),
    ("dehalogenation", "COC(=O)Cc1ccc(Br)cc1", 9, ""),
    ("dehalogenation", "CC(=O)c1ccccc1I", 9, ""),
]


def numbers(molecule):
    """Formula, monoisotopic and average mass."""
    return [
        CalcMolFormula(molecule),
        f"{Descriptors.ExactMolWt(molecule):.5f}",
        f"{Descriptors.MolWt(molecule):.3f}",
    ]


def cleaned(molecule):
    """The molecule as its own SMILES is read."""
    for atom in molecule.GetAtoms():
        if atom.GetIsotope() in (98, 99):
            atom.SetIsotope(0)
    return Chem.MolFromSmiles(Chem.MolToSmiles(molecule))


def marked(smiles, marks):
    molecule = Chem.MolFromSmiles(smiles)
    for index, isotope in marks.items():
        molecule.GetAtomWithIdx(index).SetIsotope(isotope)
        molecule.GetAtomWithIdx(index).SetChiralTag(Chem.ChiralType.CHI_UNSPECIFIED)
    return molecule


def product(kind, substrate, site, electrophile):
    """The one product of a row; refuses rows where the pattern is ambiguous."""
    first = marked(substrate, {site: 99})
    if isinstance(electrophile, int):
        second = marked(substrate, {electrophile: 98})
    else:
        second = Chem.MolFromSmiles(electrophile) if electrophile else None
    reaction = AllChem.ReactionFromSmarts(REACTIONS[kind.removeprefix("double ")])
    outcome = only_outcome(reaction, first, second)
    if kind.startswith("double "):
        outcome = only_outcome(reaction, outcome, second)
    outcome = cleaned(outcome)
    return Chem.MolToSmiles(outcome, isomericSmiles=False), outcome


def only_outcome(reaction, first, second):
    """The one outcome of a reaction, with its marks."""
    found = {}
    for (outcome,) in reaction.RunReactants((first, second) if second else (first,)):
        for atom in outcome.GetAtoms():
            atom.SetNoImplicit(False)
            if atom.GetIsotope() == 99 or atom.GetAtomicNum() != 6:
                atom.SetNumExplicitHs(0)
        Chem.SanitizeMol(outcome)
        found[Chem.MolToSmiles(outcome, isomericSmiles=False)] = outcome
    if len(found) != 1:
        raise SystemExit(f"{Chem.MolToSmiles(first)}: {sorted(found)}")
    return next(iter(found.values()))


def write(path, comment, header, rows):
    with open(path, "w", newline="", encoding="utf-8") as file:
        file.write(f"# RDKit {rdBase.rdkitVersion}, by make_rdkit_reference.py. {comment}\n")
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(header)
        writer.writerows(rows)


def main():
    molecules = []
    with open("molecules.smi", encoding="utf-8") as file:
        for line in file:
            smiles = line.strip()
            if smiles and not smiles.startswith("#"):
                molecule = Chem.MolFromSmiles(smiles)
                flat = Chem.MolToSmiles(molecule, isomericSmiles=False)
                rings = sorted(len(ring) for ring in Chem.GetSymmSSSR(molecule))
                ranks = Chem.CanonicalRankAtoms(molecule, breakTies=False, includeChirality=False)
                molecules.append(
                    [
                        smiles,
                        Chem.MolToSmiles(molecule),
                        flat,
                        *numbers(molecule),
                        " ".join(map(str, rings)),
                        len(set(ranks)),
                    ]
                )
    write(
        "rdkit_reference.csv",
        "Masses in Da and g/mol.",
        ["smiles", "canonical", "canonical_flat", "formula", "exact_mass", "molar_mass", "ring_sizes", "symmetry_classes"],
        molecules,
    )
    write(
        "rdkit_products.csv",
        "The electrophile of a self condensation is the index of the carbonyl carbon.",
        ["kind", "substrate", "site", "electrophile", *PRODUCT_COLUMNS],
        products(ROWS),
    )
    write(
        "rdkit_side_products.csv",
        "The second reactant is empty where there is none.",
        ["kind", "first", "atom", "second", *PRODUCT_COLUMNS],
        products(SIDE_ROWS),
    )


def products(rows):
    made = []
    for kind, first, atom, second in rows:
        flat, outcome = product(kind, first, atom, second)
        made.append([kind, first, atom, second, flat, Chem.MolToSmiles(outcome), *numbers(outcome)])
    return made


if __name__ == "__main__":
    main()
