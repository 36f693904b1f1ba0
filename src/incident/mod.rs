//! The `incident` room: what outlives the person who found it. One TOML file an incident, readable and editable by hand.
//!
//! `model` is an incident as it stands, `read` a file to an incident, `open` an assessment to a new file, `edit` one thing
//! put down in a file (what a person wrote in it stays), `store` the folder, `follow` whether the readings move as they
//! should by when they should, `again` the causes once more with what failed steps tell, `similar` what it was last time.

mod again;
mod edit;
mod follow;
mod model;
mod open;
mod plan;
mod read;
mod similar;
mod store;

pub use again::{Again, again};
pub use edit::{Edit, Mark, edited};
pub use follow::{Book, Check, Look, checks, looked};
pub use model::{
    Avoided, Checked, Closed, Followed, Incident, MadeBy, Note, PlanStep, Ranked, Reopened, Taken,
};
pub use open::{Opening, opened};
pub use plan::plan_of;
pub use read::read;
pub use similar::{Similar, similar};
pub use store::{Folder, Stored};
