//! Reading logs.

mod row;

pub use row::{PlaceId, Row, Value};
