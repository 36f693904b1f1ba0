//! Words of plans: which there must be. The words themselves are `knowledge/pace-words.toml`.

use super::pace::named;

named! {
    /// Words of plans; `{…}` stands for what a plan fills in.
    PaceWords of String {
        hydrate = "hydrate",
    }
}
