//! The texts of the first screen: frame, loop, sentence, details, editors; and all the others in groups of their own.

use super::fill;
use super::hand_on::HandOnWords;
use super::ladder::LadderWords;
use super::reader::{Lines, Malformed, catalogue};
use super::replay::ReplayWords;
use super::seen::SeenWords;

catalogue! {
    /// All texts of one language.
    pub struct Words in "" {
        tag, decimal, singular,
        language [en, de, fr, es],
        choose_language, title, reminder, cautions, accept, back, done, dismiss,
        theme [auto, paper, dusk],
        tab [expect, seen, ladder, switch_on, curve, hand_on],
        panels,
        part [supply, bank, equipment],
        change [supply, bank, equipment],
        circuit, lamps, bank_one, bank_parallel, bank_series, bank_then, direct, stale_mark, pulse, pulsing,
        every, burnt, coming, none,
        condition [
            healthy, idle, working, overloaded, shorted, open_circuit, leaky_reservoir, shorted_reservoir,
            shorted_diode, shorted_winding, output_conducting, stalled,
        ],
        if_condition [
            healthy, idle, working, overloaded, shorted, open_circuit, leaky_reservoir, shorted_reservoir,
            shorted_diode, shorted_winding, output_conducting, stalled,
        ],
        said [
            healthy, idle, working, overloaded, shorted, open_circuit, leaky_reservoir, shorted_reservoir,
            shorted_diode, shorted_winding, output_conducting, stalled,
        ],
        means [
            healthy, idle, working, overloaded, shorted, open_circuit, leaky_reservoir, shorted_reservoir,
            shorted_diode, shorted_winding, output_conducting, stalled,
        ],
        when [healthy, overloaded, shorted, stalled, other],
        conditions, other_conditions,
        glow [dark, faint, dull_red, orange, amber, yellow, full, over_full],
        glow_range, across_one, across_several, across_load, why, overlap, adds_up, stale, burns_out, pulses,
        pulses_every, stands, looks_shorted, larger, does_not_start, hard_to_tell, expect, off_if_full,
        off_if_brighter, off_if_more, assumes, over_rated, lamp_only, lamp_at, life_rated, life, life_over,
        short_life_rated, short_life, short_life_over, assumed_supply, assumed_bank, assumed_equipment,
        power_factor_printed, power_factor_usual, assumed_settled, life_source, band_note, ways,
        mode [only, off, standing, turning, degauss_cold, degauss_warm],
        mode_decides [only, off, standing, turning, degauss_cold, degauss_warm],
        way, told,
        slot [
            supply_volts, supply_hertz, supply_ohms, plate_volts, plate_watts, plate_amps, plate_volt_amps,
            plate_power_factor,
        ],
        detail [
            magnetising_share, core_share, winding_share, reservoir_seconds, heater_share, no_load_share,
            stall_multiple, idle_share, start_volts, stop_volts, microfarads_per_watt, series_ohms,
            degauss_cold_ohms, degauss_warm_amps, degauss_trip_watts, breakaway_share, measured_ohms,
            restart_seconds,
        ],
        lamp_part [volts, watts, lumens, cold_ohms, point_volts, point_amps],
        reading [supply_volts, bank_volts, load_volts, amps, load_watts, plug_ohms],
        meter_part [percent, digits, counts],
        entry [
            count, cold_ohms, glow_volts, glow_amps, printed_volts, protective_ohms, insulation_ohms,
            plug_ohms, farads, bleed_ohms, start_volts,
        ],
        fault_empty, fault_no_unit, fault_unit, fault_whole, fault_missing, fault_conflict,
        given [watts, amps, volt_amps],
        fault_which_unit, fault_direct, fault_number, fault_one_value, fault_range, step_more, step_less,
        family [
            transformer_supply, valve_transformer, valve_series, switch_mode, switch_mode_corrected, crt_set,
            universal_motor, induction_motor, heater, lamp, plain, measured,
        ],
        family_noun [
            transformer_supply, valve_transformer, valve_series, switch_mode, switch_mode_corrected, crt_set,
            universal_motor, induction_motor, heater, lamp, plain, measured,
        ],
        examples [
            transformer_supply, valve_transformer, valve_series, switch_mode, switch_mode_corrected, crt_set,
            universal_motor, induction_motor, heater, lamp, plain, measured,
        ],
        warning [
            hunts, stands_and_heats, live_chassis, tube_voltage, looks_shorted, charged_reservoir,
            moving_parts,
        ],
        unsuitable_equipment [microwave_oven, medical, three_phase, too_powerful],
        refuse_equipment [microwave_oven, medical, three_phase, too_powerful],
        fill [usual, vacuum, gas, halogen],
        unsuitable [led, compact_fluorescent, carbon_filament],
        refusal [led, compact_fluorescent, carbon_filament],
        bad_kept, nothing_kept, from_link, ladder_from_link, readings_from_link, link_half_read, new,
        new_on_ladder, use_new, emptied, elsewhere, use_elsewhere,
        link [empty, too_long, newer, damaged, refused],
        reckoner_lost, use_kept, more,
    }
    groups {
        /// Texts of the editors.
        edit: EditWords,
        /// Names of columns and headings.
        table: TableWords,
    }
    later {
        /// Texts of the panels beyond the first screen, once they have come.
        later: Later,
    }
}

