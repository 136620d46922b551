//! Fingerprint of a campaign's content.

use enolattice_model::Fingerprint;
use sha2::{Digest, Sha256};

use crate::{Campaign, Dose};

/// Said first, so that no other digest of the house can be the same.
const DOMAIN: &str = "enolattice campaign 1";

/// SHA-256 over the canonical content of a campaign: what is screened.
///
/// The title, the names of substrates, what the laboratory has on its shelf, the yields that it has
/// measured and what was noticed while the files were read change no score and are not part of it.
///
/// Texts are preceded by their length, lists by their number of values, numbers are the eight
/// bytes of their `f64`, all little endian. Axes stand in the order of [`crate::AXES`].
pub(crate) fn of(campaign: &Campaign) -> Fingerprint {
    let mut content = Content(Sha256::new());
    content.text(DOMAIN);
    content.count(campaign.substrates.len());
    for (substrate, own) in campaign.substrates.iter().zip(&campaign.own_pka) {
        content.text(substrate.molecule.canonical());
        content.optional(own.map(|own| own.pka_dmso));
        content.optional(own.map(|own| own.sigma));
    }
    content.texts(
        campaign
            .electrophiles
            .iter()
            .map(|e| e.molecule.canonical()),
    );
    content.texts(campaign.bases.iter().map(|base| base.record.name.as_str()));
    content.texts(
        campaign
            .solvents
            .iter()
            .map(|solvent| solvent.record.name.as_str()),
    );
    additives(&campaign.additives, &mut content);
    content.numbers(&campaign.temperature_c);
    content.count(campaign.formation_temperature_c.len());
    campaign
        .formation_temperature_c
        .iter()
        .for_each(|value| content.optional(*value));
    content.numbers(&campaign.base_equiv);
    content.numbers(&campaign.electrophile_equiv);
    content.numbers(&campaign.concentration_m);
    content.numbers(&campaign.time_h);
    content.numbers(&campaign.dosing_min);
    content.texts(
        campaign
            .addition
            .iter()
            .map(|order| order.map_or("", |order| order.name())),
    );
    content.number(campaign.yield_at_least);
    Fingerprint(content.0.finalize().into())
}

/// A campaign that knows no additives has the same content as one that names `none`.
fn additives(doses: &[Option<Dose>], content: &mut Content) {
    if let [None] = doses {
        content.count(0);
        return;
    }
    content.count(doses.len());
    for dose in doses {
        content.text(dose.as_ref().map_or("", |dose| &dose.additive.record.name));
        content.optional(dose.as_ref().map(|dose| dose.equiv));
    }
}

struct Content(Sha256);

impl Content {
    fn count(&mut self, count: usize) {
        self.0.update((count as u64).to_le_bytes());
    }

    fn text(&mut self, text: &str) {
        self.count(text.len());
        self.0.update(text);
    }

    fn texts<'a>(&mut self, texts: impl ExactSizeIterator<Item = &'a str>) {
        self.count(texts.len());
        texts.for_each(|text| self.text(text));
    }

    fn number(&mut self, number: f64) {
        self.0.update(number.to_le_bytes());
    }

    fn numbers(&mut self, numbers: &[f64]) {
        self.count(numbers.len());
        numbers.iter().for_each(|number| self.number(*number));
    }

    fn optional(&mut self, number: Option<f64>) {
        self.count(usize::from(number.is_some()));
        if let Some(number) = number {
            self.number(number);
        }
    }
}
