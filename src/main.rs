//! The gillside command: parse, run one command, map the outcome to an exit status.

use gillside::knowledge;

fn main() {
    let t = std::time::Instant::now();
    match knowledge::load(&knowledge::embedded(), &[]) {
        Ok(k) => {
            println!("{} findings {} causes {} steps in {:?}", k.findings.len(), k.causes.len(), k.steps.len(), t.elapsed());
            for f in knowledge::check(&k) { println!("{f}"); }
        }
        Err(faults) => for f in faults { println!("{f}"); }
    }
}
