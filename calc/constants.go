package calc

// MolarGasConstant R [J/(mol K)], exact. Source: SI Brochure, 9th edition
// (2019): product of the exact Avogadro and Boltzmann constants.
const MolarGasConstant = 8.31446261815324
