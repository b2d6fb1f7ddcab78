package mos

// Physical constants: CODATA 2018 and the values of the Berkeley model
// publications, UCB/ERL M80/7 and the BSIM manuals.
const (
	charge      = 1.602176634e-19    // C
	boltzmann   = 1.380649e-23       // J/K
	kOverQ      = boltzmann / charge // V/K
	epsVacuum   = 8.8541878128e-12   // F/m
	epsSilicon  = 11.7 * epsVacuum
	epsOxide    = 3.9 * epsVacuum
	zeroCelsius = 273.15 // K
	refKelvin   = 300.15 // K, where ni is quoted
	niRef       = 1.45e10
	perCubicCm  = 1e6  // cm⁻³ to m⁻³
	perSquareCm = 1e4  // cm⁻² to m⁻²
	squareCm    = 1e-4 // cm² to m²
)

// DefaultTNOM is the temperature in °C that a card's numbers hold for when it
// does not state TNOM.
const DefaultTNOM = 27.0
