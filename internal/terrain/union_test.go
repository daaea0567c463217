package terrain

import (
	"testing"

	"pgregory.net/rapid"
)

// The outlines together enclose as much as the rectangles cover, wind the right
// way, and hold what a pixel-by-pixel look holds.
func TestUnionLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		const side = 12
		blocks := rapid.SliceOfN(rapid.Custom(func(t *rapid.T) block {
			x, y := rapid.IntRange(0, side-2).Draw(t, "x"), rapid.IntRange(0, side-2).Draw(t, "y")
			return block{x, y, rapid.IntRange(x+1, side-1).Draw(t, "right"), rapid.IntRange(y+1, side-1).Draw(t, "bottom")}
		}), 1, 7).Draw(t, "blocks")
		var filled [side][side]bool
		count := 0
		for _, b := range blocks {
			for y := b.top; y < b.bottom; y++ {
				for x := b.left; x < b.right; x++ {
					if !filled[y][x] {
						filled[y][x] = true
						count++
					}
				}
			}
		}
		sum := 0
		shapes := union(blocks)
		for _, shape := range shapes {
			for k, ring := range shape {
				if ring[0] != ring[len(ring)-1] || len(ring) < 5 || (k == 0) != (area(ring) > 0) {
					t.Fatalf("ring %d of %v", k, shape)
				}
				sum += area(ring)
			}
		}
		if sum != 2*count {
			t.Fatalf("area: got %d half pixels, want %d", sum, 2*count)
		}
		for y := range side {
			for x := range side {
				in := 0
				for _, shape := range shapes {
					for _, ring := range shape {
						if encloses(ring, corner{x, y}) {
							in++
						}
					}
				}
				if (in%2 == 1) != filled[y][x] {
					t.Fatalf("pixel %d, %d: got it in %d rings, want filled %v", x, y, in, filled[y][x])
				}
			}
		}
	})
}
