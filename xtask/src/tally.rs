//! Counting what the test runners report.

/// What one or several runners said they ran.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(crate) struct Tally {
    pub(crate) passed: u64,
    pub(crate) failed: u64,
    pub(crate) ignored: u64,
}

impl Tally {
    /// Reads one line of a runner's output. Only the summaries of cargo test and of the WebAssembly runner count:
    /// `test result: ok. 12 passed; 0 failed; 0 ignored; …`.
    pub(crate) fn read(&mut self, line: &str) {
        let Some((_, summary)) = line.trim().split_once("test result: ") else { return };
        // Names of tests may hold these words too, but not before a number.
        let count = |word: &str| {
            summary
                .split([';', '.'])
                .filter_map(|part| part.trim().strip_suffix(word))
                .find_map(|number| number.trim().parse::<u64>().ok())
                .unwrap_or(0)
        };
        self.passed += count("passed");
        self.failed += count("failed");
        self.ignored += count("ignored");
    }

    pub(crate) fn add(&mut self, other: Self) {
        self.passed += other.passed;
        self.failed += other.failed;
        self.ignored += other.ignored;
    }
}

#[cfg(test)]
mod tests {
    use super::Tally;

    #[test]
    fn sums_the_summaries_of_both_runners_and_nothing_else() {
        let mut tally = Tally::default();
        for line in [
            "running 3 tests",
            "test says_5_passed ... ok",
            "test result: ok. 3 passed; 0 failed; 1 ignored; 0 measured; 7 filtered out; finished in 0.00s",
            "test result: FAILED. 4 passed; 2 failed; 0 ignored; 0 filtered out; finished in 0.61s",
            "9 passed, 9 failed",
        ] {
            tally.read(line);
        }
        assert_eq!(tally, Tally { passed: 7, failed: 2, ignored: 1 });
    }
}
