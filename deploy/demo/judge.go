package main

import (
	"context"
	"fmt"
	"io"
	"net/http"
	"os"
	"path/filepath"
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
	fmt.Fprintf(out, "\n%s (invented), three links over 1\" terrain:\n\n", island.Name)
	table := tabwriter.NewWriter(out, 0, 4, 2, ' ', 0)
	fmt.Fprintln(table, "LINK\tVERDICT\tLENGTH\tLEAST CLEARANCE\tTO MEET EVERY CRITERION")
	places := island.Places()
	var files []string
	var last answer
	for _, link := range island.Links() {
		a, b := places[link.A], places[link.B]
		got, err := c.judge(ctx, request(link, a, b))
		if err != nil {
			return err
		}
		fmt.Fprintf(table, "%s to %s\t%s\t%.2f km\t%s\t%s\n", a.Name, b.Name, got.Verdict, got.Path.LengthM/1000, least(got), toRaise(got))
		picture, err := c.do(ctx, http.MethodGet, got.Links.SVG, nil)
		if err != nil {
			return err
		}
		file := filepath.Join(folder, link.Shows+".svg")
		if err := os.WriteFile(file, picture, 0o644); err != nil {
			return err
		}
		files, last = append(files, file), got
	}
	if err := table.Flush(); err != nil {
		return err
	}
	fmt.Fprintln(out, "\nDrawings:")
	for _, file := range files {
		fmt.Fprintln(out, "  "+file)
	}
	fmt.Fprintf(out, "\nThe last one in full:     curl -s %s%s\n", c.address, last.Links.Self)
	fmt.Fprintf(out, "The contract as a page:   %s/docs\n", c.address)
	return nil
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
	text := fmt.Sprintf("raise both ends %.1f m", *both)
	for _, one := range []struct {
		end string
		m   *float64
	}{{"A", a.Raise.AM}, {"B", a.Raise.BM}} {
		if one.m != nil && *one.m <= anyMast {
			text += fmt.Sprintf(", or %s alone %.1f m", one.end, *one.m)
		}
	}
	return text
}
