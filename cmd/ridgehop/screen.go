package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"log/slog"
	"os"
	"path/filepath"
	"strings"
	"time"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening"
	"ridgehop/internal/screening/intake"
	"ridgehop/internal/telemetry"
)

// screenCommand asks of a list of candidates which of a list of sites can serve
// each. What it has found so far is in a file beside the output, from which a run
// that was interrupted goes on.
type screenCommand struct {
	terrainFlags `embed:""`
	Sites        string  `required:"" help:"The sites: .csv, .tsv, .geojson, .json (GeoJSON) or .ndjson." placeholder:"FILE"`
	Candidates   string  `required:"" help:"The places that may be served, in the same formats." placeholder:"FILE"`
	Out          string  `required:"" help:"The result: .csv, .geojson or .ndjson. It appears when it is complete; until then FILE.part grows, and the same command goes on behind it." placeholder:"FILE"`
	FrequencyGHz float64 `help:"Frequency of sites that state none, GHz." name:"frequency-ghz"`
	CriteriaSet  string  `help:"Criteria: p530_temperate, p530_tropical or f1_60." name:"criteria-set" default:"p530_temperate"`
	RangeKM      float64 `help:"How far a site serves that states no range, km." name:"range-km" default:"20"`
	HeightM      float64 `help:"Antenna height of candidates that state none, m." name:"height-m" default:"0"`
	HeightAbove  string  `help:"What the height of candidates counts from that do not state it: ground, roof or sea_level." name:"height-above" default:"ground"`
	CoverM       float64 `help:"Trees and buildings to count on top of the terrain, m, where the rasters hold none." name:"cover-m" default:"0"`
	MastLimitM   float64 `help:"Highest mast at a candidate, m." name:"mast-limit-m" default:"10"`
	Workers      int     `help:"Links judged at once; 0 is one a processor." default:"0"`
	MaxRows      int     `help:"Most candidates that are read." name:"max-rows" default:"1000000"`
	Restart      bool    `help:"Start anew where other inputs or settings began the output, or where it is there already."`
	ChunkRows    int     `hidden:"" name:"chunk-rows" default:"4096"`
}

// Run screens the candidates.
func (c *screenCommand) Run(ctx context.Context, s streams) error {
	from, err := listFormat("--candidates", c.Candidates)
	if err != nil {
		return err
	}
	to, err := listFormat("--out", c.Out)
	if err != nil {
		return err
	}
	if err := c.spareFiles(); err != nil {
		return err
	}
	plan, err := c.plan(s)
	if err != nil {
		return err
	}
	in, err := os.Open(c.Candidates)
	if err != nil {
		return fileError(c.Candidates, err)
	}
	defer in.Close()
	loaded, err := loadTerrain(ctx, c.terrainFlags, "", telemetry.NewLogger(s.err, slog.LevelWarn, false))
	if err != nil {
		return err
	}
	defer loaded.Close()
	inputs, err := c.inputs(plan, to, loaded)
	if err != nil {
		return err
	}
	part, err := openPart(c.Out, to, inputs, c.Restart)
	if err != nil {
		return err
	}
	defer part.Close()
	reading := plan.Reading()
	reading.MaxRows = c.MaxRows
	if reading.Inside, err = coveredPlaces(ctx, loaded); err != nil {
		return err
	}
	return c.screen(ctx, s, assess.NewService(loaded), plan, candidateList{file: in, format: from, how: reading}, part)
}

// spareFiles refuses an output that would take the place of an input, or, unless
// the caller says so, of an output that is there.
func (c *screenCommand) spareFiles() error {
	there, err := os.Stat(c.Out)
	if err != nil {
		return nil // nothing is there
	}
	for flag, name := range map[string]string{"--sites": c.Sites, "--candidates": c.Candidates} {
		if input, err := os.Stat(name); err == nil && os.SameFile(there, input) {
			return inputError{fmt.Errorf("--out %s: it is the file of %s; name another", c.Out, flag)}
		}
	}
	if !c.Restart {
		return inputError{fmt.Errorf("--out %s: it is there already; name another, or make it anew with --restart", c.Out)}
	}
	return nil
}

// screen runs the screening into part, and makes the output of it.
func (c *screenCommand) screen(ctx context.Context, s streams, service *assess.Service, plan screening.Plan, list candidateList, part *part) error {
	if part.done.Rows > 0 {
		_, _ = fmt.Fprintf(s.err, "going on behind %d candidates\n", part.done.Rows)
	}
	progress, begun := new(screening.Progress), time.Now()
	bytesRead, size := list.counted()
	stop := showProgress(s.err, progress, bytesRead, size)
	summary, err := screening.Run(ctx, service, plan, list.rows(s.err), screening.Options{
		Workers: c.Workers, ChunkRows: c.ChunkRows, After: part.done, Progress: progress,
	}, part)
	stop()
	switch {
	case ctx.Err() != nil:
		return fmt.Errorf("stopped behind %d candidates: the same command goes on from there", summary.Rows)
	case isListError(err):
		return errors.Join(inputError{fmt.Errorf("%s: %w", filepath.Base(c.Candidates), err)}, part.discard())
	case err != nil:
		return requestError(err)
	}
	if err := part.finish(summary); err != nil {
		return err
	}
	return printScreening(s, summary, progress.Pairs.Load(), time.Since(begun), c.Out)
}

// isListError says that the list of candidates is at fault: a run over the same
// list would end there again.
func isListError(err error) bool {
	_, list := errors.AsType[*intake.ListError](err)
	_, long := errors.AsType[*intake.TooManyRowsError](err)
	return list || long
}

