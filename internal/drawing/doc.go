// Package drawing turns an assessment into a sheet that goes with a work order:
// the verdict in a word and a sentence, the profile of the path, what to raise,
// where to point each antenna, the criteria, the sources and the cautions.
//
// The sheet is read on paper, on a desk and on a phone. It is 1000 units wide
// and as tall as it must be; the smallest text is 20 units, so that it is still
// 8 pixels tall on a screen 400 pixels wide, and what a crew acts upon is 26 or
// more. Nothing rests on colour: words, shapes, hatches and line styles say the
// same.
//
// An SVG of this package holds no script, no link and no style sheet, and looks
// nothing up, not even in itself: hatches are plain lines, so that the sheet
// looks the same wherever it is shown. The same assessment gives the same
// bytes.
package drawing
