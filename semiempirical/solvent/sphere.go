package solvent

import (
	_ "embed"
	"math"
	"sync"
)

//go:embed data/lebedev.json
var lebedevJSON []byte

// A direction is a point of a quadrature on the unit sphere.
type direction struct {
	n      [3]float64
	weight float64 // all weights sum to 1
}

// directions makes the points of the Lebedev quadrature once, in an order in
// which most points are near the one before.
var directions = sync.OnceValue(func() []direction {
	var file struct {
		About, Source   string
		Points          int
		Axes, Diagonals float64
		TwiceA          [][2]float64 `json:"twice_a"`
		InPlane         [][2]float64 `json:"in_plane"`
		General         [][3]float64
		Orbits          map[string]string
	}
	decode("lebedev.json", lebedevJSON, &file)
	points := orbit(nil, 1, 0, 0, file.Axes)
	third := 1 / math.Sqrt(3)
	points = orbit(points, third, third, third, file.Diagonals)
	for _, o := range file.TwiceA {
		points = orbit(points, o[0], o[0], math.Sqrt(1-2*o[0]*o[0]), o[1])
	}
	for _, o := range file.InPlane {
		points = orbit(points, o[0], math.Sqrt(1-o[0]*o[0]), 0, o[1])
	}
	for _, o := range file.General {
		points = orbit(points, o[0], o[1], math.Sqrt(1-o[0]*o[0]-o[1]*o[1]), o[2])
	}
	if len(points) != file.Points {
		panic("solvent: lebedev.json: orbits do not give the number of points")
	}
	return chain(points)
})

// orbit appends the images of (a, b, c) under the octahedral group: all orders
// and signs of its coordinates, each point once.
func orbit(points []direction, a, b, c, weight float64) []direction {
	first := len(points)
	for _, p := range [...][3]float64{{a, b, c}, {b, c, a}, {c, a, b}, {a, c, b}, {b, a, c}, {c, b, a}} {
		for signs := range 8 {
			n := p
			for k := range n {
				if signs>>k&1 == 1 {
					n[k] = -n[k]
				}
			}
			if !holds(points[first:], n) {
				points = append(points, direction{n: n, weight: weight})
			}
		}
	}
	return points
}

func holds(points []direction, n [3]float64) bool {
	for _, p := range points {
		if p.n == n { // 0 equals -0
			return true
		}
	}
	return false
}

// chain orders points so that each is followed by the nearest of those left.
func chain(points []direction) []direction {
	for i := 1; i < len(points); i++ {
		at, best := points[i-1].n, i
		for j := i; j < len(points); j++ {
			if dot(at, points[j].n) > dot(at, points[best].n) {
				best = j
			}
		}
		points[i], points[best] = points[best], points[i]
	}
	return points
}

func dot(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }
