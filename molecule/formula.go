package molecule

import (
	"slices"
	"strings"

	"torsieve/internal/element"
)

// alphabetical lists the atomic numbers in the order of their symbols.
var alphabetical = func() []int {
	zs := make([]int, element.MaxZ)
	for i := range zs {
		zs[i] = i + 1
	}
	slices.SortFunc(zs, func(a, b int) int { return strings.Compare(element.Symbol(a), element.Symbol(b)) })
	return zs
}()
