package relax

import "gonum.org/v1/gonum/floats"

// A curvature is the Hessian in m internal coordinates, learned from the
// changes of the gradient.
type curvature struct {
	m  int
	h  []float64 // m*m, symmetric
	y  []float64 // change of the gradient
	hs []float64 // h times the step
}

// guess starts from a diagonal.
func (c *curvature) guess(diagonal []float64) {
	m := len(diagonal)
	c.m, c.h, c.y, c.hs = m, sized(c.h, m*m), sized(c.y, m), sized(c.hs, m)
	clear(c.h)
	for i, k := range diagonal {
		c.h[i*m+i] = k
	}
}

// promise is the change of energy to second order for a step dq, and leaves h dq
// for learn.
func (c *curvature) promise(g, dq []float64) float64 {
	for i := range c.m {
		c.hs[i] = floats.Dot(c.h[i*c.m:i*c.m+c.m], dq)
	}
	return floats.Dot(g, dq) + 0.5*floats.Dot(c.hs, dq)
}

// learn makes h map the step dq of promise to the change from g to g2, where
// the change has curvature enough, and to something between it and what h says
// where not, so that h stays positive.
// Source: BFGS with the damping of M. J. D. Powell (1978) as in J. Nocedal, S. J.
// Wright, Numerical Optimization (2nd ed., 2006), procedure 18.2.
func (c *curvature) learn(dq, g, g2 []float64) {
	floats.SubTo(c.y, g2, g)
	shs, sy := floats.Dot(dq, c.hs), floats.Dot(dq, c.y)
	if !(shs > 0) {
		return // no step
	}
	if sy < 0.2*shs {
		theta := 0.8 * shs / (shs - sy)
		for i, v := range c.hs {
			c.y[i] = theta*c.y[i] + (1-theta)*v
		}
		sy = 0.2 * shs
	}
	for i := range c.m {
		row := c.h[i*c.m : i*c.m+c.m]
		floats.AddScaled(row, c.y[i]/sy, c.y)
		floats.AddScaled(row, -c.hs[i]/shs, c.hs)
	}
}
