//! What the integrator integrates: an autonomous system whose right-hand side may switch at events.

use crate::scalar::Scalar;

/// Which of the system's right-hand sides is in force: bit `i` is set while switching function `i` is positive.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Mode(pub u32);

impl Mode {
    /// Whether bit `index` is set.
    #[inline(always)]
    pub fn is_set(self, index: usize) -> bool {
        self.0 >> index & 1 == 1
    }

    /// The mode with bit `index` flipped.
    pub fn toggled(self, index: usize) -> Mode {
        Mode(self.0 ^ (1 << index))
    }
}

/// What happens where an event function changes sign.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum EventKind {
    /// The right-hand side changes: the step is repeated to end on the event, sensitivities jump, the mode bit
    /// flips.
    Switch,
    /// Integration ends there.
    Stop,
}

/// An autonomous system `y' = rates(mode, y)` of `N` equations in the scalar `T`.
pub trait Flow<T: Scalar, const N: usize> {
    /// Right-hand side.
    fn rates(&self, mode: Mode, y: &[T; N]) -> [T; N];

    /// Number of event functions, at most 32.
    fn events(&self) -> usize {
        0
    }

    /// Value of event function `index` < [`Flow::events`].
    fn event(&self, index: usize, _y: &[T; N]) -> T {
        unreachable!("event {index} of a system without events")
    }

    /// What a sign change of event function `index` does.
    fn kind(&self, _index: usize) -> EventKind {
        EventKind::Switch
    }

    /// Whether event function `index` matters in `mode`; switches that do not matter are not located.
    fn watches(&self, _mode: Mode, _index: usize) -> bool {
        true
    }
}
