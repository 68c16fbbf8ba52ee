//! Sheets that prove themselves: what travels inside a sheet taken out again, solved anew, and the sheet made again.

mod attached;
mod compare;
mod verify;

pub use attached::{Attachment, Fault, attachments};
pub use compare::{Difference, differences};
pub use verify::{Report, verify};
