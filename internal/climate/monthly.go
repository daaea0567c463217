package climate

import (
	"math"
	"strconv"
	"time"
)

const monthsInYear = 12

// monthly reads twelve months and returns the rain rate, NaN if something is wrong.
func (f *findings) monthly(at string, value any) float64 {
	before := len(*f)
	items := f.list(at, value)
	if len(*f) == before && len(items) != monthsInYear {
		f.add(at, "has %d months; it must have %d, January first", len(items), monthsInYear)
	}
	if len(*f) > before {
		return math.NaN()
	}
	var months [monthsInYear]Normal
	for i, item := range items {
		months[i] = f.month(i, at+"/"+strconv.Itoa(i), item)
	}
	if len(*f) > before {
		return math.NaN()
	}
	rate, err := rateOf(months)
	if err != nil {
		f.add(at, "gives no rain rate: %v", err)
		return math.NaN()
	}
	return rate
}

// month reads one month.
func (f *findings) month(i int, at string, value any) Normal {
	fields := f.object(at, value, "rain_mm", "temperature_c")
	read := func(name string) float64 {
		given, ok := fields[name]
		if !ok && fields != nil {
			f.add(at+"/"+name, "of %v is missing", time.Month(i+1))
			return 0
		}
		n, ok := number(given)
		if !ok && fields != nil {
			f.add(at+"/"+name, "of %v is %s; it must be a number", time.Month(i+1), describe(given))
			return 0
		}
		return n
	}
	n := Normal{RainMM: read("rain_mm"), TemperatureC: read("temperature_c")}
	if fields != nil {
		f.normal(i, at, n)
	}
	return n
}
