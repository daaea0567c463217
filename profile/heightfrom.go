package profile

// HeightFrom says what an antenna height was counted from, whose error is then
// the antenna's too.
type HeightFrom int

// What an antenna height may be counted from.
const (
	// FromGround: the ground under the antenna.
	FromGround HeightFrom = iota
	// FromCover: the top of what stands there.
	FromCover
	// FromSeaLevel: the datum itself, so that it is exact.
	FromSeaLevel
)
