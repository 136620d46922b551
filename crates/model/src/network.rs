//! The network of a cell: species, reactions of mass action, and the program of additions.
//!
//! Two solvers use this one definition: [`crate::march`] for the screen and
//! [`crate::reference`] for explanations. A new channel is a new reaction.

use crate::prepared::SITES;

/// What can be in the pot. Solvent is in excess and part of the rate constants.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Species {
    /// Substrate, neutral.
    Substrate,
    /// Substrate without the proton of its heteroatom.
    HeteroatomAnion,
    /// Carbanion of the substrate at a site.
    Carbanion(usize),
    /// Substrate without two protons, one of them from carbon at least.
    Dianion,
    /// Product at a site, neutral.
    Product(usize),
    /// Its anion: carbanion, alkoxide of an adduct, or heteroatom anion.
    ProductAnion(usize),
    /// Product at a site after loss of water, or after a halide has left it to close a ring.
    Dehydrated(usize),
    /// Electrophile.
    Electrophile,
    /// Base not yet dissolved.
    Solid,
    /// Base.
    Base,
    /// Its conjugate acid.
    BaseAcid,
    /// Anion of the solvent's O–H.
    Lyate,
    /// Water.
    Water,
    /// Hydroxide from water.
    Hydroxide,
    /// Carbanion of the solvent.
    SolventAnion,
    /// Dimer of the substrate by self-condensation.
    Dimer,
    /// Its anion.
    DimerAnion,
    /// The dimer after loss of water.
    DryDimer,
    /// Basic anion of the group that left the electrophile.
    Leaving,
    /// Its acid.
    LeavingAcid,
    /// Product of the enolate's oxygen.
    OxygenProduct,
    /// Product of the substrate's heteroatom.
    HeteroatomProduct,
    /// Product that reacted again.
    OverReacted,
    /// Substrate taken by the base.
    Taken,
    /// Electrophile lost by elimination.
    Eliminated,
    /// Electrophile taken by solvent.
    Solvolysed,
    /// Electrophile taken by base.
    Spent,
    /// Carbanion of the electrophile's own C–H.
    ElectrophileAnion,
    /// Alkoxide of an addition to the carbonyl group of an acceptor.
    CarbonylAdduct,
    /// Trimer of an aldehyde by aldol addition and hydride transfer.
    Trimer,
    /// Substrate that lost a group in β.
    Split,
    /// Product taken by the base.
    ProductTaken,
}

/// Index of the first species that exists once a site.
const FIRST_OF_SITES: usize = 28;

impl Species {
    /// Number of species.
    pub(crate) const COUNT: usize = FIRST_OF_SITES + 4 * SITES;

    /// Every species, by index.
    pub(crate) fn all() -> impl Iterator<Item = Species> {
        (0..Species::COUNT).map(Species::at)
    }

    /// The species with an index.
    pub(crate) const fn at(index: usize) -> Species {
        const PLAIN: [Species; FIRST_OF_SITES] = [
            Species::Substrate,
            Species::HeteroatomAnion,
            Species::Dianion,
            Species::Electrophile,
            Species::Solid,
            Species::Base,
            Species::BaseAcid,
            Species::Lyate,
            Species::Water,
            Species::Hydroxide,
            Species::SolventAnion,
            Species::Dimer,
            Species::DimerAnion,
            Species::OxygenProduct,
            Species::HeteroatomProduct,
            Species::OverReacted,
            Species::Taken,
            Species::Eliminated,
            Species::Solvolysed,
            Species::Spent,
            Species::DryDimer,
            Species::Leaving,
            Species::LeavingAcid,
            Species::ElectrophileAnion,
            Species::CarbonylAdduct,
            Species::Trimer,
            Species::Split,
            Species::ProductTaken,
        ];
        if index < FIRST_OF_SITES {
            return PLAIN[index];
        }
        let site = (index - FIRST_OF_SITES) % SITES;
        match (index - FIRST_OF_SITES) / SITES {
            0 => Species::Carbanion(site),
            1 => Species::Product(site),
            2 => Species::ProductAnion(site),
            _ => Species::Dehydrated(site),
        }
    }

    /// Molecules of the substrate in it.
    pub(crate) fn substrates(self) -> f64 {
        match self {
            Species::Substrate
            | Species::HeteroatomAnion
            | Species::Dianion
            | Species::OxygenProduct
            | Species::HeteroatomProduct
            | Species::OverReacted
            | Species::Taken
            | Species::CarbonylAdduct
            | Species::Split
            | Species::ProductTaken
            | Species::Carbanion(_)
            | Species::Product(_)
            | Species::ProductAnion(_)
            | Species::Dehydrated(_) => 1.0,
            Species::Dimer | Species::DimerAnion | Species::DryDimer => 2.0,
            Species::Trimer => 3.0,
            _ => 0.0,
        }
    }

