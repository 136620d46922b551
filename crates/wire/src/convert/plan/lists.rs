//! Closed lists of plans, one to one.

use enolattice_plate::{
    AimWord, ColumnsBy, Content, DesignKind, EdgeWells, Form, HitsOf, IonKind, LimitAxis, Role,
    Strength,
};

use crate::v1;

/// What the edge of a plate is for.
pub(crate) const EDGE_WELLS: [EdgeWells; 3] =
    [EdgeWells::Use, EdgeWells::Empty, EdgeWells::ControlsOnly];

impl From<EdgeWells> for v1::EdgeWells {
    fn from(edge: EdgeWells) -> Self {
        match edge {
            EdgeWells::Use => v1::EdgeWells::Use,
            EdgeWells::Empty => v1::EdgeWells::Empty,
            EdgeWells::ControlsOnly => v1::EdgeWells::ControlsOnly,
        }
    }
}

/// Axes whose values can share columns.
pub(crate) const COLUMNS_BY: [ColumnsBy; 4] = [
    ColumnsBy::Substrate,
    ColumnsBy::Base,
    ColumnsBy::Electrophile,
    ColumnsBy::Solvent,
];

impl From<ColumnsBy> for v1::Axis {
    fn from(axis: ColumnsBy) -> Self {
        match axis {
            ColumnsBy::Substrate => v1::Axis::Substrate,
            ColumnsBy::Base => v1::Axis::Base,
            ColumnsBy::Electrophile => v1::Axis::Electrophile,
            ColumnsBy::Solvent => v1::Axis::Solvent,
        }
    }
}

/// Axes that can be limited.
pub(crate) const LIMIT_AXES: [LimitAxis; 5] = [
    LimitAxis::Substrate,
    LimitAxis::Electrophile,
    LimitAxis::Base,
    LimitAxis::Solvent,
    LimitAxis::Additive,
];

impl From<LimitAxis> for v1::Axis {
    fn from(axis: LimitAxis) -> Self {
        match axis {
            LimitAxis::Substrate => v1::Axis::Substrate,
            LimitAxis::Electrophile => v1::Axis::Electrophile,
            LimitAxis::Base => v1::Axis::Base,
            LimitAxis::Solvent => v1::Axis::Solvent,
            LimitAxis::Additive => v1::Axis::Additive,
        }
    }
}

/// Aims in a word.
pub(crate) const AIM_WORDS: [AimWord; 3] = [AimWord::Explore, AimWord::Balanced, AimWord::Exploit];

impl From<AimWord> for v1::AimWord {
    fn from(word: AimWord) -> Self {
        match word {
            AimWord::Explore => v1::AimWord::Explore,
            AimWord::Balanced => v1::AimWord::Balanced,
            AimWord::Exploit => v1::AimWord::Exploit,
        }
    }
}

/// What hits are counted of.
pub(crate) const HITS_OF: [HitsOf; 2] = [HitsOf::Substrates, HitsOf::Products];

impl From<HitsOf> for v1::HitsOf {
    fn from(hits: HitsOf) -> Self {
        match hits {
            HitsOf::Substrates => v1::HitsOf::Substrates,
            HitsOf::Products => v1::HitsOf::Products,
        }
    }
}

/// Classical designs.
pub(crate) const DESIGNS: [DesignKind; 5] = [
    DesignKind::FullFactorial,
    DesignKind::FractionalFactorial,
    DesignKind::PlackettBurman,
    DesignKind::DOptimal,
    DesignKind::SpaceFilling,
];

impl From<DesignKind> for v1::DesignKind {
    fn from(design: DesignKind) -> Self {
        match design {
            DesignKind::FullFactorial => v1::DesignKind::FullFactorial,
            DesignKind::FractionalFactorial => v1::DesignKind::FractionalFactorial,
            DesignKind::PlackettBurman => v1::DesignKind::PlackettBurman,
            DesignKind::DOptimal => v1::DesignKind::DOptimal,
            DesignKind::SpaceFilling => v1::DesignKind::SpaceFilling,
        }
    }
}

