package linalg

// rotations waits with plane rotations of the rows of a matrix until there are
// enough to be worth a pass through it: then they are applied to one strip of
// columns after the other, which stays in the cache.
type rotations struct {
	sweeps []sweep
	cs     []float64 // cosine, sine of each rotation of each sweep
}

// A sweep rotates rows first and first+step, then first+step and first+2 step,
// and so on, count times.
type sweep struct {
	first, step, count int
}

// maxRotations is how many wait at most.
const maxRotations = 16384

// newRotations has room for sweeps over n rows.
func newRotations(n int) *rotations {
	room := maxRotations + n
	return &rotations{sweeps: make([]sweep, 0, room/2), cs: make([]float64, 0, 2*room)}
}

// begin starts a sweep and flushes before if it might not fit; z has rows of
// ld numbers, of which the first columns count.
func (r *rotations) begin(first, step int, z []float64, ld, columns int) {
	if len(r.cs) >= 2*maxRotations || len(r.sweeps) == cap(r.sweeps) {
		r.flush(z, ld, columns)
	}
	r.sweeps = append(r.sweeps, sweep{first: first, step: step})
}

// add appends a rotation with cosine c and sine s to the sweep: of two rows x
// and y, x becomes c x + s y, and y becomes c y - s x.
func (r *rotations) add(c, s float64) {
	r.cs = append(r.cs, c, s)
	r.sweeps[len(r.sweeps)-1].count++
}

// stripWidth is the number of columns in a strip.
const stripWidth = 32

// flush applies what waits.
func (r *rotations) flush(z []float64, ld, columns int) {
	for column := 0; column < columns; column += stripWidth {
		cs := r.cs
		for _, s := range r.sweeps {
			active.rotate(z, s.first*ld+column, s.step*ld, cs[:2*s.count])
			cs = cs[2*s.count:]
		}
	}
	r.sweeps, r.cs = r.sweeps[:0], r.cs[:0]
}

// rotateGo applies one sweep to one strip: x[start:start+stripWidth] is the
// first row's part, stride is the distance to the next row's, and cs holds
// cosine and sine of each rotation.
func rotateGo(x []float64, start, stride int, cs []float64) {
	for i := 0; i+1 < len(cs); i += 2 {
		c, s := cs[i], cs[i+1]
		a, b := x[start:start+stripWidth], x[start+stride:start+stride+stripWidth]
		for j, u := range a {
			v := b[j]
			a[j] = c*u + s*v
			b[j] = c*v - s*u
		}
		start += stride
	}
}
