//! The fates of the substrate.

/// One fate of the substrate in a cell that is not the wanted product.
///
/// The discriminants are part of the stored form of a cell: never renumber.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
#[repr(u8)]
pub enum Channel {
    /// Equilibrium leaves the acid undeprotonated.
    WeakBase = 1,
    /// The solvent is the stronger acid.
    SolventLevelsBase = 2,
    /// The base does not dissolve.
    InsolubleBase = 3,
    /// Another X–H of the cell is deprotonated first.
    CompetingAcid = 4,
    /// The competing site takes the electrophile.
    HeteroatomAttack = 5,
    /// Aldol or Claisen condensation of the substrate with itself.
    SelfCondensation = 6,
    /// The product reacts again.
    OverAlkylation = 7,
    /// The bond forms at another carbon, of the substrate or of the electrophile (1,2-addition to an enone).
    OtherSite = 8,
    /// The product is the stronger acid and takes the enolate's place.
    ProductQuenchesEnolate = 9,
    /// The oxygen of the enolate takes the electrophile.
    OAttack = 10,
    /// The electrophile takes the base.
    BaseConsumedByElectrophile = 11,
    /// Addition of the base to substrate or product, saponification, transesterification, cleavage.
    BaseAddsToSubstrate = 12,
    /// The electrophile is lost by elimination, or the substrate loses a group in β.
    Elimination = 13,
    /// The solvent takes the electrophile.
    Solvolysis = 14,
    /// The bond-forming step is uphill.
    Reversible = 15,
    /// Time runs out.
    SlowAttack = 16,
    /// The base or the electrophile charged limits.
    TooLittleReagent = 17,
}

impl Channel {
    /// All channels, by number.
    pub const ALL: [Channel; 17] = [
        Channel::WeakBase,
        Channel::SolventLevelsBase,
        Channel::InsolubleBase,
        Channel::CompetingAcid,
        Channel::HeteroatomAttack,
        Channel::SelfCondensation,
        Channel::OverAlkylation,
        Channel::OtherSite,
        Channel::ProductQuenchesEnolate,
        Channel::OAttack,
        Channel::BaseConsumedByElectrophile,
        Channel::BaseAddsToSubstrate,
        Channel::Elimination,
        Channel::Solvolysis,
        Channel::Reversible,
        Channel::SlowAttack,
        Channel::TooLittleReagent,
    ];

    /// The channel's name as it is printed and filtered.
    pub fn name(self) -> &'static str {
        match self {
            Channel::WeakBase => "weak base",
            Channel::SolventLevelsBase => "solvent levels base",
            Channel::InsolubleBase => "insoluble base",
            Channel::CompetingAcid => "competing acid",
            Channel::HeteroatomAttack => "heteroatom attack",
            Channel::SelfCondensation => "self-condensation",
            Channel::OverAlkylation => "over-alkylation",
            Channel::OtherSite => "other site",
            Channel::ProductQuenchesEnolate => "product quenches enolate",
            Channel::OAttack => "O-attack",
            Channel::BaseConsumedByElectrophile => "base consumed by electrophile",
            Channel::BaseAddsToSubstrate => "base adds to substrate",
            Channel::Elimination => "elimination",
            Channel::Solvolysis => "solvolysis",
            Channel::Reversible => "reversible",
            Channel::SlowAttack => "slow attack",
            Channel::TooLittleReagent => "too little reagent",
        }
    }

    /// The channel with this number.
    pub fn from_number(number: u8) -> Option<Channel> {
        Channel::ALL
            .get(usize::from(number).checked_sub(1)?)
            .copied()
    }

    /// The channel with this name.
    pub fn from_name(name: &str) -> Option<Channel> {
        Channel::ALL
            .into_iter()
            .find(|channel| channel.name() == name)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_and_names_are_one_to_one() {
        for channel in Channel::ALL {
            assert_eq!(Channel::from_number(channel as u8), Some(channel));
            assert_eq!(Channel::from_name(channel.name()), Some(channel));
        }
        assert_eq!(Channel::from_number(0), None);
        assert_eq!(Channel::from_number(18), None);
    }
}
