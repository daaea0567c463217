package drawing

// Colours. Each is told from its neighbours by lightness too, and every one of
// them has a shape, a hatch, a line style or a word beside it.
const (
	ink      = "#17262f"
	quiet    = "#4b5a63" // secondary text: 7:1 on paper
	faint    = "#b9c2c6" // rules and grid
	paper    = "#ffffff"
	band     = "#eef1ef"
	earth    = "#ddd5c4"
	earthInk = "#4d4231"
	leaf     = "#b7c6a4"
	leafInk  = "#44592f"
	zone     = "#d9e6f0"
	zoneInk  = "#22557f"
	alarm    = "#8f2413"
	intruder = "#cf6b53" // light enough for the lines that cross it
	pass     = "#0b5b60"
	doubt    = "#6b4700"
)

// Anchors of a text.
const (
	atStart  = ""
	atMiddle = "middle"
	atEnd    = "end"
)

// face is how a text looks.
type face struct {
	size   float64
	bold   bool
	fill   string // empty is ink
	anchor string
}

// text writes s; an empty s writes nothing.
func (p *pen) text(x, y float64, f face, s string) {
	if s == "" {
		return
	}
	p.raw("<text")
	p.attribute("x", x)
	p.attribute("y", y)
	p.attribute("font-size", f.size)
	if f.bold {
		p.raw(` font-weight="700"`)
	}
	if f.anchor != atStart {
		p.raw(` text-anchor="`, f.anchor, `"`)
	}
	if f.fill != "" {
		p.raw(` fill="`, f.fill, `"`)
	}
	p.raw(">")
	p.escaped(s)
	p.raw("</text>\n")
}

// upright writes s from below to above.
func (p *pen) upright(x, y float64, f face, s string) {
	p.raw(`<g transform="translate(`)
	p.number(x)
	p.raw(" ")
	p.number(y)
	p.raw(`) rotate(-90)">`)
	p.text(0, 0, f, s)
	p.raw("</g>\n")
}

// name writes what a user called something, cut to the room, with the whole of
// it as a tool tip. The title stands beside the text, not inside: some
// renderers print it there.
func (p *pen) name(x, y float64, f face, name string, room float64) {
	cut := shorten(name, f, room)
	if cut == name {
		p.text(x, y, f, name)
		return
	}
	p.raw("<g><title>")
	p.escaped(name)
	p.raw("</title>")
	p.text(x, y, f, cut)
	p.raw("</g>\n")
}

// lines writes wrapped lines and returns the y below the last.
func (p *pen) lines(x, y, leading float64, f face, lines []string) float64 {
	for _, line := range lines {
		p.text(x, y, f, line)
		y += leading
	}
	return y
}

// badge is the letter of an end in a disc.
func (p *pen) badge(x, y, radius float64, letter string) {
	p.circle(x, y, radius, `fill="`+ink+`"`)
	size := radius * 1.3
	p.text(x, y+size*0.36, face{size: size, bold: true, fill: paper, anchor: atMiddle}, letter)
}
