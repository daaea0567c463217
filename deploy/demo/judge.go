package main

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"
	"text/tabwriter"

	"ridgehop/internal/island"
)

// judgeAll has the island's links judged, writes their drawings to folder and
// prints the table.
func judgeAll(ctx context.Context, c *client, folder string, out io.Writer) error {
	if err := c.awaitReady(ctx); err != nil {
		return err
	}
	if err := os.MkdirAll(folder, 0o755); err != nil {
		return err
	}
	page, last, err := judgePage(ctx, c, folder)
	if err != nil {
		return err
	}
	fmt.Fprintf(page, "\nThe last one in full:     curl -s %s%s\n", c.address, last.Links.Self)
	fmt.Fprintf(page, "The contract as a page:   %s/docs\n", c.address)
	_, err = page.WriteTo(out)
	return err
}

// judgePage is the table with the names of the drawings, and the last answer.
func judgePage(ctx context.Context, c *client, folder string) (*bytes.Buffer, answer, error) {
	page, files := &bytes.Buffer{}, &bytes.Buffer{}
	fmt.Fprintf(page, "\n%s (invented), three links over 1\" terrain:\n\n", island.Name)
	table := tabwriter.NewWriter(page, 0, 4, 2, ' ', 0)
	line := func(format string, args ...any) { _, _ = fmt.Fprintf(table, format, args...) } // a buffer takes all
	line("LINK\tVERDICT\tLENGTH\tLEAST CLEARANCE\tTO MEET EVERY CRITERION\n")
	places := island.Places()
	var got answer
	for _, link := range island.Links() {
		a, b := places[link.A], places[link.B]
		var err error
		if got, err = c.judge(ctx, request(link, a, b)); err != nil {
			return nil, got, err
		}
		line("%s to %s\t%s\t%.2f km\t%s\t%s\n", a.Name, b.Name, got.Verdict, got.Path.LengthM/1000, least(got), toRaise(got))
		file := filepath.Join(folder, link.Shows+".svg")
		if err := c.saveDrawing(ctx, got, file); err != nil {
			return nil, got, err
		}
		fmt.Fprintf(files, "  %s\n", file)
	}
	err := table.Flush()
	fmt.Fprintf(page, "\nDrawings:\n%s", files)
	return page, got, err
}

func request(link island.Link, a, b island.Place) map[string]any {
	end := func(p island.Place, height float64) map[string]any {
		return map[string]any{"name": p.Name, "lon": p.Lon, "lat": p.Lat, "antenna_height_m": height}
	}
	return map[string]any{"a": end(a, link.AntennaAM), "b": end(b, link.AntennaBM), "frequency_ghz": link.FrequencyGHz}
}

// least is the least clearance of the criterion that fares worst.
func least(a answer) string {
	text, worst := "not known", 1e9
	for _, c := range a.Clearance {
		if c.MinRatio != nil && *c.MinRatio < worst {
			worst = *c.MinRatio
			text = fmt.Sprintf("%.2f F1 at k %.2f", worst, c.K)
		}
	}
	return text
}

// anyMast is how much may be added to a mast before another path is the better
// answer: common practice, no source.
const anyMast = 200.0

func toRaise(a answer) string {
	both := a.Raise.BothM
	switch {
	case both == nil:
		return "not known"
	case *both == 0:
		return "nothing to raise"
	case *both > anyMast:
		return "beyond any mast: choose another path"
	}
	ways := []string{fmt.Sprintf("raise both ends %.1f m", up(*both))}
	for _, one := range []struct {
		end string
		m   *float64
	}{{"A", a.Raise.AM}, {"B", a.Raise.BM}} {
		if one.m != nil && *one.m <= anyMast {
			ways = append(ways, fmt.Sprintf("%s alone %.1f m", one.end, up(*one.m)))
		}
	}
	return strings.Join(ways, ", or ")
}

// up rounds up to a tenth, so that the raise as printed is enough.
func up(metres float64) float64 { return math.Ceil(metres*10) / 10 }
