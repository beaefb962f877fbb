//! How honest the stated weights are, over many made-up benches.

use lampladder_core::diagnosis::{self, Candidate, Forecast};
use lampladder_core::readings::{self, Kind, Readings, Response, Rule};

use crate::simulated::{self, Panel, Random};

/// One tenth of the stated weights.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Bin {
    /// Stated weights that fell into it.
    pub count: f64,
    /// Their sum.
    pub stated: f64,
    /// How many of them belonged to the true condition.
    pub right: f64,
}

impl Bin {
    /// Mean of the stated weights.
    pub fn mean(&self) -> f64 {
        self.stated / self.count
    }

    /// Part that was right.
    pub fn rate(&self) -> f64 {
        self.right / self.count
    }

    /// Standard deviation of the part that is right, if the stated mean is true.
    pub fn deviation(&self) -> f64 {
        (self.mean() * (1.0 - self.mean()) / self.count).sqrt()
    }
}

/// What many benches say together.
#[derive(Debug, Clone, Default)]
pub struct Tally {
    /// Benches counted.
    pub benches: usize,
    /// Stated weights by tenths: 0 to 5 %, 5 to 15 %, and so on to 95 to 100 %.
    pub bins: [Bin; 11],
    /// Mean weight of the truth with what was read.
    pub before: f64,
    /// The same after the recommended next reading.
    pub after_recommended: f64,
    /// The same after a random one.
    pub after_random: f64,
    /// Benches called unexplained although they were not.
    pub unexplained: usize,
    /// Readings refused although they belonged together.
    pub refused: Vec<Rule>,
    /// 95 % bands of current and power: how many there were, and how many held the truth.
    pub amps: (usize, usize),
    /// The same of power.
    pub watts: (usize, usize),
}

/// Benches that share what was entered, and with it a forecast: the supply of each is read, or not, afterwards.
const BENCHES_A_SETUP: usize = 10;

/// Counts `benches` made-up benches from a recorded `start`.
///
/// # Panics
/// Where the core refuses what it made itself.
pub fn tally(start: u64, benches: usize) -> Tally {
    let mut random = Random::new(start);
    let mut tally = Tally::default();
    while tally.benches < benches {
        let setup = simulated::setup(&mut random);
        let forecast = Forecast::complete(&setup, None, Response::TrueRms).expect("on the mains");
        for _ in 0..BENCHES_A_SETUP {
            let Some(truth) = simulated::truth(&setup, &mut random) else { continue };
            let meter = simulated::meter(&mut random);
            let exact = Panel::new(&truth, meter, false, &mut random);
            if let Some(point) = &truth.settled {
                let growth = readings::growth(setup.plate.family());
                match readings::interpret(&setup.bank, &exact.some(&mut random), growth) {
                    Err(refused) => tally.refused.push(refused.contradictions[0].rule),
                    Ok(found) => {
                        for (estimate, exact, count) in [
                            (found.amps, point.amps, &mut tally.amps),
                            (found.load_watts, point.load_watts, &mut tally.watts),
                        ] {
                            if let Some(estimate) = estimate {
                                count.0 += 1;
                                count.1 +=
                                    usize::from((estimate.band.low..=estimate.band.high).contains(&exact));
                            }
                        }
                    }
                }
            }
            let panel = Panel::new(&truth, meter, true, &mut random);
            let some = panel.some(&mut random);
            let found = diagnosis::diagnose(&forecast, &some);
            tally.benches += 1;
            tally.unexplained += usize::from(!found.explained);
            for ranked in &found.ranking {
                tally.add(ranked.weight, ranked.condition == truth.condition);
            }
            let weight = |readings: &Readings| {
                let found = diagnosis::diagnose(&forecast, readings);
                found
                    .ranking
                    .iter()
                    .find(|one| one.condition == truth.condition)
                    .map_or(0.0, |one| one.weight)
            };
            // The panel has no ohmmeter.
            let possible: Vec<Candidate> = found
                .next
                .iter()
                .map(|next| next.candidate)
                .filter(|candidate| *candidate != Candidate::Number(Kind::PlugOhms))
                .collect();
            let with = |candidate: Option<&Candidate>| {
                let mut more = some.clone();
                match candidate {
                    Some(Candidate::Number(kind)) => more.add(panel.reading(*kind)),
                    Some(Candidate::Look) => more.set_look(Some(panel.look())).expect("in range"),
                    Some(Candidate::Behaviour) => more.set_behaviour(Some(panel.behaviour())),
                    _ => {}
                }
                more
            };
            tally.before += weight(&some);
            tally.after_recommended += weight(&with(possible.first()));
            let any = if possible.is_empty() { None } else { Some(random.one_of(&possible)) };
            tally.after_random += weight(&with(any));
        }
    }
    #[expect(clippy::cast_precision_loss, reason = "a count of benches")]
    let count = tally.benches as f64;
    for sum in [&mut tally.before, &mut tally.after_recommended, &mut tally.after_random] {
        *sum /= count;
    }
    tally
}

impl Tally {
    #[expect(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        reason = "a weight from 0 to 1 gives a place from 0 to 10"
    )]
    fn add(&mut self, weight: f64, right: bool) {
        let bin = &mut self.bins[(weight * 10.0 + 0.5) as usize];
        bin.count += 1.0;
        bin.stated += weight;
        bin.right += f64::from(u8::from(right));
    }

    /// The table, for people.
    pub fn print(&self) {
        println!("  stated   weights   mean stated   right   deviations apart");
        for (tenth, bin) in self.bins.iter().enumerate().filter(|(_, bin)| bin.count > 0.0) {
            println!(
                "  {:>4} %   {:>7}   {:>9.1} %   {:>5.1} %   {:>+6.1}",
                10 * tenth,
                bin.count,
                100.0 * bin.mean(),
                100.0 * bin.rate(),
                (bin.rate() - bin.mean()) / bin.deviation()
            );
        }
        #[expect(clippy::cast_precision_loss, reason = "a count of benches")]
        let part = |(all, held): (usize, usize)| 100.0 * held as f64 / all.max(1) as f64;
        println!(
            "  weight of the truth: {:.3} as read, {:.3} after the recommended reading, {:.3} after a random one",
            self.before, self.after_recommended, self.after_random
        );
        println!(
            "  95 % bands hold the truth: current {:.1} % of {}, power {:.1} % of {}",
            part(self.amps),
            self.amps.0,
            part(self.watts),
            self.watts.0
        );
        println!(
            "  of {} benches {} wrongly unexplained, {} wrongly refused",
            self.benches,
            self.unexplained,
            self.refused.len()
        );
        for rule in &self.refused {
            println!("  {rule:?}");
        }
    }
}
