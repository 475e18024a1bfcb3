//! Known values to many digits. A quoted decimal is within one unit of its last place; an enclosure must meet that
//! span and, at 192 bits, be no wider than 10^-45 relative to the value.

use mainspring::algebra::budget::{self, Stopped};
use mainspring::algebra::interval::{Interval, Toward};
use mainspring::algebra::number::{Rational, rational};
use num_bigint::BigInt;
use num_traits::{One, Signed, Zero};

const BITS: u32 = 192;

/// The fraction written as a decimal, and one unit in its last place.
fn decimal(text: &str) -> (Rational, Rational) {
    let (figures, power) = text.split_once('e').unwrap_or((text, "0"));
    let (whole, part) = figures.split_once('.').unwrap_or((figures, ""));
    let digits: BigInt = format!("{whole}{part}").parse().unwrap();
    let exponent = power.parse::<i32>().unwrap() - i32::try_from(part.len()).unwrap();
    let unit = rational(10, 1).pow(exponent);
    (Rational::from_integer(digits) * &unit, unit)
}

fn at(text: &str) -> Interval {
    Interval::from_rational(&decimal(text).0, BITS)
}

fn assert_value(value: Option<Interval>, digits: &str) {
    let value = value.unwrap_or_else(|| panic!("no enclosure for {digits}"));
    let (published, unit) = decimal(digits);
    let meets = value.lo_rational() <= &published + &unit && value.hi_rational() >= &published - &unit;
    assert!(meets, "{digits} is not in {:?}", value.to_decimal_bounds(50));
    let width = value.hi_rational() - value.lo_rational();
    let tight = published.abs() * rational(10, 1).pow(-45);
    assert!(width <= tight, "{digits}: too wide, {:?}", value.to_decimal_bounds(50));
}

/// OEIS A002162, A000796, A001620, A001113 (from memory), the last digits computed with mpmath 1.3.
#[test]
fn constants() {
    assert_value(Some(Interval::ln2(BITS)), "0.69314718055994530941723212145817656807550013436026");
    assert_value(Some(Interval::pi(BITS)), "3.1415926535897932384626433832795028841971693993751");
    assert_value(Some(Interval::euler_gamma(BITS)), "0.57721566490153286060651209008240243104215933593992");
    assert_value(Interval::one(BITS).exp(), "2.7182818284590452353602874713526624977572470937000");
}

/// The kept constants must not depend on the order in which precisions are asked for.
#[test]
fn constants_agree_at_all_precisions() {
    for make in [Interval::pi, Interval::ln2, Interval::euler_gamma] {
        let fine = make(3000);
        for bits in (8..1000).step_by(61).chain([2999, 3001, 4000]) {
            let coarse = make(bits);
            assert!(coarse.intersection(&fine).is_some());
            let relative = coarse.width().top() - coarse.lo().top();
            assert!(relative <= 2 - i64::from(bits), "{bits} bits: width 2^{relative}");
        }
    }
}

/// Computed with mpmath 1.3.
#[test]
fn exponentials_logarithms_and_a_root() {
    assert_value(at("-1").exp(), "0.36787944117144232159552377016146086744581113103177");
    assert_value(at("0.5").exp(), "1.6487212707001281468486507878141635716537761007101");
    assert_value(at("100").exp(), "26881171418161354484126255515800135873611118.773742");
    assert_value(at("-1000").exp(), "5.0759588975494567652918094795743369193055992828929e-435");
    assert_value(at("0.0009765625").exp(), "1.0009770394924165352428452926116065064658516291817");
    assert_value(at("10").ln(), "2.3025850929940456840179914546843642076011014886288");
    assert_value(at("0.5").ln(), "-0.69314718055994530941723212145817656807550013436026");
    assert_value(at("1.0009765625").ln(), "0.00097608597305545889596082490801718667261183433378454");
    // OEIS A002193, from memory
    assert_value(at("2").sqrt(), "1.4142135623730950488016887242096980785696718753769");
}

