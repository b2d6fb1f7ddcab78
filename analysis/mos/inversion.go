package mos

import "math"

// Inversion gives the inversion coefficient i = q² + q of a normalised pinch-off
// voltage v = 2q + ln q (charge form; Enz, Krummenacher & Vittoz 1995, EKV 2.6):
// 0.1 and 10 bound moderate inversion.
func Inversion(v float64) float64 {
	q := inversionCharge(v)
	return q*q + q
}

// pinchOff is the inverse of Inversion: v of a coefficient i > 0.
func pinchOff(i float64) float64 {
	q := inversionRoot(i)
	return 2*q + math.Log(q)
}

// inversionRoot is q of i, without cancellation for small i.
func inversionRoot(i float64) float64 {
	return i / (math.Sqrt(i+0.25) + 0.5)
}

// inversionCharge solves 2q + ln q = v to the last digits. Below −40 q equals e^v
// to double precision.
func inversionCharge(v float64) float64 {
	switch {
	case !(v > -40):
		return math.Exp(math.Max(v, -700))
	case v < 1:
		return weakCharge(v)
	case v < 12:
		return moderateCharge(v)
	case v > 1e15:
		return v / 2
	}
	q := (v - roughLog(v/2+0.3)) / 2
	q = (v - roughLog(q)) / 2
	// With q(1 + u) put in, (2q + 1)u = v - 2q - ln q + u²/2 - u³/3 + ..., where u
	// is below 1e-3: one logarithm is enough.
	a := 1 / (2*q + 1)
	r := (v - 2*q - math.Log(q)) * a
	u := r + a*r*r*(0.5-r/3)
	u = r + a*u*u*(0.5-u*(1.0/3-u*0.25))
	return q + q*u
}

// moderateCharge takes Halley's third-order steps on q.
func moderateCharge(v float64) float64 {
	q := (v - roughLog(v/2+0.3)) / 2
	for range 10 {
		newton := (2*q + math.Log(q) - v) * q / (2*q + 1)
		step := newton / (1 + newton/(2*q*(2*q+1)))
		q -= step
		if math.Abs(step) < 1e-6*q {
			break
		}
	}
	return q
}

// weakCharge takes Newton steps on ln q, where the equation is nearly a straight
// line.
func weakCharge(v float64) float64 {
	e := 2 * math.Exp(v)
	y := v - e/(1+e)
	for range 20 {
		e = 2 * math.Exp(y)
		step := (e + y - v) / (e + 1)
		y -= step
		if math.Abs(step) < 1e-9 {
			break
		}
	}
	return math.Exp(y)
}

// roughLog is ln x of a normal number to 5e-4, for a first guess without the
// cost of a logarithm: the exponent, and a cubic in the mantissa.
func roughLog(x float64) float64 {
	bits := math.Float64bits(x)
	m := math.Float64frombits(bits&(1<<52-1) | 1023<<52)
	e := float64(int(bits>>52) - 1023)
	return e*math.Ln2 + (-1.4906 + m*(2.1103+m*(-0.7289+m*0.1097)))
}

// inversion is Inversion over a dual: di/dv = q, from dv/dq = 2 + 1/q.
func inversion(v dual) dual {
	q := inversionCharge(v.v)
	return v.chain(q*q+q, q)
}
