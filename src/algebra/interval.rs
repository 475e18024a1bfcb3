//! Placeholder until the interval arithmetic lands: delete this file then (interval/ replaces it).
use super::number::Rational;
#[derive(Clone)]
pub struct Interval;
impl Interval {
    pub fn from_rational(_: &Rational, _: u32) -> Interval {
        Interval
    }
    pub fn pi(_: u32) -> Interval {
        Interval
    }
    pub fn add(&self, _: &Interval) -> Interval {
        Interval
    }
    pub fn mul(&self, _: &Interval) -> Interval {
        Interval
    }
    pub fn pow_int(&self, _: i64) -> Option<Interval> {
        None
    }
    pub fn ln(&self) -> Option<Interval> {
        None
    }
    pub fn exp(&self) -> Option<Interval> {
        None
    }
    pub fn root(&self, _: u32) -> Option<Interval> {
        None
    }
    pub fn ei(&self) -> Option<Interval> {
        None
    }
    pub fn erf(&self) -> Option<Interval> {
        None
    }
    pub fn erfi(&self) -> Option<Interval> {
        None
    }
    pub fn lambertw(&self) -> Option<Interval> {
        None
    }
    pub fn sign(&self) -> Option<std::cmp::Ordering> {
        None
    }
}
