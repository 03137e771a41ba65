// Package calibrate fits a survey to the steady model: one estimate over all
// rounds together, with every shared error as an unknown of its own.
//
// # The estimate
//
// With y the heads that were read, h(theta) what the steady model says they
// should be, and R the variances of the readings' own errors, the estimate
// minimises
//
//	Phi(theta) = || R^(-1/2) (y - h(theta)) ||^2 + sum over k of ((theta_k - m_k)/s_k)^2
//
// (maximum a posteriori; Tarantola 2005, section 3.2). Heads and flows are not
// unknowns: given theta the steady model gives them exactly, so mass balance
// cannot be violated. The unknowns theta are
//
//   - ln roughness (or ln C) of each pipe, a common ln factor of each pipe group
//     whose expected values are those of new pipe, and of each kind of fitting
//     whose coefficients came from the built-in table;
//   - ln K of each fitting, the head factor of each machine;
//   - draw-offs and reservoir levels that carry a standard uncertainty;
//   - every shared error: an offset for each gauge, a gain for a flow meter that
//     states one, a level error for each tap, the barometer of a round that
//     states none, the profile factor at each pitot tap.
//
// Each has a prior row: the scatter of sound items. A fault is never absorbed by
// widening a prior; it is a hypothesis of its own (package calibrate/fault).
//
// # Units and signs
//
// SI. Inside the solver every unknown is scaled by its prior standard deviation,
// so that u_k = (theta_k - m_k)/s_k; a prior row is then u_k itself. An offset is
// shown minus true, a level error recorded minus true, a draw-off positive out
// of the system.
//
// The package opens no files, prints nothing and knows no clock.
package calibrate