    /// Molecules of the electrophile in it.
    pub(crate) fn electrophiles(self) -> f64 {
        match self {
            Species::Electrophile
            | Species::ElectrophileAnion
            | Species::OxygenProduct
            | Species::HeteroatomProduct
            | Species::Eliminated
            | Species::Solvolysed
            | Species::Spent
            | Species::CarbonylAdduct
            | Species::ProductTaken
            | Species::Product(_)
            | Species::ProductAnion(_)
            | Species::Dehydrated(_) => 1.0,
            Species::OverReacted => 2.0,
            _ => 0.0,
        }
    }

    /// Protons that it can take: what a base brings and what an anion holds. A halide or another group that
    /// leaves for good takes its charge along and has none.
    #[cfg(test)]
    pub(crate) fn basicity(self) -> f64 {
        match self {
            Species::Solid
            | Species::Base
            | Species::Lyate
            | Species::Hydroxide
            | Species::SolventAnion
            | Species::HeteroatomAnion
            | Species::DimerAnion
            | Species::Leaving
            | Species::ElectrophileAnion
            | Species::CarbonylAdduct
            | Species::Carbanion(_)
            | Species::ProductAnion(_) => 1.0,
            Species::Dianion => 2.0,
            _ => 0.0,
        }
    }

    /// Name in explanations.
    pub(crate) fn name(self) -> String {
        let plain = match self {
            Species::Carbanion(site) => return format!("carbanion {}", site + 1),
            Species::Product(site) => return format!("product {}", site + 1),
            Species::ProductAnion(site) => return format!("anion of product {}", site + 1),
            Species::Dehydrated(site) => return format!("dehydrated product {}", site + 1),
            Species::Substrate => "substrate",
            Species::HeteroatomAnion => "heteroatom anion",
            Species::Dianion => "dianion",
            Species::Electrophile => "electrophile",
            Species::Solid => "undissolved base",
            Species::Base => "base",
            Species::BaseAcid => "acid of the base",
            Species::Lyate => "anion of the solvent",
            Species::Water => "water",
            Species::Hydroxide => "hydroxide",
            Species::SolventAnion => "carbanion of the solvent",
            Species::Dimer => "dimer",
            Species::DimerAnion => "anion of the dimer",
            Species::DryDimer => "dehydrated dimer",
            Species::Leaving => "anion that left the electrophile",
            Species::LeavingAcid => "its acid",
            Species::OxygenProduct => "O-product",
            Species::HeteroatomProduct => "product at the heteroatom",
            Species::OverReacted => "over-reacted product",
            Species::Taken => "substrate taken by base",
            Species::Eliminated => "eliminated electrophile",
            Species::Solvolysed => "solvolysed electrophile",
            Species::Spent => "electrophile spent on base",
            Species::ElectrophileAnion => "carbanion of the electrophile",
            Species::CarbonylAdduct => "adduct at the carbonyl group of the electrophile",
            Species::Trimer => "trimer by hydride transfer",
            Species::Split => "substrate that lost a group in β",
            Species::ProductTaken => "product taken by base",
        };
        plain.to_owned()
    }

    /// Index among all species.
    pub(crate) const fn index(self) -> usize {
        match self {
            Species::Substrate => 0,
            Species::HeteroatomAnion => 1,
            Species::Dianion => 2,
            Species::Electrophile => 3,
            Species::Solid => 4,
            Species::Base => 5,
            Species::BaseAcid => 6,
            Species::Lyate => 7,
            Species::Water => 8,
            Species::Hydroxide => 9,
            Species::SolventAnion => 10,
            Species::Dimer => 11,
            Species::DimerAnion => 12,
            Species::OxygenProduct => 13,
            Species::HeteroatomProduct => 14,
            Species::OverReacted => 15,
            Species::Taken => 16,
            Species::Eliminated => 17,
            Species::Solvolysed => 18,
            Species::Spent => 19,
            Species::DryDimer => 20,
            Species::Leaving => 21,
            Species::LeavingAcid => 22,
            Species::ElectrophileAnion => 23,
            Species::CarbonylAdduct => 24,
            Species::Trimer => 25,
            Species::Split => 26,
            Species::ProductTaken => 27,
            Species::Carbanion(site) => FIRST_OF_SITES + site,
            Species::Product(site) => FIRST_OF_SITES + SITES + site,
            Species::ProductAnion(site) => FIRST_OF_SITES + 2 * SITES + site,
            Species::Dehydrated(site) => FIRST_OF_SITES + 3 * SITES + site,
        }
    }
}

/// Amounts of all species, mol/L of the final volume.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Amounts(pub(crate) [f64; Species::COUNT]);

impl Amounts {
    pub(crate) const NONE: Amounts = Amounts([0.0; Species::COUNT]);

    /// Amount of one species.
    pub(crate) fn of(&self, species: Species) -> f64 {
        self.0[species.index()]
    }

    /// Adds to one species.
    pub(crate) fn add(&mut self, species: Species, amount: f64) {
        self.0[species.index()] += amount;
    }

    /// Sum over the sites.
    pub(crate) fn over_sites(&self, species: impl Fn(usize) -> Species) -> f64 {
        (0..SITES).map(|site| self.of(species(site))).sum()
    }

