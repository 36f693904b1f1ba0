//! An explicit Runge-Kutta pair with adaptive steps: Dormand & Prince 1980, J. Comput. Appl. Math. 6:19, orders 5 and 4.

/// How exact, and how long a step may be.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Exact {
    /// Error of one step as a share of the value.
    pub relative: f64,
    /// Error of one step, in the unit of the value.
    pub absolute: f64,
    /// Longest step.
    pub longest: f64,
}

/// Steps after which a run is given up: a run of two weeks takes a few hundred.
const MOST_STEPS: usize = 20_000;

/// The run could not be finished within [`MOST_STEPS`], or left the numbers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Stuck;

const A: [[f64; 6]; 6] = [
    [1.0 / 5.0, 0.0, 0.0, 0.0, 0.0, 0.0],
    [3.0 / 40.0, 9.0 / 40.0, 0.0, 0.0, 0.0, 0.0],
    [44.0 / 45.0, -56.0 / 15.0, 32.0 / 9.0, 0.0, 0.0, 0.0],
    [
        19_372.0 / 6561.0,
        -25_360.0 / 2187.0,
        64_448.0 / 6561.0,
        -212.0 / 729.0,
        0.0,
        0.0,
    ],
    [
        9017.0 / 3168.0,
        -355.0 / 33.0,
        46_732.0 / 5247.0,
        49.0 / 176.0,
        -5103.0 / 18_656.0,
        0.0,
    ],
    [
        35.0 / 384.0,
        0.0,
        500.0 / 1113.0,
        125.0 / 192.0,
        -2187.0 / 6784.0,
        11.0 / 84.0,
    ],
];
const C: [f64; 6] = [0.2, 0.3, 0.8, 8.0 / 9.0, 1.0, 1.0];
/// Fifth order less fourth.
const E: [f64; 7] = [
    71.0 / 57_600.0,
    0.0,
    -71.0 / 16_695.0,
    71.0 / 1920.0,
    -17_253.0 / 339_200.0,
    22.0 / 525.0,
    -1.0 / 40.0,
];

/// Carries `y` from `t` to `end`. `slope` is the derivative; `each` sees every accepted step, and may change what the
/// slope rests on before the next.
///
/// # Errors
/// [`Stuck`].
pub fn advance<const N: usize, S>(
    system: &mut S,
    slope: impl Fn(&mut S, f64, &[f64; N]) -> [f64; N],
    mut each: impl FnMut(&mut S, f64, &[f64; N]),
    (mut t, end): (f64, f64),
    y: &mut [f64; N],
    exact: &Exact,
) -> Result<(), Stuck> {
    let mut step = (end - t).min(exact.longest).min(0.002);
    for _ in 0..MOST_STEPS {
        if end - t <= 1e-12 {
            return Ok(());
        }
        step = step.min(exact.longest).min(end - t);
        let mut k = [[0.0; N]; 7];
        k[0] = slope(system, t, y);
        let mut next = *y;
        for (stage, (row, share)) in A.iter().zip(C).enumerate() {
            next = *y;
            for (weight, past) in row.iter().zip(&k).take(stage + 1) {
                for (value, rate) in next.iter_mut().zip(past) {
                    *value += step * weight * rate;
                }
            }
            if let Some(now) = k.get_mut(stage + 1) {
                *now = slope(system, t + share * step, &next);
            }
        }
        let mut worst = 0.0_f64;
        for (i, (before, after)) in y.iter().zip(&next).enumerate() {
            let error: f64 = E
                .iter()
                .zip(&k)
                .map(|(e, k)| e * k.get(i).unwrap_or(&0.0))
                .sum();
            let allowed = exact.absolute + exact.relative * before.abs().max(after.abs());
            let share = (step * error / allowed).abs();
            // `max` would let a value that is no number pass.
            worst = if share.is_nan() {
                f64::INFINITY
            } else {
                worst.max(share)
            };
        }
        if !worst.is_finite() {
            step *= 0.1;
            if step < 1e-12 {
                return Err(Stuck);
            }
            continue;
        }
        if worst <= 1.0 {
            t += step;
            *y = next;
            each(system, t, y);
        }
        step *= (0.9 * worst.max(1e-10).powf(-0.2)).clamp(0.2, 5.0);
    }
    Err(Stuck)
}

#[cfg(test)]
mod tests {
    use super::*;

    const FINE: Exact = Exact {
        relative: 1e-8,
        absolute: 1e-10,
        longest: 10.0,
    };

    #[test]
    fn a_known_solution_is_met() {
        // A damped swing: y'' = -y - 0.2 y'.
        let mut y = [1.0, 0.0];
        let done = advance(
            &mut (),
            |(), _, y: &[f64; 2]| [y[1], -y[0] - 0.2 * y[1]],
            |(), _, _| {},
            (0.0, 20.0),
            &mut y,
            &FINE,
        );
        let w = (1.0_f64 - 0.01).sqrt();
        let exact = (-2.0_f64).exp() * ((20.0 * w).cos() + 0.1 / w * (20.0 * w).sin());
        assert!(
            done.is_ok() && (y[0] - exact).abs() < 1e-6,
            "{y:?} not {exact}"
        );
    }

    #[test]
    fn what_a_linear_sum_keeps_is_kept_to_the_last_digit() {
        let mut y = [3.0, 1.0, 0.0];
        let done = advance(
            &mut (),
            |(), _, y: &[f64; 3]| [-y[0] * y[1], y[0] * y[1] - y[1], y[1]],
            |(), _, _| {},
            (0.0, 15.0),
            &mut y,
            &Exact {
                relative: 1e-3,
                ..FINE
            },
        );
        assert!(done.is_ok() && (y.iter().sum::<f64>() - 4.0).abs() < 1e-12);
    }

    #[test]
    fn a_slope_that_is_no_number_is_given_up() {
        let mut y = [1.0];
        let done = advance(
            &mut (),
            |(), _, _: &[f64; 1]| [f64::NAN],
            |(), _, _| {},
            (0.0, 1.0),
            &mut y,
            &FINE,
        );
        assert_eq!(done, Err(Stuck));
    }

    #[test]
    fn agrees_with_a_maintained_solver() {
        use ode_solvers::{Dopri5, SVector, System};
        struct Prey;
        impl System<f64, SVector<f64, 2>> for Prey {
            fn system(&self, _: f64, y: &SVector<f64, 2>, dy: &mut SVector<f64, 2>) {
                dy[0] = 1.1 * y[0] - 0.4 * y[0] * y[1];
                dy[1] = 0.1 * y[0] * y[1] - 0.4 * y[1];
            }
        }
        let mut theirs = Dopri5::new(
            Prey,
            0.0,
            30.0,
            0.1,
            SVector::<f64, 2>::new(10.0, 5.0),
            1e-9,
            1e-9,
        );
        assert!(theirs.integrate().is_ok());
        let end = theirs.y_out().last().copied();
        let mut y = [10.0, 5.0];
        let done = advance(
            &mut (),
            |(), _, y: &[f64; 2]| {
                [
                    1.1 * y[0] - 0.4 * y[0] * y[1],
                    0.1 * y[0] * y[1] - 0.4 * y[1],
                ]
            },
            |(), _, _| {},
            (0.0, 30.0),
            &mut y,
            &FINE,
        );
        assert!(done.is_ok());
        assert!(
            end.is_some_and(|e| (e[0] - y[0]).abs() < 1e-5 && (e[1] - y[1]).abs() < 1e-5),
            "{end:?} and {y:?}"
        );
    }
}