// plan reads the sites and puts the plan together. A site that cannot be read is
// an error: without it the answer for whom it serves would be a wrong one.
func (c *screenCommand) plan(s streams) (screening.Plan, error) {
	plan := screening.Plan{
		FrequencyGHz: c.FrequencyGHz, CriteriaSet: assess.CriteriaSet(c.CriteriaSet), RangeM: 1000 * c.RangeKM,
		CandidateHeightM: c.HeightM, CandidateHeightAbove: intake.HeightAbove(c.HeightAbove),
		CoverHeightM: c.CoverM, MastLimitM: &c.MastLimitM,
	}
	format, err := listFormat("--sites", c.Sites)
	if err != nil {
		return plan, err
	}
	f, err := os.Open(c.Sites)
	if err != nil {
		return plan, fileError(c.Sites, err)
	}
	defer f.Close()
	name := filepath.Base(c.Sites)
	list, err := intake.ReadSites(f, format, intake.Options{MaxRows: screening.MaxSites * intake.MaxSectors})
	if err != nil {
		return plan, inputError{fmt.Errorf("%s: %w", name, err)}
	}
	if len(list.Problems) > 0 {
		return plan, inputError{errors.New(name + ": " + problems(format, list.Problems))}
	}
	for _, w := range list.Warnings[:min(mostWarnings, len(list.Warnings))] {
		_, _ = fmt.Fprintf(s.err, "%s: %s\n", name, warningText(format, w))
	}
	plan.Sites = list.Sites
	if c.RangeKM == 0 { // it would be the default
		return plan, inputError{errors.New("--range-km is 0; it must be more")}
	}
	for _, site := range plan.Sites {
		if site.FrequencyGHz == 0 && c.FrequencyGHz == 0 {
			return plan, inputError{fmt.Errorf("--frequency-ghz is missing, and site %s states no frequency", site.ID)}
		}
	}
	return plan, c.planError(plan.Validate())
}

// planError says which flag, or which site, is at fault.
func (c *screenCommand) planError(err error) error {
	invalid, ok := errors.AsType[*assess.InvalidError](err)
	if !ok {
		return err
	}
	flags := map[string]string{
		"/frequency_ghz": "--frequency-ghz", "/criteria_set": "--criteria-set", "/range_m": "--range-km (in m)",
		"/candidate_height_m": "--height-m", "/candidate_height_above": "--height-above",
		"/cover_height_m": "--cover-m", "/mast_limit_m": "--mast-limit-m", "/sites": "--sites",
	}
	texts := make([]string, len(invalid.Fields))
	for i, f := range invalid.Fields {
		texts[i] = f.Pointer + " " + f.Detail
		if flag := flags[f.Pointer]; flag != "" {
			texts[i] = flag + " " + f.Detail
		}
	}
	return inputError{errors.New(strings.Join(texts, "; "))}
}

// problems names the first of the rows at fault.
func problems(format intake.Format, found []intake.RowProblem) string {
	const most = 5
	texts := make([]string, 0, most)
	for _, p := range found[:min(most, len(found))] {
		texts = append(texts, warningText(format, intake.Warning(p)))
	}
	if more := len(found) - most; more > 0 {
		texts = append(texts, fmt.Sprintf("and %d rows more", more))
	}
	return strings.Join(texts, "; ")
}

// warningText is what is said of a row as one sentence.
func warningText(format intake.Format, w intake.Warning) string {
	parts := []string{fmt.Sprintf("line %d", w.Line)}
	if format == intake.GeoJSON {
		parts[0] = fmt.Sprintf("feature %d", w.Line)
	}
	if w.ID != "" {
		parts = append(parts, "("+w.ID+")")
	}
	parts[len(parts)-1] += ":"
	if w.Field != "" {
		parts = append(parts, w.Field)
	}
	return strings.Join(append(parts, w.Detail), " ")
}

// listFormat is the format of a list by the ending of its file.
func listFormat(flag, path string) (intake.Format, error) {
	switch ending := strings.ToLower(filepath.Ext(path)); {
	case ending == ".csv", ending == ".tsv" && flag != "--out":
		return intake.CSV, nil
	case ending == ".geojson", ending == ".json" && flag != "--out":
		return intake.GeoJSON, nil
	case ending == ".ndjson":
		return intake.NDJSON, nil
	}
	if flag == "--out" {
		return "", inputError{fmt.Errorf("%s %s: the format is told by the ending; it must be .csv, .geojson or .ndjson", flag, path)}
	}
	return "", inputError{fmt.Errorf("%s %s: the format is told by the ending; it must be .csv, .tsv, .geojson, .json or .ndjson", flag, path)}
}

// fileError is bad input: a file that cannot be opened.
func fileError(path string, err error) error {
	if where, ok := errors.AsType[*fs.PathError](err); ok {
		err = where.Err
	}
	return inputError{fmt.Errorf("%s: %w", path, err)}
}

// printScreening prints what a run found.
func printScreening(s streams, sum screening.Summary, pairs int64, took time.Duration, out string) error {
	var text strings.Builder
	line := func(format string, args ...any) { fmt.Fprintf(&text, format+"\n", args...) }
	line("%d candidates: %d clear, %d marginal, %d obstructed, %d unknown, %d without a site in range, %d invalid, %d failed",
		sum.Rows, sum.Clear, sum.Marginal, sum.Obstructed, sum.Unknown, sum.NoSiteInRange, sum.Invalid, sum.Failed)
	line("%d of them with a mast at the candidate", sum.WithMast)
	line("%d pairs; %d judged in %.1f s, %.0f pairs/s", sum.Pairs, pairs, took.Seconds(), float64(pairs)/took.Seconds())
	for _, p := range sum.SiteProblems {
		line("site %s cannot be judged: %s", p.ID, p.Detail)
	}
	line("written to %s", filepath.Base(out))
	_, err := io.WriteString(s.out, text.String())
	return err
}