/// Ei(1) as in Abramowitz and Stegun, table 5.1; further digits and other values computed with mpmath 1.3.
#[test]
fn exponential_integral_on_the_right() {
    assert_value(at("1").ei(), "1.8951178163559367554665209343316342690170605817327");
    assert_value(at("0.5").ei(), "0.45421990486317357992052381266280236528140555435264");
    assert_value(at("0.25").ei(), "-0.54254326466191372953353185173431316186059515012811");
    assert_value(at("0.375").ei(), "0.0096913772093419994830440392431261513611085019009206");
    assert_value(at("3").ei(), "9.9338325706254165580083360192167652629906530229876");
    assert_value(at("10").ei(), "2492.2289762418777591384401439985248489896471014309");
    assert_value(at("50").ei(), "105856368971316909630.61541433229987195098919751709");
    assert_value(at("100").ei(), "271555274485387982191401464231082541029579.39341916");
    assert_value(at("300").ei(), "6.4964825080886657890256918949342472692380897005664e127");
    assert_value(at("700").ei(), "1.4509787360525608526208825221093010685469458470795e301");
    assert_value(at("2000").ei(), "1.9415613639441647086009978677626968521672386580935e865");
}

/// Computed with mpmath 1.3.
#[test]
fn exponential_integral_on_the_left() {
    assert_value(at("-1").ei(), "-0.21938393439552027367716377546012164903104729340691");
    assert_value(at("-0.5").ei(), "-0.55977359477616081174679593931508523522684689031635");
    assert_value(at("-3").ei(), "-0.013048381094197037412500745828645022948477634080224");
    assert_value(at("-10").ei(), "-0.0000041569689296853242774028598102781803843462900824195");
    assert_value(at("-11").ei(), "-0.0000014003003042474417754465642379042857838983195530945");
    assert_value(at("-20").ei(), "-0.000000000098355252906498816903969871088947760743563240711060");
    assert_value(at("-50").ei(), "-3.7832640295504590186989678540212857803028931862511e-24");
    assert_value(at("-300").ei(), "-1.7103842768045101157188773714693906847997891642764e-133");
    assert_value(at("-2000").ei(), "-1.2876244456820294119514594292666427188022229325731e-872");
}

/// erf(1) as in Abramowitz and Stegun, table 7.1; further digits and other values computed with mpmath 1.3.
#[test]
fn error_functions() {
    assert_value(at("1").erf(), "0.84270079294971486934122063508260925929606699796630");
    assert_value(at("0.5").erf(), "0.52049987781304653768274665389196452873645157575796");
    assert_value(at("-0.001953125").erf(), "-0.0022038627583766539278275284646142617292841185926075");
    assert_value(at("3").erf(), "0.99997790950300141455862722387041767962015229291260");
    assert_value(at("8").erf(), "0.99999999999999999999999999998877570282701707292003");
    assert_value(at("9.5").erf(), "0.99999999999999999999999999999999999999996230785514");
    assert_value(at("1").erfi(), "1.6504257587975428760253377295613624438956798748740");
    assert_value(at("-0.5").erfi(), "-0.61495209469651098083968118562364139305134561789540");
    assert_value(at("3").erfi(), "1629.9946226015656510616479520762741627788899109153");
    assert_value(at("10").erfi(), "1524307422708669699360546614726544062463812.0746989");
    assert_value(at("25").erfi(), "6.1359862498219512538095285627418572224569212730215e269");
    assert_value(at("40").erfi(), "1.0487499200918373346965524767149544748470312520769e693");
}

/// W(1) is the omega constant (OEIS A030178, from memory); further digits and other values computed with mpmath 1.3.
#[test]
fn lambert_w() {
    assert_value(at("1").lambertw(), "0.56714329040978387299996866221035554975381578718651");
    assert_value(at("-0.25").lambertw(), "-0.35740295618138890306881110405590475331659055507601");
    assert_value(at("-0.3125").lambertw(), "-0.53195564769450046225287775616164898047115908467200");
    assert_value(at("-0.367").lambertw(), "-0.93239918474792848371646619087935720846714799929561");
    assert_value(at("0.5").lambertw(), "0.35173371124919582602490930092995106517146421551711");
    assert_value(at("10").lambertw(), "1.7455280027406993830743012648753899115352881290809");
    assert_value(at("1000").lambertw(), "5.2496028524015962271260563196973062825214723860596");
    assert_value(at("1e100").lambertw(), "224.84310644511850153937313433795567541084081319858");
    assert_value(at("1e-30").lambertw(), "9.9999999999999999999999999999900000000000000000000e-31");
}

