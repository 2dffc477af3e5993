//! What the plan file means, and how a plan that is wrong is refused.

mod support;

mod contract;
mod faults;