/// What a well is there for.
pub(crate) const CONTENTS: [Content; 6] = [
    Content::Cell,
    Content::Positive,
    Content::NoBase,
    Content::NoElectrophile,
    Content::Deuterium,
    Content::SolventOnly,
];

impl From<Content> for v1::WellContent {
    fn from(content: Content) -> Self {
        match content {
            Content::Cell => v1::WellContent::Cell,
            Content::Positive => v1::WellContent::Positive,
            Content::NoBase => v1::WellContent::NoBase,
            Content::NoElectrophile => v1::WellContent::NoElectrophile,
            Content::Deuterium => v1::WellContent::Deuterium,
            Content::SolventOnly => v1::WellContent::SolventOnly,
        }
    }
}

/// What a liquid is there for.
pub(crate) const ROLES: [Role; 7] = [
    Role::Solvent,
    Role::Additive,
    Role::Substrate,
    Role::Base,
    Role::Electrophile,
    Role::Quench,
    Role::Diluent,
];

impl From<Role> for v1::LiquidRole {
    fn from(role: Role) -> Self {
        match role {
            Role::Solvent => v1::LiquidRole::Solvent,
            Role::Additive => v1::LiquidRole::Additive,
            Role::Substrate => v1::LiquidRole::Substrate,
            Role::Base => v1::LiquidRole::Base,
            Role::Electrophile => v1::LiquidRole::Electrophile,
            Role::Quench => v1::LiquidRole::Quench,
            Role::Diluent => v1::LiquidRole::Diluent,
        }
    }
}

/// How a stock is had.
pub(crate) const FORMS: [Form; 5] = [
    Form::Solution,
    Form::Suspension,
    Form::Bought,
    Form::Liquid,
    Form::Solid,
];

impl From<Form> for v1::StockForm {
    fn from(form: Form) -> Self {
        match form {
            Form::Solution => v1::StockForm::Solution,
            Form::Suspension => v1::StockForm::Suspension,
            Form::Bought => v1::StockForm::Bought,
            Form::Liquid => v1::StockForm::Liquid,
            Form::Solid => v1::StockForm::Solid,
        }
    }
}

/// What a molecule becomes in the source.
pub(crate) const ION_KINDS: [IonKind; 6] = [
    IonKind::Protonated,
    IonKind::Sodiated,
    IonKind::Ammoniated,
    IonKind::Deprotonated,
    IonKind::Cation,
    IonKind::Anion,
];

impl From<IonKind> for v1::IonKind {
    fn from(kind: IonKind) -> Self {
        match kind {
            IonKind::Protonated => v1::IonKind::Protonated,
            IonKind::Sodiated => v1::IonKind::Sodiated,
            IonKind::Ammoniated => v1::IonKind::Ammoniated,
            IonKind::Deprotonated => v1::IonKind::Deprotonated,
            IonKind::Cation => v1::IonKind::Cation,
            IonKind::Anion => v1::IonKind::Anion,
        }
    }
}

/// How well a detector sees a group.
pub(crate) const STRENGTHS: [Strength; 2] = [Strength::Strong, Strength::Weak];

impl From<Strength> for v1::DetectorStrength {
    fn from(strength: Strength) -> Self {
        match strength {
            Strength::Strong => v1::DetectorStrength::Strong,
            Strength::Weak => v1::DetectorStrength::Weak,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::convert::enums::tests::one_to_one;

    #[test]
    fn closed_lists_of_plans_are_one_to_one() {
        one_to_one::<_, v1::EdgeWells>(&EDGE_WELLS);
        one_to_one::<_, v1::Axis>(&COLUMNS_BY);
        one_to_one::<_, v1::Axis>(&LIMIT_AXES);
        one_to_one::<_, v1::AimWord>(&AIM_WORDS);
        one_to_one::<_, v1::HitsOf>(&HITS_OF);
        one_to_one::<_, v1::DesignKind>(&DESIGNS);
        one_to_one::<_, v1::WellContent>(&CONTENTS);
        one_to_one::<_, v1::LiquidRole>(&ROLES);
        one_to_one::<_, v1::StockForm>(&FORMS);
        one_to_one::<_, v1::IonKind>(&ION_KINDS);
        one_to_one::<_, v1::DetectorStrength>(&STRENGTHS);
    }
}
