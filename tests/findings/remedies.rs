//! What is said to clear a flag does clear it, and no more than needed.

use mirrorwell::findings::{Flag, FlagCode, Rates, Who};
use mirrorwell::site::{Rate, Site};

use crate::plans::{EXAMPLES, example, found, solved};

/// By how much a flag's limit may be missed after the remedy, metres or share.
const CLEARED: f64 = 1e-8;

/// The excess of a flag after the site was changed; nothing where it is gone.
fn excess_after(site: Site, flag: &Flag) -> f64 {
    let solution = solved(site);
    let flags = found(&solution).flags;
    flags
        .iter()
        .find(|later| later.code == flag.code && later.who == flag.who)
        .map_or(0.0, |later| later.measure.excess())
}

/// A site with every rate but one multiplied by a factor.
fn scaled(mut site: Site, factor: f64, but: Option<usize>) -> Site {
    for (index, well) in site.wells.iter_mut().enumerate() {
        if Some(index) != but {
            well.pumping = Rate::from_si(well.pumping.si() * factor);
        }
    }
    site
}

#[test]
fn the_causing_well_s_new_rate_clears_the_flag_and_a_higher_one_does_not() {
    let mut checked = 0;
    for name in EXAMPLES {
        let site = example(name);
        for flag in found(&solved(site.clone())).flags {
            let Some(rate) = flag.remedy.and_then(|remedy| remedy.alone) else {
                continue;
            };
            let with = |m3_d: f64| {
                let mut site = site.clone();
                site.wells[rate.well].pumping = Rate::from_si(m3_d);
                excess_after(site, &flag)
            };
            assert!(with(rate.to_m3_d) <= CLEARED, "{name}: {flag:?}");
            let slightly_more = rate.to_m3_d + 0.01 * (rate.from_m3_d - rate.to_m3_d);
            assert!(with(slightly_more) > CLEARED, "{name}: {flag:?}");
            checked += 1;
        }
    }
    assert!(checked >= 8, "only {checked} remedies to check");
}

#[test]
fn the_common_factor_clears_the_flag_and_a_larger_one_does_not() {
    let mut checked = 0;
    for name in EXAMPLES {
        let site = example(name);
        for flag in found(&solved(site.clone())).flags {
            let Some(common) = flag.remedy.and_then(|remedy| remedy.together) else {
                continue;
            };
            let but = match (common.rates, flag.who) {
                (Rates::AllOthers, Who::Well(well)) => Some(well),
                _ => None,
            };
            let with = |factor: f64| excess_after(scaled(site.clone(), factor, but), &flag);
            assert!(with(common.factor) <= CLEARED, "{name}: {flag:?}");
            let slightly_more = common.factor + 0.01 * (1.0 - common.factor);
            assert!(with(slightly_more) > CLEARED, "{name}: {flag:?}");
            checked += 1;
        }
    }
    assert!(checked >= 8, "only {checked} remedies to check");
}

#[test]
fn where_stopping_the_causing_well_does_not_help_no_rate_is_invented() {
    let site = example("box.toml");
    let flags = found(&solved(site.clone())).flags;
    let flag = flags
        .iter()
        .find(|flag| flag.code == FlagCode::NeighbourOverLimit)
        .unwrap();
    assert!(flag.remedy.unwrap().alone.is_none());
    let mut stopped = site;
    stopped.wells[flag.cause.unwrap().well].pumping = Rate::from_si(0.0);
    assert!(excess_after(stopped, flag) > 0.0);
}

#[test]
fn flags_come_in_order_of_severity() {
    for name in EXAMPLES {
        let flags = found(&solved(example(name))).flags;
        assert!(flags.windows(2).all(|pair| pair[0].code <= pair[1].code));
    }
}
