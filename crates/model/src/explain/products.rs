//! The products of every channel of a cell, as far as they can be drawn.

mod spent;
mod taken;

use enolattice_molecule::{
    ElectrophileKind, Molecule, c_product, carbonyl_product, dehydrated, glycol_esters,
    heteroatom_product, o_product, self_condensation_product,
};
use enolattice_reagents::Library;

use crate::carbonyl::acceptor_atom;
use crate::explanation::ExplainedProduct;
use crate::features::split_in_beta;
use crate::kinetics::Kinetics;
use crate::network::{Network, Reaction, Species};
use crate::reference::Course;
use crate::{Cell, Channel};

/// One way into a channel: how much goes it relative to the other ways, and what it makes.
struct Way {
    weight: f64,
    /// Molecules with the share of the material that ends in each, where that is known. Empty: it makes what cannot be
    /// drawn.
    makes: Vec<(Molecule, Option<f64>)>,
}

impl Way {
    /// A way to one product, or to none that can be drawn.
    fn to(weight: f64, molecule: Option<Molecule>) -> Way {
        let makes = molecule.into_iter().map(|m| (m, Some(1.0))).collect();
        Way { weight, makes }
    }

    /// A way to one of several products.
    fn to_one_of(weight: f64, molecules: Vec<Molecule>) -> Way {
        let share = (molecules.len() == 1).then_some(1.0);
        let makes = molecules.into_iter().map(|m| (m, share)).collect();
        Way { weight, makes }
    }
}

/// Draws the products of a cell.
struct Drawing<'a> {
    cell: &'a Cell,
    kinetics: &'a Kinetics<'a>,
    network: &'a Network,
    course: &'a Course,
    library: &'a Library,
    /// Site of the wanted product.
    site: usize,
    drawn: Vec<ExplainedProduct>,
}

/// The products of every channel, largest share first.
pub(super) fn products(
    cell: &Cell,
    kinetics: &Kinetics<'_>,
    network: &Network,
    course: &Course,
    library: &Library,
    site: usize,
) -> Vec<ExplainedProduct> {
    let mut drawing = Drawing {
        cell,
        kinetics,
        network,
        course,
        library,
        site,
        drawn: Vec::new(),
    };
    drawing.by_carbon();
    drawing.by_oxygen();
    drawing.by_heteroatom();
    drawing.over_reacted();
    drawing.self_condensed();
    drawing.taken_by_base();
    drawing.at_carbonyl_of_acceptor();
    drawing.split();
    drawing.of_electrophile();
    let mut drawn = drawing.drawn;
    let share = |product: &ExplainedProduct| product.fraction.unwrap_or(-1.0);
    drawn.sort_by(|a, b| {
        share(b)
            .total_cmp(&share(a))
            .then(a.channel.cmp(&b.channel))
            .then_with(|| a.smiles.cmp(&b.smiles))
    });
    drawn
}