catalogue! {
    /// The texts of the panels beyond the first screen: a file of its own, fetched with those panels.
    pub struct Later in "" {}
    groups {
        /// Texts of the switch-on panel.
        replay: ReplayWords,
        /// Texts of the panel of readings.
        seen: SeenWords,
        /// Texts of the ladder panel.
        ladder: LadderWords,
        /// Texts of the panel that hands a bench on.
        hand_on: HandOnWords,
    }
}

impl Words {
    /// The texts of the panels beyond the first screen; empty texts until they have come.
    fn later(&self) -> &'static Later {
        static NONE: Later = Later::empty();
        self.later.get().copied().unwrap_or(&NONE)
    }

    /// Texts of the panel that hands a bench on.
    pub fn hand_on(&self) -> &'static HandOnWords {
        &self.later().hand_on
    }

    /// Texts of the switch-on panel.
    pub fn replay(&self) -> &'static ReplayWords {
        &self.later().replay
    }

    /// Texts of the panel of readings.
    pub fn seen(&self) -> &'static SeenWords {
        &self.later().seen
    }

    /// Texts of the ladder panel.
    pub fn ladder(&self) -> &'static LadderWords {
        &self.later().ladder
    }

    /// Whether the later texts have come.
    pub fn is_whole(&self) -> bool {
        self.later.get().is_some()
    }

    /// Takes the later texts, as they are fetched: a line each.
    ///
    /// # Errors
    /// [`Malformed`]: too few texts, too many, or an empty one.
    pub fn complete(&self, texts: String) -> Result<(), Malformed> {
        if self.is_whole() {
            return Ok(());
        }
        let mut lines = Lines::like(self.numerals, self.plural, texts.leak());
        let later = Box::leak(Box::new(const { Later::empty() }));
        later.read(&mut lines);
        lines.finish()?;
        // Nobody else has been here since the first line.
        let _ = self.later.set(later);
        Ok(())
    }
}

impl PartialEq for Words {
    /// Whether it is the very same catalogue: each is read once.
    fn eq(&self, other: &Self) -> bool {
        core::ptr::eq(self, other)
    }
}

catalogue! {
    /// Texts of the editors.
    pub struct EditWords in "edit." {
        usual_volts, usual_hertz, follow, as_wired, kind, ordinary, sizes, add_parallel, add_series, remove,
        full, lamp_more, filling, points, add_point, remove_point, what, change, not_for, plate_more,
        default_hint, power_factor_hint, ohms_hint, optional,
    }
}

impl EditWords {
    /// Lamps and plate take the supply's volts.
    pub fn follow(&self, volts: &str) -> String {
        fill(self.follow, &[volts])
    }

    /// A point goes.
    pub fn remove_point(&self, number: usize) -> String {
        fill(self.remove_point, &[&number.to_string()])
    }

    /// What stands where nothing is typed.
    pub fn default_hint(&self, usual: &str) -> String {
        fill(self.default_hint, &[usual])
    }

    /// Where no power factor is printed.
    pub fn power_factor_hint(&self, usual: &str) -> String {
        fill(self.power_factor_hint, &[usual])
    }
}

catalogue! {
    /// Names of columns and headings.
    pub struct TableWords in "table." {
        details, condition, lamp, bank_volts, short_bank_volts, volts, amps, band, load_volts,
        short_load_volts, load_watts, glow, kelvin, life, short_life, assumed, curve, curve_means, meet,
        bank_curve, every_lamp, chart,
    }
}
