package dedupe

// moments are the sums of products of the coordinates of two sets of points,
// row by row: all that the best rotation depends on.
type moments [9]float64

// add takes in point k of a and point q of b.
func (m *moments) add(a, b []float64, k, q int) {
	u, v := a[3*k:3*k+3:3*k+3], b[3*q:3*q+3:3*q+3]
	m[0] += u[0] * v[0]
	m[1] += u[0] * v[1]
	m[2] += u[0] * v[2]
	m[3] += u[1] * v[0]
	m[4] += u[1] * v[1]
	m[5] += u[1] * v[2]
	m[6] += u[2] * v[0]
	m[7] += u[2] * v[1]
	m[8] += u[2] * v[2]
}

func (m *moments) plus(o *moments) moments {
	var sum moments
	for k := range sum {
		sum[k] = m[k] + o[k]
	}
	return sum
}

// overlap returns how much of start, half the sum of squares of all points, the
// best rotation saves, for the points as they are or for the mirror image of
// the second set; any number below floor where it is below floor.
//
// Source: D. L. Theobald, Acta Cryst. A 2005, 61, 478: the largest eigenvalue
// of Horn's matrix by Newton steps from above on its characteristic polynomial;
// for the mirror image only the linear term changes its sign.
func (m *moments) overlap(mirrored bool, start, floor float64) float64 {
	xx, xy, xz, yx, yy, yz, zx, zy, zz := m[0], m[1], m[2], m[3], m[4], m[5], m[6], m[7], m[8]
	c2 := -2 * (xx*xx + xy*xy + xz*xz + yx*yx + yy*yy + yz*yz + zx*zx + zy*zy + zz*zz)
	c1 := -8 * (xx*(yy*zz-yz*zy) - xy*(yx*zz-yz*zx) + xz*(yx*zy-yy*zx))
	if mirrored {
		c1 = -c1
	}
	return newton(c2, c1, hornDeterminant(xx, xy, xz, yx, yy, yz, zx, zy, zz), start, floor)
}
