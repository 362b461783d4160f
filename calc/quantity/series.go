package quantity

import "math"

// e24 is the series of two-digit preferred numbers; E12, E6 and E3 are every
// second, fourth and eighth of it. It follows 10^(i/24) but for the values 27
// to 47 and 82, which are older than the rule.
//
// Source: IEC 60063:2015.
var e24 = []int{
	10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30,
	33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91,
}

// Decade returns the preferred numbers of a series ("E3", "E6", "E12", "E24",
// "E48", "E96") from 1 to below 10, rising; nil when there is no such series.
// E48 and E96 are 10^(i/n) rounded to three digits.
//
// Source: IEC 60063:2015.
func Decade(series string) []float64 {
	switch series {
	case "E3":
		return everyNth(8)
	case "E6":
		return everyNth(4)
	case "E12":
		return everyNth(2)
	case "E24":
		return everyNth(1)
	case "E48":
		return rounded(48)
	case "E96":
		return rounded(96)
	}
	return nil
}

func everyNth(step int) []float64 {
	var list []float64
	for i := 0; i < len(e24); i += step {
		list = append(list, float64(e24[i])/10)
	}
	return list
}

func rounded(n int) []float64 {
	list := make([]float64, n)
	for i := range list {
		list[i] = math.Round(100*math.Pow(10, float64(i)/float64(n))) / 100
	}
	return list
}

// sameValue is how close, relatively, a computed value must come to a
// preferred one to count as it: far below the steps of any series, far above
// the rounding of a formula.
const sameValue = 1e-9

// Nearest returns the preferred numbers of a series next to v: the largest not
// above it and the smallest not below it, both the same when v is one itself.
// Both are NaN when there is no such series or v is not above 0 and finite.
func Nearest(series string, v float64) (below, above float64) {
	decade := Decade(series)
	if decade == nil || !(v > 0) || math.IsInf(v, 0) {
		return math.NaN(), math.NaN()
	}
	power := int(math.Floor(math.Log10(v)))
	below, above = math.NaN(), math.NaN()
	for p := power - 1; p <= power+1; p++ { // one to each side, should the logarithm have rounded
		for _, m := range decade {
			x := times10(m, p)
			if x <= v*(1+sameValue) {
				below = x
			}
			if x >= v*(1-sameValue) && math.IsNaN(above) {
				above = x
			}
		}
	}
	return below, above
}

// times10 returns the float64 nearest to m·10^p, for m of up to three digits:
// 0.47, not 0.47000000000000003. A whole number divided by an exact power of
// ten is rounded once.
func times10(m float64, p int) float64 {
	whole := math.Round(m * 100)
	if p >= 2 {
		return whole * math.Pow10(p-2)
	}
	return whole / math.Pow10(2-p)
}
