package solvent

import (
	"cmp"
	"slices"
	"strings"
)

// aliases are other names for the solvents, as plain spells them: trivial
// names, systematic ones, formulas and laboratory abbreviations.
var aliases = map[string][]string{
	"acetone":         {"propanone", "dimethylketone", "me2co"},
	"acetonitrile":    {"ch3cn", "mecn", "acn", "methylcyanide", "ethanenitrile"},
	"aniline":         {"phenylamine", "aminobenzene", "phnh2"},
	"benzaldehyde":    {"phcho"},
	"benzene":         {"c6h6", "phh"},
	"chloroform":      {"chcl3", "trichloromethane"},
	"cs2":             {"carbondisulfide", "carbondisulphide"},
	"dichloromethane": {"ch2cl2", "dcm", "methylenechloride", "methylenedichloride"},
	"diethylether":    {"ether", "et2o", "ethoxyethane", "ethylether"},
	"dioxane":         {"1,4dioxane"},
	"dmf":             {"dimethylformamide", "n,ndimethylformamide"},
	"dmso":            {"dimethylsulfoxide", "dimethylsulphoxide", "me2so"},
	"ethanol":         {"etoh", "ethylalcohol", "alcohol", "c2h5oh"},
	"ethylacetate":    {"etoac", "acoet", "ethylethanoate"},
	"furan":           {"furane"},
	"hexadecane":      {"nhexadecane", "cetane"},
	"hexane":          {"nhexane", "hexanes"},
	"methanol":        {"meoh", "ch3oh", "methylalcohol"},
	"nitromethane":    {"meno2", "ch3no2"},
	"octanol":         {"1octanol", "noctanol", "octan1ol", "octylalcohol"},
	"phenol":          {"phoh", "hydroxybenzene"},
	"thf":             {"tetrahydrofuran", "oxolane"},
	"toluene":         {"methylbenzene", "phme"},
	"water":           {"h2o"},
	"wet-octanol":     {"octanolwet", "watersaturatedoctanol", "octanolwater"},
}

// Names lists the solvents by their own names, in alphabetical order.
func Names() []string {
	var names []string
	for _, f := range alpb().Solvents {
		names = append(names, f.Name)
	}
	return names
}

// Aliases returns other names that Find knows for a solvent, given by its own.
// Case, blanks, hyphens and the like are left out of them, as Find does.
func Aliases(name string) []string { return slices.Clone(aliases[name]) }

// Find returns a solvent's own name for any of its names; case, blanks, hyphens
// and brackets do not matter. Error: *UnknownError.
func Find(name string) (string, error) {
	wanted := plain(name)
	for _, own := range Names() {
		if wanted == plain(own) || slices.Contains(aliases[own], wanted) {
			return own, nil
		}
	}
	return "", &UnknownError{Name: name, Nearest: nearest(wanted)}
}

// plain takes from a name what people write in different ways.
func plain(name string) string {
	return strings.Map(func(r rune) rune {
		if strings.ContainsRune(" \t-_()'/", r) {
			return -1
		}
		return r
	}, strings.ToLower(name))
}

// suggestions is how many names an error offers at most.
const suggestions = 3

// nearest returns the solvents of which a name begins with or is about as long
// and spelled like the wanted one, best first.
func nearest(wanted string) []string {
	type candidate struct {
		name     string
		distance int
	}
	var found []candidate
	for _, own := range Names() {
		best := 1 << 30
		for _, name := range append([]string{plain(own)}, aliases[own]...) {
			best = min(best, unlikeness(wanted, name))
		}
		if best <= 1+len(wanted)/3 {
			found = append(found, candidate{own, best})
		}
	}
	slices.SortStableFunc(found, func(a, b candidate) int { return cmp.Compare(a.distance, b.distance) })
	var names []string
	for _, c := range found[:min(len(found), suggestions)] {
		names = append(names, c.name)
	}
	return names
}

// unlikeness is the number of letters to insert, drop or change to come from a
// to b (the Levenshtein distance), or 1 where one begins with the other and
// that is three letters long at least.
func unlikeness(a, b string) int {
	if min(len(a), len(b)) >= 3 && (strings.HasPrefix(a, b) || strings.HasPrefix(b, a)) {
		return 1
	}
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range a {
		corner := row[0]
		row[0] = i + 1
		for j := range b {
			change := corner
			if a[i] != b[j] {
				change++
			}
			corner = row[j+1]
			row[j+1] = min(change, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}