    /// Product at a site in all its forms.
    pub(crate) fn product(&self, site: usize) -> f64 {
        self.of(Species::Product(site))
            + self.of(Species::ProductAnion(site))
            + self.of(Species::Dehydrated(site))
    }

    /// Carbanions of the substrate, the dianion included.
    pub(crate) fn carbanions(&self) -> f64 {
        self.over_sites(Species::Carbanion) + self.of(Species::Dianion)
    }

    /// Substrate in dimers and trimers of its own.
    pub(crate) fn self_condensed(&self) -> f64 {
        let dimer =
            self.of(Species::Dimer) + self.of(Species::DimerAnion) + self.of(Species::DryDimer);
        2.0 * dimer + 3.0 * self.of(Species::Trimer)
    }

    /// Substrate that has not reacted.
    pub(crate) fn unreacted(&self) -> f64 {
        self.of(Species::Substrate) + self.of(Species::HeteroatomAnion) + self.carbanions()
    }

    /// Sum of a property of the species over what is in the pot, mol/L.
    pub(crate) fn total(&self, each: impl Fn(Species) -> f64) -> f64 {
        Species::all().map(|s| each(s) * self.of(s)).sum()
    }

    /// Substrate in all its fates: constant once all is charged.
    pub(crate) fn substrate_balance(&self) -> f64 {
        self.total(Species::substrates)
    }
}

/// An elementary step: `rate = k·[first]·[second]·[third]`, of those that there are.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Reaction {
    /// First reactant.
    pub(crate) first: Species,
    /// Second reactant.
    pub(crate) second: Option<Species>,
    /// Third reactant.
    pub(crate) third: Option<Species>,
    /// Products; also the catalyst where there is one.
    pub(crate) products: [Option<Species>; 3],
    /// A proton source that is used up too but not in the rate.
    pub(crate) with: Option<Species>,
    /// Rate constant; L, mol, s.
    pub(crate) k: f64,
}

impl Reaction {
    /// Reactants of the rate.
    pub(crate) fn reactants(&self) -> impl Iterator<Item = Species> + '_ {
        [Some(self.first), self.second, self.third]
            .into_iter()
            .flatten()
    }

    /// Species used up, one entry for each molecule.
    pub(crate) fn used(&self) -> impl Iterator<Item = Species> + '_ {
        self.reactants().chain(self.with)
    }

    /// Species formed, one entry for each molecule.
    pub(crate) fn formed(&self) -> impl Iterator<Item = Species> + '_ {
        self.products.into_iter().flatten()
    }
}

/// A stretch of time with constant additions.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Stage {
    /// Duration, s.
    pub(crate) duration_s: f64,
    /// Species and total amount added over the stage, mol/L.
    pub(crate) added: Option<(Species, f64)>,
}

/// Reactions at one temperature and the stages they run through.
#[derive(Clone, Debug)]
pub(crate) struct Network {
    /// The reactions that can happen and matter.
    pub(crate) reactions: Vec<Reaction>,
    /// The program at this temperature.
    pub(crate) stages: Vec<Stage>,
    /// Substrate, base and electrophile charged in all, mol/L.
    pub(crate) charged: [f64; 3],
}

impl Network {
    /// Drops, from networks that differ in rate constants alone, reactions whose reactants can never
    /// be there or that are too slow to matter in any.
    ///
    /// `present` is what can be in the pot without any reaction. Too slow: less than 1e-9 mol/L
    /// over the whole program at the largest amounts charged.
    pub(crate) fn prune<const L: usize>(networks: &mut [Network; L], present: &[Species]) {
        const LEAST_EXTENT_M: f64 = 1e-9;
        let first = &networks[0];
        let time: f64 = first.stages.iter().map(|stage| stage.duration_s).sum();
        let largest = first.charged.iter().fold(1e-3_f64, |a, &b| a.max(b));
        let matters = |index: usize| {
            networks.iter().any(|network| {
                let r = &network.reactions[index];
                let amounts: f64 = r.reactants().map(|_| largest).product();
                r.k * amounts * time > LEAST_EXTENT_M
            })
        };
        let mut kept: Vec<bool> = (0..first.reactions.len()).map(matters).collect();
        let mut reachable = [false; Species::COUNT];
        for species in present {
            reachable[species.index()] = true;
        }
        let can = |r: &Reaction, reachable: &[bool]| r.reactants().all(|s| reachable[s.index()]);
        loop {
            let mut grew = false;
            for (r, _) in first.reactions.iter().zip(&kept).filter(|(_, kept)| **kept) {
                if can(r, &reachable) {
                    for product in r.products.iter().flatten() {
                        grew |= !std::mem::replace(&mut reachable[product.index()], true);
                    }
                }
            }
            if !grew {
                break;
            }
        }
        for (kept, r) in kept.iter_mut().zip(&first.reactions) {
            *kept &= can(r, &reachable);
        }
        for network in networks {
            let mut keep = kept.iter();
            network
                .reactions
                .retain(|_| *keep.next().expect("one mark a reaction"));
        }
    }
}
