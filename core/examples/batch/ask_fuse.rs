//! `fuse`: whether a fuse holds a switch-on.

use lampladder_core::fuse::{Fuse, Standard};
use serde::Serialize;

use crate::ask_switch_on;
use crate::fields::{Fields, Refusal};

#[derive(Serialize)]
pub(crate) struct FuseAnswer {
    verdict: &'static str,
    margin: f64,
    hold_margin: f64,
    open_margin: f64,
    i2t_amp2_seconds: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    melting_share: Option<f64>,
    /// The least sure source of the gates that were used.
    status: &'static str,
    note: &'static str,
}

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<FuseAnswer, Refusal> {
    let standard = standard(&mut fields)?;
    let rated = fields.need("rated_amps")?;
    let fuse = Fuse::new(standard, rated.number()?).map_err(|error| rated.refuse(error.to_string()))?;
    let ran = ask_switch_on::ran(&mut fields)?;
    fields.done()?;
    let judged = fuse.judge(&ran.result);
    Ok(FuseAnswer {
        verdict: judged.verdict.name(),
        margin: judged.margin(),
        hold_margin: judged.hold_margin,
        open_margin: judged.open_margin,
        i2t_amp2_seconds: ran.result.i2t_amp2_seconds,
        melting_share: judged.melting_share,
        status: judged.status.name(),
        note: "check the standard and the fuse's own data sheet",
    })
}

fn standard(fields: &mut Fields<'_>) -> Result<Standard, Refusal> {
    let node = fields.need("standard")?;
    match node.text()? {
        "iec60127-2" => {
            let sheet = fields.need("sheet")?;
            let number = sheet.number()?;
            let known = [1_u8, 2, 3, 5].into_iter().find(|&known| f64::from(known) == number);
            let known = known.ok_or_else(|| sheet.refuse("must be one of 1, 2, 3, 5"))?;
            Standard::iec_60127_2(known).map_err(|error| sheet.refuse(error.to_string()))
        }
        "ul248-14" => match fields.maybe("time_delay") {
            None => Ok(Standard::Ul248),
            Some(node) => Ok(if node.truth()? { Standard::Ul248TimeDelay } else { Standard::Ul248 }),
        },
        _ => Err(node.refuse("must be one of iec60127-2, ul248-14")),
    }
}
