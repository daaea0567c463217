package drawing

import (
	"encoding/xml"
	"fmt"
	"math"
	"strconv"
)

// pen writes SVG elements. Look strings are attributes of our own, written
// here as they stand; whatever a user may have written goes through escaped.
type pen struct {
	body []byte
	err  error // the first number that was none
}

// point is a place on the sheet.
type point struct{ x, y float64 }

// Write appends, for xml.EscapeText.
func (p *pen) Write(b []byte) (int, error) {
	p.body = append(p.body, b...)
	return len(b), nil
}

func (p *pen) raw(parts ...string) {
	for _, part := range parts {
		p.body = append(p.body, part...)
	}
}

func (p *pen) escaped(s string) {
	if err := xml.EscapeText(p, []byte(s)); err != nil && p.err == nil {
		p.err = err
	}
}

// number writes tenths of a unit. A number that is none ends the drawing: half
// a drawing could be taken for a whole one.
func (p *pen) number(v float64) { p.body = appendTenths(p.body, p.toTenths(v)) }

func (p *pen) toTenths(v float64) int {
	if math.IsNaN(v) || math.Abs(v) > 1e7 {
		if p.err == nil {
			p.err = fmt.Errorf("%w: a place off the sheet", ErrNotDrawable)
		}
		return 0
	}
	return int(math.Round(v * 10))
}

func appendTenths(b []byte, t int) []byte {
	if t < 0 {
		b = append(b, '-')
		t = -t
	}
	b = strconv.AppendInt(b, int64(t/10), 10)
	if t%10 != 0 {
		b = append(b, '.', byte('0'+t%10))
	}
	return b
}

func (p *pen) attribute(name string, v float64) {
	p.raw(" ", name, `="`)
	p.number(v)
	p.raw(`"`)
}

func (p *pen) line(x1, y1, x2, y2 float64, look string) {
	p.raw("<line")
	p.attribute("x1", x1)
	p.attribute("y1", y1)
	p.attribute("x2", x2)
	p.attribute("y2", y2)
	p.raw(" ", look, "/>\n")
}

func (p *pen) rect(x, y, width, height float64, look string) {
	p.raw("<rect")
	p.attribute("x", x)
	p.attribute("y", y)
	p.attribute("width", width)
	p.attribute("height", height)
	p.raw(" ", look, "/>\n")
}

func (p *pen) circle(x, y, radius float64, look string) {
	p.raw("<circle")
	p.attribute("cx", x)
	p.attribute("cy", y)
	p.attribute("r", radius)
	p.raw(" ", look, "/>\n")
}

// path draws lines, each through its points; closed joins its ends.
func (p *pen) path(look string, closed bool, lines ...[]point) {
	if len(lines) == 0 {
		return
	}
	p.raw(`<path `, look, ` d="`)
	for _, line := range lines {
		p.through(line)
		if closed {
			p.raw("z")
		}
	}
	p.raw("\"/>\n")
}

// through writes the points as steps from one to the next, in whole tenths so
// that rounding does not add up: half the size of absolute places.
func (p *pen) through(line []point) {
	var x, y int
	b := p.body
	for i, at := range line {
		nextX, nextY := p.toTenths(at.x), p.toTenths(at.y)
		switch i {
		case 0:
			b = append(b, 'M')
		case 1:
			b = append(b, 'l')
		default:
			b = append(b, ' ')
		}
		b = appendTenths(b, nextX-x)
		b = append(b, ' ')
		b = appendTenths(b, nextY-y)
		x, y = nextX, nextY
	}
	p.body = b
}

// group draws what belongs together under a label.
func (p *pen) group(label string, draw func()) {
	p.raw(`<g role="group" aria-label="`)
	p.escaped(label)
	p.raw("\">\n")
	draw()
	p.raw("</g>\n")
}
