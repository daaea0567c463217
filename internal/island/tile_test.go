package island

import (
	"crypto/sha256"
	"encoding/hex"
	"sync"
	"testing"
)

// made is the one tile all tests share.
var made = sync.OnceValue(New)

// golden is the SHA-256 of the file. A change of it is a change of every
// published example: make it on purpose, with GOAMD64=v1 and v3 agreeing.
const golden = "2e643ddb138a0ac1b50ceedab1e68660273b248e10c4f602f5cffaf3581046d2"

func TestTileNeverChanges(t *testing.T) {
	sum := sha256.New()
	n, err := made().WriteTo(sum)
	if err != nil {
		t.Fatal(err)
	}
	if want := int64(3601 * 3601 * 2); n != want {
		t.Errorf("wrote %d bytes, want %d", n, want)
	}
	if got := hex.EncodeToString(sum.Sum(nil)); got != golden {
		t.Errorf("SHA-256 %s, want %s", got, golden)
	}
}

func TestSeaSurroundsTheIsland(t *testing.T) {
	tile := made()
	for i := range Side {
		for _, p := range [][2]int{{0, i}, {Side - 1, i}, {i, 0}, {i, Side - 1}} {
			if h := tile.Post(p[0], p[1]); h != 0 {
				t.Fatalf("height %d at row %d column %d of the border, want 0", h, p[0], p[1])
			}
		}
	}
}

func TestReliefLooksLikeLand(t *testing.T) {
	tile := made()
	land, plain, top, low, step := 0, 0, 0, 0, 0
	west, east := Side, 0
	for row := 1; row < Side; row++ {
		for col := 1; col < Side; col++ {
			at := row*Side + col
			h := int(tile.posts[at])
			if h > 0 {
				land++
				west, east = min(west, col), max(east, col)
			}
			if h > 0 && h <= 40 {
				plain++
			}
			top, low = max(top, h), min(low, h)
			step = max(step, gap(h, int(tile.posts[at-1])), gap(h, int(tile.posts[at-Side])))
		}
	}
	km2 := float64(land) * postEastKM * postNorthKM
	length := float64(east-west) * postEastKM
	t.Logf("summit %d m, land %.0f km^2, %.1f km long, steepest step %d m", top, km2, length, step)
	if top < 700 || top > 900 {
		t.Errorf("summit at %d m, want 700 to 900", top)
	}
	if low < 0 {
		t.Errorf("lowest height %d m, want none below the sea", low)
	}
	if km2 < 150 || km2 > 350 {
		t.Errorf("land %.0f km^2, want 150 to 350", km2)
	}
	if length < 25 || length > 35 {
		t.Errorf("island %.1f km long, want 25 to 35", length)
	}
	if share := float64(plain) / float64(land); share < 0.1 || share > 0.4 {
		t.Errorf("%.2f of the land is at most 40 m high, want 0.1 to 0.4", share)
	}
	// Sixty metres between posts 24 or 31 m apart is a cliff; more is a spike.
	if step > 60 {
		t.Errorf("neighbouring posts differ by %d m, want at most 60", step)
	}
}

func gap(a, b int) int { return max(a-b, b-a) }

func TestNoPostStandsAlone(t *testing.T) {
	tile := made()
	for row := 1; row < Side-1; row++ {
		for col := 1; col < Side-1; col++ {
			at := row*Side + col
			if tile.posts[at] == 0 {
				continue
			}
			around := max(tile.posts[at-1], tile.posts[at+1], tile.posts[at-Side], tile.posts[at+Side])
			if rise := tile.posts[at] - around; rise > 15 {
				t.Errorf("row %d column %d stands %d m above all its neighbours", row, col, rise)
			}
		}
	}
}

func TestHeightIsBilinear(t *testing.T) {
	tile := made()
	const row, col = 1816, 1609
	lon, lat := West+float64(col)/3600, South+1-float64(row)/3600
	near := func(got, want float64) bool { return got-want < 1e-6 && want-got < 1e-6 }
	if got, want := tile.Height(lon, lat), float64(tile.Post(row, col)); !near(got, want) {
		t.Errorf("height at a post %v, want %v", got, want)
	}
	want := 0.0
	for _, p := range [][2]int{{0, 0}, {0, 1}, {1, 0}, {1, 1}} {
		want += float64(tile.Post(row+p[0], col+p[1])) / 4
	}
	if got := tile.Height(lon+0.5/3600, lat-0.5/3600); !near(got, want) {
		t.Errorf("height between four posts %v, want %v", got, want)
	}
}

func TestHeightOutsideIsSea(t *testing.T) {
	tile := made()
	for _, p := range [][2]float64{{-120.001, -38.5}, {-118.999, -38.5}, {-119.5, -37.99}, {-119.5, -39.01},
		{West, South}, {West + 1, South + 1}, {0, 0}} {
		if got := tile.Height(p[0], p[1]); got != 0 {
			t.Errorf("height at %v is %v, want 0", p, got)
		}
	}
}

func TestPostOutsidePanics(t *testing.T) {
	for _, p := range [][2]int{{-1, 0}, {0, -1}, {Side, 0}, {0, Side}} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("post %v did not panic", p)
				}
			}()
			made().Post(p[0], p[1])
		}()
	}
}

func BenchmarkNew(b *testing.B) {
	for b.Loop() {
		New()
	}
}
