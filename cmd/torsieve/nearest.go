package main

// nearest returns the word that is closest to name by edit distance, the first
// of equal ones, or "" if none is within a third of name's length.
func nearest(name string, words []string) string {
	best, least := "", len(name)/3+2
	for _, w := range words {
		if d := editDistance(name, w); d < least {
			best, least = w, d
		}
	}
	return best
}

// editDistance is the Levenshtein distance by the usual recurrence over rows.
func editDistance(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			substitute := diagonal
			if a[i] != b[j] {
				substitute++
			}
			diagonal = row[j+1]
			row[j+1] = min(substitute, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}
