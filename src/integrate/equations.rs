//! A section's system behind diffsol's traits (`docs/design/integrator.md`).

use std::cell::Cell;

use diffsol::{
    ConstantOp, NalgebraContext, NalgebraVec, NonLinearOp, NonLinearOpJacobian, OdeEquations, OdeEquationsRef, Op,
    ParameterisedOp, UnitCallable,
};

use super::matrix::{BlockTridiagonal, Pattern};
use super::stop::Limit;
use crate::discretise::rhs::System;

type V = NalgebraVec<f64>;
type Unit<'a> = ParameterisedOp<'a, UnitCallable<BlockTridiagonal>>;

/// The equations of one section, its inlet state and its limits.
#[derive(Debug)]
pub struct Equations<'s, 'p> {
    /// The section.
    pub system: &'s System<'p>,
    /// State at the section's inlet.
    pub inlet: Vec<f64>,
    /// Limits that may be left.
    pub limits: Vec<Limit>,
    /// Right-hand sides evaluated.
    pub right_hand_sides: Cell<usize>,
    /// Jacobians evaluated.
    pub jacobians: Cell<usize>,
    context: NalgebraContext,
}

impl<'s, 'p> Equations<'s, 'p> {
    /// The equations of a section from its inlet state.
    #[must_use]
    pub fn new(system: &'s System<'p>, inlet: Vec<f64>, limits: Vec<Limit>) -> Self {
        Self {
            system,
            inlet,
            limits,
            right_hand_sides: Cell::new(0),
            jacobians: Cell::new(0),
            context: NalgebraContext::default(),
        }
    }
}

impl Op for Equations<'_, '_> {
    type T = f64;
    type V = V;
    type M = BlockTridiagonal;
    type C = NalgebraContext;
    fn context(&self) -> &NalgebraContext {
        &self.context
    }
    fn nstates(&self) -> usize {
        self.inlet.len()
    }
    fn nout(&self) -> usize {
        self.inlet.len()
    }
    fn nparams(&self) -> usize {
        0
    }
}

impl NonLinearOp for Equations<'_, '_> {
    fn call_inplace(&self, state: &V, _z: f64, slopes: &mut V) {
        self.right_hand_sides.set(self.right_hand_sides.get() + 1);
        self.system.slopes(state.batch_as_slice(0), slopes.batch_as_mut_slice(0));
    }
}

impl NonLinearOpJacobian for Equations<'_, '_> {
    fn jac_mul_inplace(&self, _state: &V, _z: f64, _v: &V, _out: &mut V) {
        unreachable!("only sensitivities ask for this product")
    }
    fn jacobian_inplace(&self, state: &V, _z: f64, jacobian: &mut BlockTridiagonal) {
        self.jacobians.set(self.jacobians.get() + 1);
        let blocks = jacobian.as_blocks_mut().expect("the pattern below makes diffsol hold blocks");
        self.system.jacobian(state.batch_as_slice(0), blocks);
    }
    fn jacobian_sparsity(&self) -> Option<Pattern> {
        Some(Pattern(self.system.shape()))
    }
}

impl ConstantOp for Equations<'_, '_> {
    /// The inlet.
    fn call_inplace(&self, _z: f64, state: &mut V) {
        state.batch_as_mut_slice(0).copy_from_slice(&self.inlet);
    }
}

/// The limits as diffsol's event functions.
#[derive(Debug)]
pub struct Limits<'a, 's, 'p>(&'a Equations<'s, 'p>);

impl Op for Limits<'_, '_, '_> {
    type T = f64;
    type V = V;
    type M = BlockTridiagonal;
    type C = NalgebraContext;
    fn context(&self) -> &NalgebraContext {
        &self.0.context
    }
    fn nstates(&self) -> usize {
        self.0.inlet.len()
    }
    fn nout(&self) -> usize {
        self.0.limits.len()
    }
    fn nparams(&self) -> usize {
        0
    }
}

impl NonLinearOp for Limits<'_, '_, '_> {
    fn call_inplace(&self, state: &V, _z: f64, distances: &mut V) {
        let state = state.batch_as_slice(0);
        for (distance, limit) in distances.batch_as_mut_slice(0).iter_mut().zip(&self.0.limits) {
            *distance = limit.distance(self.0.system, state);
        }
    }
}

impl<'a> OdeEquationsRef<'a> for Equations<'_, '_> {
    type Rhs = &'a Self;
    type Init = &'a Self;
    type Root = Limits<'a, 'a, 'a>;
    type Mass = Unit<'a>;
    type Out = Unit<'a>;
    type Reset = Unit<'a>;
}

impl OdeEquations for Equations<'_, '_> {
    fn rhs(&self) -> &Self {
        self
    }
    fn mass(&self) -> Option<Unit<'_>> {
        None
    }
    fn init(&self) -> &Self {
        self
    }
    fn root(&self) -> Option<Limits<'_, '_, '_>> {
        Some(Limits(self))
    }
    fn set_params(&mut self, _parameters: &V) {}
    fn get_params(&self, _parameters: &mut V) {}
}
