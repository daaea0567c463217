package island

import "testing"

// flat is a lattice that is v everywhere.
func flat(v float64) *lattice {
	l := newLattice(4)
	for i := range l.v {
		l.v[i] = v
	}
	return l
}

func TestDressCutsAtTheCoast(t *testing.T) {
	rock := flat(300)
	tests := []struct {
		name        string
		depth       float64 // km inside the wave-cut coast
		least, most float64
	}{
		{"out at sea", -1, 0, 0},
		{"on the waterline", 0, 0, 0},
		{"on the cliff", 0.1, 65, 65},
		{"inland", 2, 270, 330},
	}
	for _, tt := range tests {
		got := dress(rock, flat(tt.depth), 100, 80)
		if got < tt.least || got > tt.most {
			t.Errorf("%s: %v m, want %v to %v", tt.name, got, tt.least, tt.most)
		}
	}
}

func TestSiltBuildsThePlainFirst(t *testing.T) {
	if got := silt(plain.x, plain.y, 2); got < 8 || got > 20 {
		t.Errorf("plain 2 km inland at %v m, want 8 to 20", got)
	}
	// Far from the plain a drowned valley stays a bay for its first stretch.
	if got := silt(-10, -2, 0.05); got > 0 {
		t.Errorf("valley mouth filled to %v m, want sea", got)
	}
}

// coastal returns the mean height in metres of the first 12 posts of land met
// when going from the window's edge towards the island, one row at a time, over
// the columns from west to east.
func coastal(west, east, start, step int) float64 {
	sum, n := 0.0, 0.0
	for col := west; col < east; col++ {
		row := start
		for made().Post(row, col) == 0 {
			row += step
		}
		for range 12 {
			sum += float64(made().Post(row, col))
			n++
			row += step
		}
	}
	return sum / n
}

func TestWeatherCoastIsSteepAndPlainIsLow(t *testing.T) {
	south := coastal(1480, 1640, centre+halfRows, -1)
	north := coastal(1900, 2000, centre-halfRows, +1)
	t.Logf("12 posts from the sea: %.0f m in the south-west, %.0f m on the plain", south, north)
	if south < 30 {
		t.Errorf("weather coast %.0f m high, want cliffs of 30 m and more", south)
	}
	if north > 10 {
		t.Errorf("coast of the plain %.0f m high, want 10 m at most", north)
	}
}

func TestMetresScalesAndDrowns(t *testing.T) {
	b := newBasin(4)
	b.v[5], b.v[6] = 4, 1
	b.metres()
	for i, want := range map[int]float64{5: summitM - drownM, 6: summitM/4.0 - drownM, 7: -drownM} {
		if got := b.v[i]; got != want {
			t.Errorf("node %d at %v m, want %v", i, got, want)
		}
	}
}
