package drawing

import (
	"strings"

	"ridgehop/profile"
)

// The verdict's plate.
const (
	plateWidth  = 396.0
	plateHeight = 96.0
)

// plate draws the verdict as a word in a shape of its own: a round-ended plate
// for clear, a pointed one for marginal, a square one for obstructed, a broken
// outline for unknown. Two are dark and two are light, so that they stay apart
// in black and white.
func (p *pen) plate(x, y float64, v profile.Verdict) {
	middle := y + plateHeight/2
	word := strings.ToUpper(string(v))
	wide := signWidth + signGap + textWidth(word, plateFace(ink))
	sign := x + max(signWidth/2+24, (plateWidth-wide+signWidth)/2)
	p.plateShape(x, y, v)
	switch v {
	case profile.Clear:
		p.signClear(sign, middle, paper)
	case profile.Marginal:
		p.signMarginal(sign, middle, doubt)
	case profile.Obstructed:
		p.signObstructed(sign, middle, paper)
	default:
		p.text(sign, middle+18, face{size: 52, bold: true, anchor: atMiddle}, "?")
	}
	p.text(sign+signWidth/2+signGap, middle+13, plateFace(plateInk(v)), word)
}

// The sign beside the word.
const (
	signWidth = 52.0
	signGap   = 18.0
)

func plateFace(fill string) face { return face{size: 37, bold: true, fill: fill} }

func plateInk(v profile.Verdict) string {
	switch v {
	case profile.Clear, profile.Obstructed:
		return paper
	case profile.Marginal:
		return doubt
	}
	return ink
}

func (p *pen) plateShape(x, y float64, v profile.Verdict) {
	right, bottom, middle := x+plateWidth, y+plateHeight, y+plateHeight/2
	switch v {
	case profile.Clear:
		p.rect(x, y, plateWidth, plateHeight, `rx="48" fill="`+pass+`"`)
	case profile.Marginal:
		p.path(`fill="`+paper+`" stroke="`+doubt+`" stroke-width="7" stroke-linejoin="round"`, true, []point{
			{x + 4, middle}, {x + 40, y + 4}, {right - 40, y + 4}, {right - 4, middle}, {right - 40, bottom - 4}, {x + 40, bottom - 4}})
	case profile.Obstructed:
		p.rect(x, y, plateWidth, plateHeight, `fill="`+alarm+`"`)
	default:
		p.rect(x+4, y+4, plateWidth-8, plateHeight-8,
			`rx="14" fill="`+paper+`" stroke="`+ink+`" stroke-width="6" stroke-dasharray="18 11"`)
	}
}

// signClear is a tick.
func (p *pen) signClear(x, y float64, colour string) {
	p.path(`fill="none" stroke="`+colour+`" stroke-width="8" stroke-linecap="round" stroke-linejoin="round"`, false,
		[]point{{x - 20, y + 2}, {x - 5, y + 17}, {x + 22, y - 16}})
}

// signMarginal is a line that a summit just leaves open.
func (p *pen) signMarginal(x, y float64, colour string) {
	p.line(x-24, y-16, x+24, y-16, `stroke="`+colour+`" stroke-width="6" stroke-linecap="round"`)
	p.path(`fill="`+colour+`"`, true, []point{{x - 24, y + 22}, {x, y - 8}, {x + 24, y + 22}})
}

// signObstructed is a summit that stands through a line.
func (p *pen) signObstructed(x, y float64, colour string) {
	p.line(x-30, y-6, x-16, y-6, `stroke="`+colour+`" stroke-width="6" stroke-linecap="round"`)
	p.line(x+16, y-6, x+30, y-6, `stroke="`+colour+`" stroke-width="6" stroke-linecap="round"`)
	p.path(`fill="`+colour+`"`, true, []point{{x - 24, y + 26}, {x, y - 28}, {x + 24, y + 26}})
}
