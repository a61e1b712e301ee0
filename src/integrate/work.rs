//! Counters of work: what a run cost, without a clock.

/// Work done by a run.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Work {
    /// Accepted steps.
    pub steps: usize,
    /// Right-hand sides.
    pub right_hand_sides: usize,
    /// Jacobians.
    pub jacobians: usize,
    /// Factorisations.
    pub factorisations: usize,
    /// Newton iterations.
    pub newton_iterations: usize,
    /// Newton iterations that did not converge.
    pub newton_failures: usize,
    /// Steps that were too inexact.
    pub error_failures: usize,
}

impl Work {
    /// Adds the work of another section.
    pub fn add(&mut self, other: Self) {
        self.steps += other.steps;
        self.right_hand_sides += other.right_hand_sides;
        self.jacobians += other.jacobians;
        self.factorisations += other.factorisations;
        self.newton_iterations += other.newton_iterations;
        self.newton_failures += other.newton_failures;
        self.error_failures += other.error_failures;
    }
}
