package layout_test

import (
	"math"
	"strings"

	"boughwork/geom"
	"boughwork/ground"
)

// builder makes the ground structure of a reference case node by node. Strengths are 1 Pa and loads are in N unless a
// case says otherwise, so that volumes are numbers to be compared with formulas.
type builder struct {
	ground.Structure
	at map[geom.Vec]int
}

// samePlace is the step in m within which two coordinates are one: more than rounding, far less than any spacing here.
const samePlace = 1e-6

func newBuilder() *builder {
	b := &builder{at: map[geom.Vec]int{}}
	b.Material = ground.Material{Name: "unit", Tension: 1, Compression: 1}
	return b
}

// strengths sets the strengths in tension and in compression.
func (b *builder) strengths(tension, compression float64) {
	b.Material.Tension, b.Material.Compression = tension, compression
}

// node returns the node at a place, which is made if it is not there, and holds it in the directions named by held, such
// as "xz".
func (b *builder) node(x, y, z float64, held string) int {
	v := geom.Vec{X: x, Y: y, Z: z}
	place := geom.Vec{X: math.Round(x / samePlace), Y: math.Round(y / samePlace), Z: math.Round(z / samePlace)}
	n, ok := b.at[place]
	if !ok {
		n = len(b.Nodes)
		b.at[place] = n
		b.Nodes = append(b.Nodes, ground.Node{At: v})
	}
	for d, name := range []string{"x", "y", "z"} {
		if strings.Contains(held, name) {
			b.Nodes[n].Fixed[d] = true
		}
	}
	return n
}

// load adds a force to the last case; the first load makes the first case.
func (b *builder) load(n int, fx, fy, fz float64) {
	if len(b.Cases) == 0 {
		b.newCase()
	}
	c := &b.Cases[len(b.Cases)-1]
	c.Loads = append(c.Loads, ground.NodeLoad{Node: n, Force: geom.Vec{X: fx, Y: fy, Z: fz}})
}

// newCase begins a load case.
func (b *builder) newCase() {
	b.Cases = append(b.Cases, ground.Case{Name: "case " + string(rune('A'+len(b.Cases)))})
}

// box makes the nodes of a lattice of the given step, from (x0, y0, z0) in nx, ny and nz steps. The nodes of a box
// without depth in y are held in y: a plane problem.
func (b *builder) box(x0, y0, z0, step float64, nx, ny, nz int) {
	held := ""
	if ny == 0 {
		held = "y"
	}
	for i := range nx + 1 {
		for j := range ny + 1 {
			for k := range nz + 1 {
				b.node(x0+float64(i)*step, y0+float64(j)*step, z0+float64(k)*step, held)
			}
		}
	}
}

// hold holds all nodes that where says in the directions named.
func (b *builder) hold(held string, where func(v geom.Vec) bool) {
	for _, n := range b.Nodes {
		if where(n.At) {
			b.node(n.At.X, n.At.Y, n.At.Z, held)
		}
	}
}

// besselI returns the modified Bessel functions of the first kind I0(m), I1(m) and the integral of I0 from 0 to m, by
// their power series (Abramowitz and Stegun 1964, 9.6.10).
func besselI(m float64) (i0, i1, integral float64) {
	term := 1.0 // (m/2)^2k / k!^2
	for k := 0.0; k < 60; k++ {
		i0 += term
		i1 += term * m / 2 / (k + 1)
		integral += term * m / (2*k + 1)
		term *= m * m / 4 / ((k + 1) * (k + 1))
	}
	return i0, i1, integral
}

// chan1960 returns sigma V / (P h) of the cantilever on two pins 2h apart with its load at distance L, for reach = L/h
// from 1 on: L/h = I0(m) + int_0^m I0, V = 2 P h [(1 + m) I0(m) + m I1(m)].
func chan1960(reach float64) float64 {
	low, high := 0.0, 10.0
	for range 200 {
		m := (low + high) / 2
		if i0, _, integral := besselI(m); i0+integral < reach {
			low = m
		} else {
			high = m
		}
	}
	i0, i1, _ := besselI(low)
	return 2 * ((1+low)*i0 + low*i1)
}

// ring calls f with n places evenly spread on a circle about the z axis.
func ring(n int, radius float64, f func(x, y float64)) {
	for i := range n {
		a := 2 * math.Pi * float64(i) / float64(n)
		f(radius*math.Cos(a), radius*math.Sin(a))
	}
}
