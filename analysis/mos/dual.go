package mos

import "math"

// dual is a value with its partial derivatives by Vgs, Vds and Vbs. The model
// equations are written once over duals, so that gm, gds and gmb are the exact
// derivatives of the current and cannot drift from it (forward-mode automatic
// differentiation). Four fields keep it in registers.
type dual struct{ v, g, d, b float64 }

// bias gives the three independent voltages as duals.
func bias(vgs, vds, vbs float64) (gs, ds, bs dual) {
	return dual{v: vgs, g: 1}, dual{v: vds, d: 1}, dual{v: vbs, b: 1}
}

func constant(v float64) dual { return dual{v: v} }

func (x dual) add(y dual) dual { return dual{x.v + y.v, x.g + y.g, x.d + y.d, x.b + y.b} }
func (x dual) sub(y dual) dual { return dual{x.v - y.v, x.g - y.g, x.d - y.d, x.b - y.b} }
func (x dual) neg() dual       { return dual{-x.v, -x.g, -x.d, -x.b} }

// plus and times take a plain number.
func (x dual) plus(k float64) dual  { return dual{x.v + k, x.g, x.d, x.b} }
func (x dual) times(k float64) dual { return dual{x.v * k, x.g * k, x.d * k, x.b * k} }

func (x dual) mul(y dual) dual {
	return dual{x.v * y.v, x.g*y.v + x.v*y.g, x.d*y.v + x.v*y.d, x.b*y.v + x.v*y.b}
}

func (x dual) div(y dual) dual {
	r := 1 / y.v
	q := x.v * r
	return dual{q, (x.g - q*y.g) * r, (x.d - q*y.d) * r, (x.b - q*y.b) * r}
}

// inv is 1/x.
func (x dual) inv() dual {
	r := 1 / x.v
	return x.chain(r, -r*r)
}

// chain applies a function of one variable, given its value and slope at x.
func (x dual) chain(f, slope float64) dual {
	return dual{f, slope * x.g, slope * x.d, slope * x.b}
}

func (x dual) square() dual { return x.chain(x.v*x.v, 2*x.v) }

// sqrt is flat at and below zero, where the true slope does not exist.
func (x dual) sqrt() dual {
	if x.v <= 0 {
		return dual{}
	}
	s := math.Sqrt(x.v)
	return x.chain(s, 0.5/s)
}

// pow is x^p for x > 0, and zero at and below it.
func (x dual) pow(p float64) dual {
	if x.v <= 0 {
		return dual{}
	}
	f := math.Pow(x.v, p)
	return x.chain(f, p*f/x.v)
}

// expMax bounds the argument of every exponential: e^±300 stays far inside a
// float64 even after several multiplications.
const expMax = 300

// exp is bounded: beyond ±expMax it is flat.
func (x dual) exp() dual {
	switch {
	case x.v > expMax:
		return constant(math.Exp(expMax))
	case x.v < -expMax:
		return constant(math.Exp(-expMax))
	}
	e := math.Exp(x.v)
	return x.chain(e, e)
}

func (x dual) log() dual { return x.chain(math.Log(x.v), 1/x.v) }

func (x dual) log1p() dual { return x.chain(math.Log1p(x.v), 1/(1+x.v)) }

func (x dual) tanh() dual {
	t := math.Tanh(x.v)
	return x.chain(t, (1-t)*(1+t))
}

// softplus is ln(1+e^x) without overflow, and without loss for small e^x.
func (x dual) softplus() dual {
	if x.v > 0 {
		e := math.Exp(-x.v)
		return x.chain(x.v+math.Log1p(e), 1/(1+e))
	}
	e := math.Exp(x.v)
	return x.chain(math.Log1p(e), e/(1+e))
}

// smallest and largest choose one side whole, value and slopes.
func smallest(x, y dual) dual {
	if y.v < x.v {
		return y
	}
	return x
}

func largest(x, y dual) dual {
	if y.v > x.v {
		return y
	}
	return x
}

// finite tells whether the value and every slope are usable numbers.
func (x dual) finite() bool {
	s := x.v + x.g + x.d + x.b
	return s-s == 0
}
