//! The gillside command: parse, run one command, map the outcome to an exit status.

fn main() {}
