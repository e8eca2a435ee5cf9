//! `spanfolio schema`

use super::Status;

pub(super) fn run() -> Status {
    anstream::println!("{:#}", crate::project::schema());
    Status::Done
}
