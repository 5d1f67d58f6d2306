package promotion_test

import (
	"fmt"

	"torsieve/internal/units"
	"torsieve/screen/promotion"
)

// Thirty conformers, of which the upper tier sees what may weigh something.
func ExamplePlan() {
	var candidates []promotion.Candidate
	for i := range 30 {
		candidates = append(candidates, promotion.Candidate{Energy: 0.4 * float64(i) * units.KcalPerMol, Copies: 1})
	}
	prior := promotion.Prior{Scale: 0.3 * units.KcalPerMol, Freedom: 1.2, Slope: 1, SlopeSD: 0.2}
	plan, err := promotion.New(candidates, prior, promotion.Defaults())
	if err != nil {
		fmt.Println(err)
		return
	}
	for batch := plan.Next(); len(batch) > 0; batch = plan.Next() {
		for _, i := range batch {
			// Here a tier would compute conformer i.
			if err := plan.Computed(i, -500+candidates[i].Energy); err != nil {
				fmt.Println(err)
				return
			}
		}
	}
	fmt.Println(plan.End() == promotion.Enough)
	fmt.Println(plan.Why(1))
	// Output:
	// true
	// went up: among the lowest of the tier below
}
