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

// inversionCharge solves 2q + ln q = v. Below −40 q equals e^v to double
// precision. In weak inversion Newton runs on ln q, where the equation is nearly
// a straight line; above, Halley's third-order step runs on q.
func inversionCharge(v float64) float64 {
	switch {
	case !(v > -40):
		return math.Exp(math.Max(v, -700))
	case v < 1:
		return weakCharge(v)
	case v > 1e15:
		return v / 2
	}
	q := (v - roughLog(v/2+0.3)) / 2
	q = (v - roughLog(q)) / 2
	for range 10 {
		g := 2*q + math.Log(q) - v
		newton := g * q / (2*q + 1)
		step := newton / (1 + newton/(2*q*(2*q+1)))
		q -= step
		if s := math.Abs(step / q); s*s*s < 1e-16 {
			break
		}
	}
	return q
}

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

// roughLog is ln x to 1e-4, for a first guess without the cost of a logarithm.
func roughLog(x float64) float64 {
	const c = math.Sqrt2 / 2
	m, e := math.Frexp(x)
	z := (m - c) / (m + c)
	return float64(e)*math.Ln2 - math.Ln2/2 + 2*z + z*z*z*2/3
}

// inversion is Inversion over a dual: di/dv = q, from dv/dq = 2 + 1/q.
func inversion(v dual) dual {
	q := inversionCharge(v.v)
	return v.chain(q*q+q, q)
}
