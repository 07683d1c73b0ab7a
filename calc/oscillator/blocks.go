package oscillator

import "math"

// Peaks between samples are dear to find, and nearly all steps hold none that counts. A
// first pass, the kernel, leaves the maxima at the samples by blocks of steps. A
// second one crosses again only the blocks where a bound reaches as far as the largest value
// known; in them a step is put aside where the cubic through both its ends may exceed
// it. The cubics raise what is known, and so only few steps are left for the exact search.

// stride is the number of steps in a block.
const stride = 64

// ground is a record with what bounds its blocks. Block k crosses the steps that begin at
// samples k stride to (k+1) stride - 1.
type ground struct {
	a      []float64
	dt     float64
	blocks []block
}

// block is the largest |ag| in a block and the largest |slope| of ag.
type block struct{ most, slope float64 }

func survey(a []float64, dt float64) *ground {
	g := &ground{a: a, dt: dt, blocks: make([]block, (len(a)-1+stride-1)/stride)}
	for k := range g.blocks {
		b := &g.blocks[k]
		part := g.samples(k)
		b.most = math.Abs(part[0])
		for i := 1; i < len(part); i++ {
			b.most = max(b.most, math.Abs(part[i]))
			b.slope = max(b.slope, math.Abs(part[i]-part[i-1])/dt)
		}
	}
	return g
}

// samples of a block, those at both ends included.
func (g *ground) samples(k int) []float64 {
	return g.a[k*stride : min((k+1)*stride, len(g.a)-1)+1]
}

// passed is what the first pass leaves of a block: the state at its beginning and the maxima.
type passed struct{ x, y, mx, my, mq float64 }

// peaks is the whole answer for one oscillator.
func (s *stepper) peaks(g *ground, work []passed) Peaks {
	b := &search{omega: s.omega, z: s.z}
	var x, y float64
	if s.omega*s.dt > rigid {
		x, y = s.everywhere(g, b)
	} else {
		x, y = s.blockwise(g, work, b)
	}
	// Free vibration: every largest value comes within the first damped period,
	// or, near critical damping, long before four undamped ones.
	b.t0 = float64(len(g.a)-1) * s.dt
	b.motion = state{u: s.su * x, v: s.sv * y}
	period := 2 * math.Pi / s.omega
	b.within(0, min(period/math.Sqrt((1-s.z)*(1+s.z)), 4*period))
	return Peaks{U: b.u.size, V: b.v.size, A: b.a.size, TU: b.u.at, TV: b.v.at, TA: b.a.at}
}

// everywhere searches every step, for a rigid oscillator, and returns the last state.
func (s *stepper) everywhere(g *ground, b *search) (x, y float64) {
	for i := 1; i < len(g.a); i++ {
		b.t0 = float64(i-1) * s.dt
		b.motion = state{u: s.su * x, v: s.sv * y, p: g.a[i-1], slope: (g.a[i] - g.a[i-1]) / s.dt}
		x, y = s.step(x, y, g.a[i-1], g.a[i])
		t := float64(i) * s.dt
		b.u.offer(s.su*x, t)
		b.v.offer(s.sv*y, t)
		b.a.offer(s.sa*s.total(x, y), t)
		if b.bound(b.motion, s.dt, s.su*x, s.sv*y) {
			b.within(0, s.dt)
		}
	}
	return x, y
}

// blockwise is the two passes; it returns the last state.
func (s *stepper) blockwise(g *ground, work []passed, b *search) (x, y float64) {
	var mx, my, mq float64
	for k := range work {
		p := passed{x: x, y: y}
		x, y, p.mx, p.my, p.mq = s.maxima(g.samples(k), x, y)
		mx, my, mq = max(mx, p.mx), max(my, p.my), max(mq, p.mq)
		work[k] = p
	}
	b.u.size, b.v.size, b.a.size = s.su*mx, s.sv*my, s.sa*mq
	c := candidates{search: b, ground: g}
	c.known = [3]float64{b.u.size, b.v.size, b.a.size}
	w, h := s.omega, s.dt
	d2 := 1 + 2*s.z // |q''| <= d2 w² Q, |q'''| <= d3 w³ Q and so on, from q'' = -2 z w q' - w² q
	d3 := 1 + 2*s.z*d2
	d4 := d2 + 2*s.z*d3
	bulge := h * h / 8
	rest := h * h * h * h / 384
	for k, p := range work {
		u, v, a := s.su*p.mx, s.sv*p.my, s.sa*p.mq
		size := s.size(g.blocks[k], v, a)
		if u+bulge*size < c.known[0] && v+bulge*w*size < c.known[1] && a+bulge*w*w*d2*size < c.known[2] {
			continue
		}
		// A function lies within h⁴/384 times its largest fourth derivative of the cubic
		// through the ends of the step with its slopes there.
		c.rest = [3]float64{rest * w * w * d2 * size, rest * w * w * w * d3 * size, rest * w * w * w * w * d4 * size}
		s.inspect(k, p, &c)
	}
	c.settle()
	return x, y
}