impl Drawing<'_> {
    /// Amount of a species at the end per substrate charged.
    fn at_end(&self, species: Species) -> f64 {
        self.course.end.of(species).max(0.0) / self.network.charged[0]
    }

    /// Reactions of the network that make a species.
    fn making(&self, species: Species) -> impl Iterator<Item = &Reaction> {
        let makes = move |r: &&Reaction| r.k > 0.0 && r.products.contains(&Some(species));
        self.network.reactions.iter().filter(makes)
    }

    /// How far a reaction has run over the time course since the electrophile came, by the trapezoidal rule. Good enough
    /// to divide a channel among its ways.
    fn extent(&self, reaction: &Reaction) -> f64 {
        let points = &self.course.points;
        let after = points.iter().position(|(time_s, _)| *time_s >= 0.0);
        let points = &points[after.unwrap_or(points.len())..];
        let rate = |i: usize| {
            let amounts = reaction.reactants().map(|s| points[i].1.of(s).max(0.0));
            reaction.k * amounts.product::<f64>()
        };
        (1..points.len())
            .map(|i| 0.5 * (rate(i) + rate(i - 1)) * (points[i].0 - points[i - 1].0))
            .sum()
    }

    /// Divides the share of a channel among the ways that lead into it.
    fn add(&mut self, channel: Option<Channel>, share: f64, ways: Vec<Way>) {
        let total: f64 = ways.iter().map(|way| way.weight).sum();
        let only = ways.len() == 1;
        for way in ways {
            let of_way = match only {
                true => Some(1.0),
                false => (total > 0.0).then_some(way.weight / total),
            };
            for (molecule, of_molecule) in way.makes {
                let known = of_way.zip(of_molecule).map(|(a, b)| share * a * b);
                // nothing is divided into nothing
                let fraction = if share == 0.0 { Some(0.0) } else { known };
                self.add_molecule(channel, &molecule, fraction);
            }
        }
    }

    /// One line for each molecule of a channel.
    fn add_molecule(
        &mut self,
        channel: Option<Channel>,
        molecule: &Molecule,
        fraction: Option<f64>,
    ) {
        let smiles = molecule.canonical();
        let mut lines = self.drawn.iter_mut();
        match lines.find(|line| line.channel == channel && line.smiles == smiles) {
            Some(line) => line.fraction = line.fraction.zip(fraction).map(|(a, b)| a + b),
            None => self.drawn.push(ExplainedProduct {
                channel,
                smiles: smiles.to_owned(),
                formula: molecule.formula().to_owned(),
                monoisotopic_mass: molecule.exact_mass(),
                fraction,
            }),
        }
    }

    /// Products at carbon, before and after loss of water.
    fn by_carbon(&mut self) {
        for (i, made) in self.cell.pair.by_site.iter().enumerate() {
            let Some(made) = made else { continue };
            let channel = (i != self.site).then_some(Channel::OtherSite);
            let whole = self.at_end(Species::Product(i)) + self.at_end(Species::ProductAnion(i));
            let adduct = Way::to(1.0, Some(made.product.molecule.clone()));
            self.add(channel, whole, vec![adduct]);
            if let Some(dry) = &made.dehydrated {
                let dry = Way::to(1.0, Some(dry.clone()));
                self.add(channel, self.at_end(Species::Dehydrated(i)), vec![dry]);
            }
        }
    }

    fn by_oxygen(&mut self) {
        let cell = self.cell;
        let Some(group) = &cell.electrophile.group else {
            return;
        };
        let electrophile = &cell.electrophile.molecule;
        let substrate = &cell.substrate;
        let ways = self.making(Species::OxygenProduct).filter_map(|r| {
            let Species::Carbanion(i) = r.first else {
                return None;
            };
            let atom = substrate.carbon.get(i)?.acid.atom;
            let product = o_product(&substrate.molecule, atom, electrophile, group);
            let molecule = product.ok().flatten().map(|product| product.molecule);
            Some(Way::to(self.extent(r), molecule))
        });
        let ways = ways.collect();
        let share = self.at_end(Species::OxygenProduct);
        self.add(Some(Channel::OAttack), share, ways);
    }

    fn by_heteroatom(&mut self) {
        let cell = self.cell;
        let (Some(group), Some(site)) = (
            &cell.electrophile.group,
            cell.substrate.stronger_heteroatom(),
        ) else {
            return;
        };
        if self.making(Species::HeteroatomProduct).next().is_none() {
            return;
        }
        let electrophile = &cell.electrophile.molecule;
        let product = heteroatom_product(&cell.substrate.molecule, site.atom, electrophile, group);
        let way = Way::to(1.0, product.ok().map(|product| product.molecule));
        let share = self.at_end(Species::HeteroatomProduct);
        self.add(Some(Channel::HeteroatomAttack), share, vec![way]);
    }

    /// The product's anion has attacked a second molecule of electrophile.
    fn over_reacted(&mut self) {
        let ways = self.making(Species::OverReacted).filter_map(|r| {
            let Species::ProductAnion(i) = r.first else {
                return None;
            };
            Some(Way::to(self.extent(r), self.twice(i)))
        });
        let ways = ways.collect();
        let share = self.at_end(Species::OverReacted);
        self.add(Some(Channel::OverAlkylation), share, ways);
    }

    /// The product at a site with a second molecule of electrophile, at the atom whose anion the model takes.
    fn twice(&self, i: usize) -> Option<Molecule> {
        let made = self.cell.pair.by_site.get(i)?.as_ref()?;
        let group = self.cell.electrophile.group.as_ref()?;
        let electrophile = &self.cell.electrophile.molecule;
        let molecule = &made.product.molecule;
        let product = if self.kinetics.product_heteroatom(i).is_some() {
            let atom = made.heteroatom.as_ref()?.atom;
            heteroatom_product(molecule, atom, electrophile, group)
        } else {
            let atom = made.carbon.as_ref()?.acid.atom;
            c_product(molecule, atom, electrophile, group)
        };
        product.ok().map(|product| product.molecule)
    }

    /// The alcohol of an enolate and the carbonyl group of an enone or enal.
    fn at_carbonyl_of_acceptor(&mut self) {
        let cell = self.cell;
        let share = self.at_end(Species::CarbonylAdduct);
        let Some(ElectrophileKind::Michael { alpha, .. }) =
            cell.electrophile.group.as_ref().map(|group| group.kind)
        else {
            return;
        };
        let (substrate, acceptor) = (&cell.substrate, &cell.electrophile.molecule);
        let site = substrate.carbon.get(substrate.condensing_site());
        let mut around = acceptor.neighbours(alpha).iter().map(|&(atom, _)| atom);
        let carbonyl = around.find(|atom| spent::is_carbonyl(acceptor, *atom));
        let (true, Some(site), Some(carbonyl)) = (share > 0.0, site, carbonyl) else {
            return;
        };
        let made = carbonyl_product(&substrate.molecule, site.acid.atom, acceptor, carbonyl);
        let way = Way::to(1.0, made.ok().map(|product| product.molecule));
        self.add(Some(Channel::OtherSite), share, vec![way]);
    }

    /// What a carbanion that loses a group in β becomes.
    fn split(&mut self) {
        let substrate = &self.cell.substrate;
        let ways = self.making(Species::Split).filter_map(|r| {
            let Species::Carbanion(i) = r.first else {
                return None;
            };
            let site = substrate.carbon.get(i)?.acid.atom;
            Some(Way::to(
                self.extent(r),
                split_in_beta(&substrate.molecule, site),
            ))
        });
        let ways = ways.collect();
        let share = self.at_end(Species::Split);
        self.add(Some(Channel::Elimination), share, ways);
    }

    /// Aldol adduct and enone of the substrate with itself, or its Claisen product.
    fn self_condensed(&mut self) {
        let substrate = &self.cell.substrate;
        let (Some(acceptor), None) = (substrate.acceptor, self.kinetics.first_heteroatom()) else {
            return;
        };
        let site = substrate.carbon.get(substrate.condensing_site());
        let carbonyl = acceptor_atom(&substrate.molecule, acceptor);
        let (Some(site), Some(carbonyl)) = (site, carbonyl) else {
            return;
        };
        let made = self_condensation_product(&substrate.molecule, site.acid.atom, carbonyl);
        let Ok(dimer) = made else { return };
        let channel = Some(Channel::SelfCondensation);
        let wet = self.at_end(Species::Dimer) + self.at_end(Species::DimerAnion);
        let dry = 2.0 * self.at_end(Species::DryDimer);
        let enone = dehydrated(&dimer).ok().flatten();
        let share = 3.0 * self.at_end(Species::Trimer);
        if share > 0.0 {
            let esters = glycol_esters(&substrate.molecule, carbonyl, &dimer)
                .ok()
                .flatten();
            let way = Way::to_one_of(1.0, esters.map(Vec::from).unwrap_or_default());
            self.add(channel, share, vec![way]);
        }
        self.add(channel, 2.0 * wet, vec![Way::to(1.0, Some(dimer.molecule))]);
        if enone.is_some() {
            self.add(channel, dry, vec![Way::to(1.0, enone)]);
        }
    }
}
