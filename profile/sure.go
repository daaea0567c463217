package profile

// ClearConfidence is the confidence from which on a path counts as clear.
const ClearConfidence = 0.90

// ExtraHeight is extra antenna height in metres: at A alone, at B alone, or the
// same at both ends.
type ExtraHeight struct {
	AM, BM, BothM float64
}
