package calc

// Limit is what a number of a document may be, for tests.
type Limit struct {
	Unit        string
	Least, Most float64
	Above       bool
}

// LimitsOf returns the limits of a field by the struct that declares it and
// its key; the second ones are those of a pair's other number.
func LimitsOf(owner, key string) (first, second Limit, ok bool) {
	ru, ok := rules[owner+"."+key]
	return ru.first.limit(), ru.second.limit(), ok
}

func (f figure) limit() Limit { return Limit{f.unit, f.least, f.most, f.above} }

// LimitNames lists the fields that have limits.
func LimitNames() []string {
	var names []string
	for name := range rules {
		names = append(names, name)
	}
	return names
}

// VariantFields returns the struct that holds each kind of driver and each
// type of part, by its name in a document.
func VariantFields() (drivers, parts map[string]string) {
	drivers, parts = map[string]string{}, map[string]string{}
	for _, v := range driverVariants {
		drivers[v.name] = v.in
	}
	for _, v := range partVariants {
		parts[v.name] = v.in
	}
	return drivers, parts
}