/// That −1/e is in the domain of W cannot be proved from an enclosure; of a number just inside it can.
#[test]
fn the_branch_point_of_lambert_w() {
    let edge = Interval::one(BITS).exp().and_then(|e| e.recip()).unwrap().neg();
    assert!(edge.lambertw().is_none());
    assert!(at("-0.5").lambertw().is_none());
    let inside = Interval::point(&edge.hi().add(&edge.width(), BITS, Toward::Up), BITS);
    let w = inside.lambertw().unwrap();
    assert!(w.lo_rational() >= -Rational::one());
    assert!(w.hi_rational() < rational(-999_999_999, 1_000_000_000));
    assert!(w.mul(&w.exp().unwrap()).intersection(&inside).is_some());
}

#[test]
fn decimal_bounds_are_outward() {
    let shown = |x: Interval, digits| x.to_decimal_bounds(digits);
    let pair = |a: &str, b: &str| (a.to_string(), b.to_string());
    assert_eq!(shown(Interval::ln2(96), 10), pair("0.6931471805", "0.6931471806"));
    assert_eq!(shown(Interval::ln2(96).neg(), 10), pair("-0.6931471806", "-0.6931471805"));
    assert_eq!(shown(at("0.5"), 10), pair("0.5", "0.5"));
    assert_eq!(shown(at("-1200"), 3), pair("-1200", "-1200"));
    assert_eq!(shown(at("999.5"), 3), pair("999", "1000"));
    assert_eq!(shown(at("0"), 3), pair("0", "0"));
    assert_eq!(shown(at("0.0625"), 2), pair("0.062", "0.063"));
    assert_eq!(shown(at("-1000").exp().unwrap(), 4), pair("5.075e-435", "5.076e-435"));
    assert_eq!(shown(at("1000").exp().unwrap(), 4), pair("1.970e434", "1.971e434"));
    assert_eq!(shown(Interval::pi(64), 1), pair("3", "4"));
}

#[test]
fn undefined_operations_have_no_value() {
    let straddling = at("-1").hull(&at("2"));
    assert!(at("1").div(&straddling).is_none());
    assert!(straddling.pow_int(-1).is_none());
    assert!(straddling.ln().is_none() && at("0").ln().is_none());
    assert!(straddling.sqrt().is_none() && at("4").root(0).is_none());
    assert!(straddling.ei().is_none() && at("0").ei().is_none());
    assert!(straddling.pow(&at("0.5")).is_none());
    assert!(at("2000000").exp().is_none() && at("-2000000").exp().is_none());
    let clipped = straddling.root_of_nonnegative(2).unwrap();
    assert!(clipped.lo_rational().is_zero() && clipped.contains(&rational(14142, 10000)));
    assert!(at("-1").root_of_nonnegative(2).is_none());
}

#[test]
fn even_powers_are_tight_and_exact_results_stay_points() {
    let wide = at("-3").hull(&at("2"));
    let ends = |x: Option<Interval>| x.map(|x| (x.lo_rational(), x.hi_rational()));
    assert_eq!(ends(wide.pow_int(2)), Some((Rational::zero(), rational(9, 1))));
    assert_eq!(ends(wide.pow_int(3)), Some((rational(-27, 1), rational(8, 1))));
    assert_eq!(ends(at("7").pow_int(0)), Some((Rational::one(), Rational::one())));
    let two = Some((rational(2, 1), rational(2, 1)));
    assert_eq!(ends(at("8").root(3)), two);
    assert_eq!(ends(at("0.25").pow(&at("-1")).unwrap().sqrt()), two);
    assert_eq!(ends(at("16").pow_int(-1).map(|x| x.scaled(5))), two);
}

/// Exponents may be far apart without filling memory; beyond all bounds the computation ends as one too large.
#[test]
fn enormous_exponents_are_cheap_or_refused() {
    let huge = at("3").pow_int(1 << 30).unwrap();
    let sum = huge.add(&huge.recip().unwrap());
    assert!(sum.encloses(&huge) && sum.width().top() - sum.lo().top() < -150);
    assert!(huge.ln().unwrap().intersection(&at("3").ln().unwrap().scaled(30)).is_some());
    assert_eq!(budget::attempt(10_000, || at("3").pow_int(i64::MAX)), Err(Stopped::Size));
    assert_eq!(budget::attempt(10_000, || huge.to_decimal_bounds(5)), Err(Stopped::Size));
}
