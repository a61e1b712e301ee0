//! Case B: styrene with a little initiator, parabolic profile, jacket.

use super::table::{Row, check_extrapolated, check_grid, rows, with_places};
use crate::support::{Case, Ran};

/// Figure, converged value, errors at N = 40 and N = 80.
pub const TABLE: &str = "
X           0.44994393   +1.3e-05 +3.4e-06
Mn          59558.334    +2.8e+00 +7.1e-01
Mw          158857.98    -1.6e+01 -4.0e+00
PDI         2.6672670    -4.0e-04 -1.0e-04
Tcup        360.71926    +7.8e-05 +2.0e-05
z_hot       1.7423855    -2.2e-04 -5.4e-05
T_hot       384.25955    +2.9e-04 +7.2e-05
Xcup@1.5    0.18350829   +2.6e-07 +8.1e-08
Tcup@1.5    373.60168    -5.3e-03 -1.3e-03
T@1.5,0     382.84919    +2.5e-03 +6.2e-04
T@1.5,0.5   375.37203    -2.6e-04 -6.4e-05
T@1.5,0.9   362.83661    -2.7e-03 -6.8e-04
X@1.5,0     0.15290456   +1.7e-05 +4.3e-06
X@1.5,0.5   0.15757378   +2.0e-05 +5.1e-06
X@1.5,0.9   0.28795512   -1.0e-04 -2.5e-05
Twall@1.5   359.53079    -9.3e-05 -2.3e-05
qwall@1.5   414.23641    -2.8e-02 -6.9e-03
Xcup@3      0.33911385   -2.3e-05 -5.7e-06
Tcup@3      365.04474    -2.8e-03 -6.9e-04
T@3,0       368.66675    -8.9e-04 -2.2e-04
T@3,0.5     365.86754    -6.3e-04 -1.6e-04
T@3,0.9     360.39147    -9.4e-04 -2.4e-04
X@3,0       0.28004447   -1.9e-06 -4.7e-07
X@3,0.5     0.30886661   -3.9e-05 -9.9e-06
X@3,0.9     0.45696431   -7.6e-05 -1.9e-05
Twall@3     358.81733    -2.9e-05 -7.1e-06
qwall@3     200.19802    -8.7e-03 -2.1e-03
Xcup@6      0.44994393   +1.3e-05 +3.4e-06
Tcup@6      360.71926    +7.8e-05 +2.0e-05
T@6,0       361.87390    +9.3e-04 +2.3e-04
T@6,0.5     361.03317    +9.6e-04 +2.4e-04
T@6,0.9     359.06142    +1.9e-04 +4.7e-05
X@6,0       0.33903471   +1.4e-05 +3.5e-06
X@6,0.5     0.42566793   -7.5e-05 -1.9e-05
X@6,0.9     0.57372270   +2.6e-05 +6.6e-06
Twall@6     358.42567    +1.0e-04 +2.5e-05
qwall@6     82.702339    +3.0e-02 +7.6e-03
";

fn run(rows: &[Row], n: usize) -> Ran {
    with_places(Case::file("cases/case_b.yaml"), rows).tubes(n).run()
}

#[test]
fn case_b_at_40_tubes_has_no_more_than_its_own_error() {
    let rows = rows(TABLE);
    check_grid(&run(&rows, 40), &rows, 40);
}

#[test]
fn case_b_at_80_tubes_has_no_more_than_its_own_error() {
    let rows = rows(TABLE);
    check_grid(&run(&rows, 80), &rows, 80);
}

#[test]
fn case_b_extrapolated_meets_the_converged_values() {
    let rows = rows(TABLE);
    let case = with_places(Case::file("cases/case_b.yaml"), &rows).tolerance(1e-9);
    let [at_80, at_160] = [80, 160].map(|n| case.clone().tubes(n).run());
    // Twice what was reached when the values were made, 1e-6 and 3e-6 K.
    check_extrapolated(&at_80, &at_160, &rows, 2e-6, 6e-6);
}
