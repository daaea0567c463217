package island

import "testing"

// reach returns the highest height within the given number of posts of a
// place, and whether there is sea there.
func reach(row, col, posts int) (top int16, sea bool) {
	for r := row - posts; r <= row+posts; r++ {
		for c := col - posts; c <= col+posts; c++ {
			h := made().Post(r, c)
			top, sea = max(top, h), sea || h == 0
		}
	}
	return top, sea
}

func TestPlacesStandWhereTheyShould(t *testing.T) {
	for i, s := range spots {
		h := made().Post(s.row, s.col)
		t.Logf("%-20s %-10s %4d m", s.name, s.kind, h)
		near, _ := reach(s.row, s.col, 20)
		_, sea := reach(s.row, s.col, 8)
		switch s.kind {
		case "summit", "hill", "mast":
			if h != near || h < 200 {
				t.Errorf("%s at %d m, want a local top (%d m within 20 posts) above 200 m", s.name, h, near)
			}
		case "lighthouse":
			if !sea || h < 40 {
				t.Errorf("%s at %d m, sea near %v, want a cliff by the sea", s.name, h, sea)
			}
		case "harbour":
			if !sea || h < 1 || h > 10 {
				t.Errorf("%s at %d m, sea near %v, want 1 to 10 m by the sea", s.name, h, sea)
			}
		case "village":
			if h < 2 || h > 150 {
				t.Errorf("%s at %d m, want low ground", s.name, h)
			}
		default:
			t.Errorf("place %d has unknown kind %q", i, s.kind)
		}
	}
}

func TestPlacesMatchTheTile(t *testing.T) {
	places, seen := Places(), map[string]bool{}
	if len(places) != len(spots) {
		t.Fatalf("%d places, want %d", len(places), len(spots))
	}
	for i, p := range places {
		want := float64(made().Post(spots[i].row, spots[i].col))
		if got := made().Height(p.Lon, p.Lat); got-want > 1e-6 || want-got > 1e-6 {
			t.Errorf("%s at %v m, want %v", p.Name, got, want)
		}
		if p.Name == "" || seen[p.Name] {
			t.Errorf("name %q empty or twice", p.Name)
		}
		seen[p.Name] = true
	}
}

func TestSummitIsTheHighestPost(t *testing.T) {
	summit := made().Post(spots[hathercrag].row, spots[hathercrag].col)
	for _, h := range made().posts {
		if h > summit {
			t.Fatalf("a post of %d m above the summit of %d m", h, summit)
		}
	}
}
