//! Conics with the body in a focus, in the form that a grid of cells asks for: where do they cross a column, where a row?
//!
//! With x along the line of apsides towards the periapsis, ℓ the semi-latus rectum and e the eccentricity, every point of an ellipse and
//! of the hyperbola's branch round the focus obeys r = ℓ − e x (the polar equation r = ℓ/(1 + e cos ν), any textbook). So at a given x
//! y² = (ℓ − e x)² − x², and at a given y (1 − e²) x² + 2 ℓ e x + y² − ℓ² = 0: both crossings are exact at every zoom.

/// A conic on the line of apsides.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Conic {
    /// Semi-latus rectum, km.
    pub(super) parameter_km: f64,
    /// Eccentricity.
    pub(super) eccentricity: f64,
    /// Whether the periapsis lies to the right (+1) or to the left (−1).
    pub(super) towards: f64,
}

/// Which part of a conic is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Part {
    /// All of it.
    Whole,
    /// Above the line of apsides.
    Upper,
    /// Below it.
    Lower,
    /// Of a hyperbola, up to its periapsis.
    Incoming,
}

impl Part {
    /// Whether points at this height over the line of apsides belong.
    fn holds(self, y: f64) -> bool {
        match self {
            Part::Whole => true,
            Part::Upper => 0.0 <= y,
            Part::Lower | Part::Incoming => y <= 0.0,
        }
    }
}

impl Conic {
    /// By periapsis radius (km), eccentricity and the side of the periapsis.
    pub(super) fn with_periapsis(periapsis_km: f64, eccentricity: f64, towards: f64) -> Self {
        Self {
            parameter_km: periapsis_km * (1.0 + eccentricity),
            eccentricity,
            towards,
        }
    }

    /// A circle of this radius (km).
    pub(super) fn circle(radius_km: f64) -> Self {
        Self::with_periapsis(radius_km, 0.0, 1.0)
    }

    /// Point at a true anomaly (rad); `None` beyond a hyperbola's asymptotes.
    pub(super) fn point(&self, anomaly: f64) -> Option<(f64, f64)> {
        let below = 1.0 + self.eccentricity * anomaly.cos();
        let radius = self.parameter_km / below;
        (0.0 < below && radius.is_finite()).then(|| {
            // Counter-clockwise whichever side the periapsis is on: the whole conic is turned, not mirrored.
            (
                self.towards * radius * anomaly.cos(),
                self.towards * radius * anomaly.sin(),
            )
        })
    }

    /// The anomalies of a part in the order they are flown, `count` of them, evenly spread; a hyperbola from its asymptote on.
    pub(super) fn anomalies(&self, part: Part, count: usize) -> impl Iterator<Item = f64> {
        use std::f64::consts::PI;
        let (from, to) = match (part, 0.0 < self.towards) {
            (Part::Whole, _) => (-PI, PI),
            (Part::Upper, true) | (Part::Lower, false) => (0.0, PI),
            (Part::Lower, true) | (Part::Upper, false) => (PI, 2.0 * PI),
            (Part::Incoming, _) => (-(-1.0 / self.eccentricity.max(1.0)).acos(), 0.0),
        };
        (0..count).map(move |k| from + (to - from) * (k as f64 + 0.5) / count as f64)
    }

    /// Heights at which the conic crosses the vertical line at `x` inside a part.
    pub(super) fn at_x(&self, x: f64, part: Part) -> impl Iterator<Item = f64> {
        let along = self.towards * x;
        let radius = self.parameter_km - self.eccentricity * along;
        let square = (radius - along) * (radius + along);
        let height = (0.0 <= radius && 0.0 <= square).then(|| square.sqrt());
        [height, height.map(|height| -height)]
            .into_iter()
            .flatten()
            .filter(move |height| part.holds(*height))
    }

    /// Places at which the conic crosses the horizontal line at `y` inside a part.
    pub(super) fn at_y(&self, y: f64, part: Part) -> impl Iterator<Item = f64> {
        let Self {
            parameter_km: l,
            eccentricity: e,
            towards,
        } = *self;
        let square = l * l - (1.0 - e) * (1.0 + e) * y * y;
        // The larger root by addition, the other by the product of the two: neither cancels, and e = 1 does no harm.
        let sum = (0.0 <= square && part.holds(y)).then(|| -(l * e + square.sqrt()));
        let roots = sum.map_or([None, None], |sum| {
            [
                Some(sum / ((1.0 - e) * (1.0 + e))),
                Some((y - l) * (y + l) / sum),
            ]
        });
        roots
            .into_iter()
            .flatten()
            .filter(move |x| x.is_finite() && 0.0 <= l - e * x)
            .map(move |x| towards * x)
    }

    /// Direction of the motion at a point of the conic, not normalised: counter-clockwise, perpendicular to the gradient of r + e x.
    pub(super) fn direction(&self, (x, y): (f64, f64)) -> (f64, f64) {
        let radius = x.hypot(y).max(f64::MIN_POSITIVE);
        (-y / radius, x / radius + self.towards * self.eccentricity)
    }

    /// Distance of a point from the conic to first order, km.
    #[cfg(test)]
    pub(super) fn distance_km(&self, (x, y): (f64, f64)) -> f64 {
        let off = x.hypot(y) + self.eccentricity * self.towards * x - self.parameter_km;
        let (u, v) = self.direction((x, y));
        off.abs() / u.hypot(v)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn crossings_lie_on_the_conic() {
        for towards in [1.0, -1.0] {
            for e in [0.0, 0.3, 0.97, 1.0, 1.26, 4.0] {
                let conic = Conic::with_periapsis(1837.4, e, towards);
                let on = |point: (f64, f64)| {
                    let size = point.0.hypot(point.1);
                    assert!(conic.distance_km(point) < 1e-9 * size, "{e} {point:?}");
                };
                for k in -20..=20 {
                    let at = 173.0 * f64::from(k);
                    conic.at_x(at, Part::Whole).for_each(|y| on((at, y)));
                    conic.at_y(at, Part::Whole).for_each(|x| on((x, at)));
                }
                for anomaly in conic.anomalies(Part::Upper, 50) {
                    if let Some((x, y)) = conic.point(anomaly) {
                        assert!(0.0 <= y);
                        on((x, y));
                        // Counter-clockwise: the angular momentum of the direction is positive.
                        let (u, v) = conic.direction((x, y));
                        assert!(0.0 < x * v - y * u);
                    }
                }
            }
        }
    }

    #[test]
    fn apsides_are_where_they_belong() {
        let ellipse = Conic::with_periapsis(2000.0, 0.6, 1.0);
        let mut apsides: Vec<f64> = ellipse.at_y(0.0, Part::Whole).collect();
        apsides.sort_by(f64::total_cmp);
        let off = [
            (apsides[0] / -8000.0 - 1.0).abs(),
            (apsides[1] / 2000.0 - 1.0).abs(),
        ];
        assert!(off.iter().all(|off| *off < 1e-15), "{apsides:?}");
        let hyperbola = Conic::with_periapsis(2000.0, 1.5, 1.0);
        assert_eq!(hyperbola.at_y(0.0, Part::Incoming).count(), 1);
        assert_eq!(hyperbola.at_y(1.0, Part::Incoming).count(), 0);
    }
}