// size is Q (see bound) for all steps of a block whose largest velocity and total
// acceleration are v and a.
func (s *stepper) size(b block, v, a float64) float64 {
	q := b.most + a
	return q + (b.slope+2*s.z*s.omega*q+s.omega*s.omega*v)/s.omega
}

// inspect crosses a block again and puts its steps that count aside.
func (s *stepper) inspect(k int, p passed, c *candidates) {
	w, h := s.omega, s.dt
	c1, c2 := 2*s.z*w*h, w*w*h
	x, y := p.x, p.y
	part := c.ground.samples(k)
	u0, v0, a0 := s.su*x, s.sv*y, s.sa*s.total(x, y)
	q0 := part[0] - a0 // acceleration relative to the ground
	g0 := c1*q0 + c2*v0
	for i := 1; i < len(part); i++ {
		x, y = s.step(x, y, part[i-1], part[i])
		u1, v1, a1 := s.su*x, s.sv*y, s.sa*s.total(x, y)
		q1 := part[i] - a1
		g1 := c1*q1 + c2*v1 // the slope of the total acceleration, times h
		t := float64(k*stride+i) * h
		c.search.u.offer(u1, t)
		c.search.v.offer(v1, t)
		c.search.a.offer(a1, t)
		inU := reach(u0, u1, h*v0, h*v1)+c.rest[0] > c.known[0]
		inV := reach(v0, v1, h*q0, h*q1)+c.rest[1] > c.known[1]
		inA := reach(a0, a1, g0, g1)+c.rest[2] > c.known[2]
		if inU || inV || inA {
			n := candidate{step: k*stride + i - 1, u: u0, v: v0}
			if inU {
				n.top[0] = c.top(0, u0, u1, h*v0, h*v1)
			}
			if inV {
				n.top[1] = c.top(1, v0, v1, h*q0, h*q1)
			}
			if inA {
				n.top[2] = c.top(2, a0, a1, g0, g1)
			}
			c.put(n)
		}
		u0, v0, a0, q0, g0 = u1, v1, a1, q1, g1
	}
}

// candidates are the steps that may hold a maximum.
type candidates struct {
	search *search
	ground *ground
	known  [3]float64 // what the maxima of u, v and total acceleration reach at least
	rest   [3]float64 // how far they may lie from their cubics in the present block
	list   []candidate
}

// candidate is a step by its first sample, with the state there.
type candidate struct {
	step int
	u, v float64
	top  [3]float64 // what may be reached in it; 0 where that does not count
}

// top is what a quantity may reach in a step, by its values and slopes times h at both
// ends, or 0 where more is known already. It raises what is known.
func (c *candidates) top(i int, f0, f1, d0, d1 float64) float64 {
	size := crest(f0, f1, d0, d1)
	if size+c.rest[i] <= c.known[i]*(1+slack) {
		return 0
	}
	const rounding = 1e-12
	c.known[i] = max(c.known[i], (size-c.rest[i])*(1-rounding))
	return size + c.rest[i]
}

// put keeps a candidate, if it is one.
func (c *candidates) put(n candidate) {
	if n.top == [3]float64{} {
		return
	}
	if len(c.list) == 1024 {
		c.settle()
	}
	c.list = append(c.list, n)
}

// settle searches the candidates that still count.
func (c *candidates) settle() {
	b := c.search
	h := c.ground.dt
	for _, n := range c.list {
		var wanted [3]bool
		for i, size := range [3]float64{b.u.size, b.v.size, b.a.size} {
			wanted[i] = n.top[i] >= c.known[i] && n.top[i] > size*(1+slack)
		}
		if wanted == [3]bool{} {
			continue
		}
		p := c.ground.a[n.step]
		b.t0 = float64(n.step) * h
		b.motion = state{u: n.u, v: n.v, p: p, slope: (c.ground.a[n.step+1] - p) / h}
		if b.omega*h > 1 {
			b.within(0, h)
		} else {
			b.turn(b.motion, 0, h, wanted)
		}
	}
	c.list = c.list[:0]
	c.known = [3]float64{max(c.known[0], b.u.size), max(c.known[1], b.v.size), max(c.known[2], b.a.size)}
}

// reach bounds the cubic with these end values, and slopes d0 and d1 for a step of 1: it is
// the chord and x (1-x) times a mean of both slopes against it.
func reach(f0, f1, d0, d1 float64) float64 {
	d := f1 - f0
	return max(math.Abs(f0), math.Abs(f1)) + max(math.Abs(d0-d), math.Abs(d1-d))/4
}

// crest is the largest absolute value of that cubic on the step.
func crest(f0, f1, d0, d1 float64) float64 {
	d := f1 - f0
	c2, c3 := 3*d-2*d0-d1, d0+d1-2*d
	peak := max(math.Abs(f0), math.Abs(f1))
	disc := c2*c2 - 3*c3*d0
	if disc < 0 {
		return peak
	}
	q := -(c2 + math.Copysign(math.Sqrt(disc), c2)) // the slope is d0 + 2 c2 x + 3 c3 x²
	for _, x := range [2]float64{d0 / q, q / (3 * c3)} {
		if x > 0 && x < 1 {
			peak = max(peak, math.Abs(f0+x*(d0+x*(c2+x*c3))))
		}
	}
	return peak
}
