//! Numbers with gradients: value and slopes are carried along together, in ordinary floating point.

/// A value with its derivative in each direction.
#[derive(Clone, Debug)]
pub struct Dual {
    pub value: f64,
    pub slope: Vec<f64>,
}

impl Dual {
    pub fn constant(value: f64, directions: usize) -> Dual {
        Dual { value, slope: vec![0.0; directions] }
    }

    pub fn variable(value: f64, direction: usize, directions: usize) -> Dual {
        let mut dual = Dual::constant(value, directions);
        dual.slope[direction] = 1.0;
        dual
    }

    /// f of this number, where f and f' at it are given.
    fn through(&self, value: f64, derivative: f64) -> Dual {
        Dual { value, slope: self.slope.iter().map(|s| derivative * s).collect() }
    }

    fn both(&self, other: &Dual, value: f64, by_self: f64, by_other: f64) -> Dual {
        let pairs = self.slope.iter().zip(&other.slope);
        Dual { value, slope: pairs.map(|(s, t)| scaled(by_self, *s) + scaled(by_other, *t)).collect() }
    }

    pub fn plus(&self, other: &Dual) -> Dual {
        self.both(other, self.value + other.value, 1.0, 1.0)
    }

    pub fn minus(&self, other: &Dual) -> Dual {
        self.both(other, self.value - other.value, 1.0, -1.0)
    }

    pub fn times(&self, other: &Dual) -> Dual {
        self.both(other, self.value * other.value, other.value, self.value)
    }

    pub fn over(&self, other: &Dual) -> Dual {
        let value = self.value / other.value;
        self.both(other, value, 1.0 / other.value, -value / other.value)
    }

    pub fn negated(&self) -> Dual {
        self.through(-self.value, -1.0)
    }

    pub fn ln(&self) -> Dual {
        self.through(self.value.ln(), 1.0 / self.value)
    }

    pub fn exp(&self) -> Dual {
        self.through(self.value.exp(), self.value.exp())
    }

    pub fn sqrt(&self) -> Dual {
        self.through(self.value.sqrt(), 0.5 / self.value.sqrt())
    }

    pub fn power(&self, exponent: &Dual) -> Dual {
        let value = self.value.powf(exponent.value);
        let by_base = exponent.value * self.value.powf(exponent.value - 1.0);
        self.both(exponent, value, by_base, value * self.value.ln())
    }
}

/// Zero stays zero, whatever it is multiplied by: a constant exponent has no use for the logarithm of its base.
fn scaled(by: f64, slope: f64) -> f64 {
    if slope == 0.0 { 0.0 } else { by * slope }
}
