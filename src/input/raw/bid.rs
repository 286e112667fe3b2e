//! A bid, as far as its schema needs; nothing reads one yet.

use super::case::RawDevice;
use super::internals::RawInternals;
use crate::input::quantity as kind;
use crate::input::reader::{At, List, Many, Named, Quantity, raw_table};

raw_table! {
    /// A bid: one file a bidder.
    RawBid, "the bid";
    /// Format of the file: 1.
    #[schemars(required, extend("const" = 1))]
    format "format": At<i64>,
    /// Who offers, and on what terms.
    #[schemars(required)]
    bid "bid": RawBidHead,
    /// Internals by name, as in a case.
    internals "internals": Named<RawInternals>,
    /// One for each section that the bidder supplies; a section without offer is a scope gap.
    offer "offer": Many<RawOffer>,
    /// Devices, as in a case.
    device "device": Many<RawDevice>,
    /// The wall that the bidder offers.
    wall "wall": RawBidWall,
    /// Least throughput that the bidder promises, as a fraction of the design.
    turndown "turndown": At<f64>,
}

raw_table! {
    /// Who offers, and on what terms.
    RawBidHead, "[bid]";
    /// Name of the bidder.
    #[schemars(required)]
    bidder "bidder": At<String>,
    /// Reference of the bid.
    reference "reference": At<String>,
    /// Currency of the price.
    currency "currency": At<String>,
    /// Price.
    price "price": At<f64>,
    /// Weight of the supply.
    weight "weight": Quantity<kind::Mass>,
    /// Time of delivery, in words.
    delivery "delivery": At<String>,
    /// What the bidder takes exception to.
    exceptions "exceptions": List<At<String>>,
}

raw_table! {
    /// What is offered for one section.
    RawOffer, "[[offer]]";
    /// Section of the case.
    #[schemars(required)]
    section "section": At<String>,
    /// Name of the internals.
    #[schemars(required)]
    internals "internals": At<String>,
    /// Height of the bed, if it differs from the case.
    height "height": Quantity<kind::Length>,
    /// Height equivalent to a theoretical stage, if it differs from the case.
    hetp "hetp": Quantity<kind::Length>,
    /// Tray efficiency, if it differs from the case.
    efficiency "efficiency": At<f64>,
    /// Number of trays, if it differs from the case.
    trays "trays": At<i64>,
    /// Pressure drop that the bidder claims at the design point.
    claimed_pressure_drop "claimed_pressure_drop": Quantity<kind::Pressure>,
    /// Flood that the bidder claims at the design point, a fraction.
    claimed_flood "claimed_flood": At<f64>,
    /// How far the guarantee reaches, relative, of the pressure drop.
    guaranteed_within "guaranteed_within": At<f64>,
    /// Thickness of the sheet.
    sheet_thickness "sheet_thickness": Quantity<kind::Length>,
}

raw_table! {
    /// The wall that the bidder offers.
    RawBidWall, "[wall]";
    /// Position of the wall.
    position "position": Quantity<kind::Length>,
    /// Thickness of the wall.
    thickness "thickness": Quantity<kind::Length>,
}
