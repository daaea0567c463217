package drawing

import (
	"strings"

	"ridgehop/profile"
)

// The verdict's plate.
const (
	plateWidth  = 400.0
	plateHeight = 100.0
)

// plate draws the verdict as a word in a shape of its own: a round-ended plate
// for clear, a pointed one for marginal, a square one for obstructed, a broken
// outline for unknown. Two are dark and two are light, so that they stay apart
// in black and white.
func (p *pen) plate(x, y float64, v profile.Verdict) {
	word := strings.ToUpper(string(v))
	switch v {
	case profile.Clear:
		p.rect(x, y, plateWidth, plateHeight, `rx="50" fill="`+pass+`"`)
		p.signClear(x+62, y+50, paper)
		p.plateWord(x, y, paper, word)
	case profile.Marginal:
		p.path(`fill="`+paper+`" stroke="`+doubt+`" stroke-width="7" stroke-linejoin="round"`, true, []point{
			{x + 4, y + 50}, {x + 44, y + 4}, {x + 356, y + 4}, {x + 396, y + 50}, {x + 356, y + 96}, {x + 44, y + 96}})
		p.signMarginal(x+66, y+50, doubt)
		p.plateWord(x, y, doubt, word)
	case profile.Obstructed:
		p.rect(x, y, plateWidth, plateHeight, `fill="`+alarm+`"`)
		p.signObstructed(x+46, y+50, paper)
		p.plateWord(x-8, y, paper, word)
	default:
		p.rect(x+4, y+4, plateWidth-8, plateHeight-8, `rx="14" fill="`+paper+`" stroke="`+ink+`" stroke-width="6" stroke-dasharray="18 11"`)
		p.text(x+60, y+69, face{size: 54, bold: true, anchor: atMiddle}, "?")
		p.plateWord(x, y, ink, word)
	}
}

func (p *pen) plateWord(x, y float64, fill, word string) {
	p.text(x+224, y+65, face{size: 42, bold: true, fill: fill, anchor: atMiddle}, word)
}

// signClear is a line over a hollow.
func (p *pen) signClear(x, y float64, colour string) {
	p.path(`fill="none" stroke="`+colour+`" stroke-width="7" stroke-linecap="round" stroke-linejoin="round"`, false,
		[]point{{x - 22, y + 2}, {x - 6, y + 18}, {x + 24, y - 18}})
}

// signMarginal is a line that a summit just leaves open.
func (p *pen) signMarginal(x, y float64, colour string) {
	p.line(x-24, y-14, x+24, y-14, `stroke="`+colour+`" stroke-width="6" stroke-linecap="round"`)
	p.path(`fill="`+colour+`"`, true, []point{{x - 24, y + 22}, {x, y - 6}, {x + 24, y + 22}})
}

// signObstructed is a summit that stands through a line.
func (p *pen) signObstructed(x, y float64, colour string) {
	p.line(x-28, y+4, x-12, y+4, `stroke="`+colour+`" stroke-width="6" stroke-linecap="round"`)
	p.line(x+12, y+4, x+28, y+4, `stroke="`+colour+`" stroke-width="6" stroke-linecap="round"`)
	p.path(`fill="`+colour+`"`, true, []point{{x - 24, y + 26}, {x, y - 28}, {x + 24, y + 26}})
}
