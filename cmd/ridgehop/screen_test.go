package main

import (
	"bytes"
	"context"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"iter"
	"log/slog"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/internal/geodesy"
	"ridgehop/internal/screening"
	"ridgehop/internal/screening/intake"
	"ridgehop/internal/sharedtest"
	"ridgehop/profile"

	"github.com/paulmach/orb"
)

// hills is a terrain of one raster that covers the earth, with hills up to 60 m
// high and 3 km apart, sampled every 50 m. Along one meridian nothing is known.
type hills struct{}

// Sample implements profile.Terrain.
func (hills) Sample(ctx context.Context, path profile.Path, _ profile.Sampling, into *profile.Profile) error {
	n := int(max(math.Ceil(path.LengthM/50), profile.MinIntervals)) + 1
	into.Resize(n)
	into.SpacingM, into.PixelM = path.LengthM/float64(n-1), 100
	for i := range n {
		t := float64(i) / float64(n-1)
		lon, lat := path.A[0]+t*(path.B[0]-path.A[0]), path.A[1]+t*(path.B[1]-path.A[1])
		into.DistanceM[i], into.SourceIndex[i] = t*path.LengthM, 0
		into.GroundM[i] = 30 + 30*math.Sin(lon*160)*math.Cos(lat*230)
		if math.Abs(lon-7.08) < 0.001 {
			into.GroundM[i], into.SourceIndex[i] = math.NaN(), -1
		}
	}
	into.Sources = append(into.Sources, profile.Source{Name: "hills.tif", Version: "1", Kind: profile.KindSurface, Samples: n, ErrorM: 3, CorrelationM: 100})
	return ctx.Err()
}

// results is a sink that keeps everything.
type results []*screening.Result

func (r *results) Put(one *screening.Result) error { *r = append(*r, one); return nil }
func (*results) Commit(screening.Summary) error    { return nil }

// strewn are seeded candidates around a place, some of them too low for it.
func strewn(n int, seed uint64, around orb.Point, degrees float64) []intake.Candidate {
	random := rand.New(rand.NewPCG(seed, 1))
	out := make([]intake.Candidate, n)
	for i := range out {
		out[i] = intake.Candidate{
			ID: fmt.Sprintf("c%04d", i), AntennaHeightM: 2 + 20*random.Float64(), HeightAbove: intake.Ground,
			Lon: around[0] + degrees*(2*random.Float64()-1), Lat: around[1] + degrees/2*(2*random.Float64()-1),
		}
	}
	return out
}

func rowsOf(candidates []intake.Candidate) iter.Seq2[intake.Row, error] {
	return func(yield func(intake.Row, error) bool) {
		for i, c := range candidates {
			if !yield(intake.Row{Line: i + 2, Candidate: c}, nil) {
				return
			}
		}
	}
}

// single judges every pair by itself, as a caller who asks for one link at a
// time would, and orders the answers by the documented preference.
func single(t *testing.T, service *assess.Service, plan screening.Plan, c intake.Candidate) (found []assess.Assessment) {
	t.Helper()
	for _, s := range plan.Sites {
		line, err := geodesy.NewLine(orb.Point{s.Lon, s.Lat}, c.Point())
		if err != nil {
			t.Fatal(err)
		}
		if line.LengthM() > plan.RangeM {
			continue
		}
		a, err := service.Assess(context.Background(), assess.Request{
			A:            assess.End{Name: s.ID, Lon: s.Lon, Lat: s.Lat, Placed: true, AntennaHeightM: s.AntennaHeightM},
			B:            assess.End{Lon: c.Lon, Lat: c.Lat, Placed: true, AntennaHeightM: c.AntennaHeightM},
			FrequencyGHz: plan.FrequencyGHz, CoverHeightM: plan.CoverHeightM,
		})
		if err != nil {
			t.Fatal(err)
		}
		found = append(found, *a)
	}
	verdicts := "clear marginal obstructed unknown"
	slices.SortStableFunc(found, func(a, b assess.Assessment) int {
		keys := func(a assess.Assessment) []float64 {
			mast, margin := mastOf(a), math.Inf(1)
			for _, c := range a.Judgement.Clearance {
				margin = min(margin, c.MinRatio-c.F1Fraction)
			}
			if math.IsNaN(mast) {
				mast = 1e9
			}
			if math.IsNaN(margin) {
				margin = -1e9
			}
			sure := max(-1, math.Round(100*a.Judgement.Confidence))
			if math.IsNaN(sure) {
				sure = -1
			}
			return []float64{float64(strings.Index(verdicts, string(a.Judgement.Verdict))), mast, -sure, -margin, a.Link.Path.LengthM}
		}
		return slices.Compare(keys(a), keys(b))
	})
	return found
}

// mastOf is the extra height at B up to 10 m.
func mastOf(a assess.Assessment) float64 {
	if m := a.Judgement.Raise.BM; m <= 10 && a.Judgement.Verdict != profile.Unknown {
		return m
	}
	return math.NaN()
}

// same compares a result with what single assessments say.
func same(t *testing.T, got *screening.Result, want []assess.Assessment) {
	t.Helper()
	if got.SitesInRange != len(want) || len(got.Choices) != min(3, len(want)) {
		t.Fatalf("%s: got %d sites, %d choices; want %d sites", got.Candidate.ID, got.SitesInRange, len(got.Choices), len(want))
	}
	for i, c := range got.Choices {
		w := want[i]
		if c.SiteID != w.Request.A.Name || string(c.Verdict) != string(w.Judgement.Verdict) {
			t.Errorf("%s, choice %d: got %s %s, want %s %s", got.Candidate.ID, i, c.SiteID, c.Verdict, w.Request.A.Name, w.Judgement.Verdict)
		}
		for _, v := range []struct {
			name      string
			got, want float64
		}{
			{"confidence", c.Confidence, w.Judgement.Confidence}, {"mast", c.MastM, mastOf(w)}, {"length", c.LengthM, w.Link.Path.LengthM},
			{"azimuth", c.AzimuthDeg, w.Link.Path.AzimuthBDeg}, {"site azimuth", c.SiteAzimuthDeg, w.Link.Path.AzimuthADeg}, {"tilt", c.TiltDeg, w.Judgement.TiltBDeg},
		} {
			if v.got != v.want && !(math.IsNaN(v.got) && math.IsNaN(v.want)) {
				t.Errorf("%s, choice %d, %s: got %v, want %v", got.Candidate.ID, i, v.name, v.got, v.want)
			}
		}
		if c.Reasons[0] != string(w.Judgement.Reasons[0].Code) {
			t.Errorf("%s, choice %d: got %v, want %s first", got.Candidate.ID, i, c.Reasons, w.Judgement.Reasons[0].Code)
		}
	}
}

// Thousands of links judged at once answer as each would by itself.
func TestScreeningAnswersLikeSingleAssessments(t *testing.T) {
	service := assess.NewService(hills{})
	plan := screening.Plan{FrequencyGHz: 5.8, RangeM: 12_000}
	for i, c := range strewn(6, 1, orb.Point{7, 46}, 0.1) {
		plan.Sites = append(plan.Sites, intake.Site{ID: fmt.Sprint("site", i), Lon: c.Lon, Lat: c.Lat, AntennaHeightM: 25, HeightAbove: intake.Ground})
	}
	candidates := strewn(300, 2, orb.Point{7, 46}, 0.2)
	var got results
	sum, err := screening.Run(context.Background(), service, plan, rowsOf(candidates), screening.Options{Workers: 8, ChunkRows: 128}, &got)
	if err != nil {
		t.Fatal(err)
	}
	if sum.Clear == 0 || sum.Marginal == 0 || sum.Obstructed == 0 || sum.Unknown == 0 || sum.NoSiteInRange == 0 || sum.WithMast == 0 {
		t.Fatalf("got %+v: the terrain is to give every answer", sum)
	}
	for i, c := range candidates {
		if got[i].Candidate != c {
			t.Fatalf("result %d: got %s, want %s", i, got[i].Candidate.ID, c.ID)
		}
		if got[i].Status == screening.NoSiteInRange && got[i].SitesInRange != 0 {
			t.Errorf("%s: got %d sites in range and none", c.ID, got[i].SitesInRange)
		}
		same(t, got[i], single(t, service, plan, c))
	}
}

// The same over real rasters and real sites, through the command line.
func TestScreenOverRealRasters(t *testing.T) {
	shared, folder := sharedtest.Dir(t), t.TempDir()
	rasters := filepath.Join(folder, "rasters")
	if err := os.Mkdir(rasters, 0o750); err != nil {
		t.Fatal(err)
	}
	for _, tile := range []string{"N56W005.hgt", "N56W006.hgt"} {
		if err := os.Symlink(filepath.Join(shared, "elevation", tile), filepath.Join(rasters, tile)); err != nil {
			t.Fatal(err)
		}
	}
	plan := screening.Plan{FrequencyGHz: 5.8, RangeM: 30_000, Sites: broadcastSites(t, shared)}
	candidates := strewn(80, 3, orb.Point{-4.3, 56.2}, 0.2)
	writeLists(t, folder, plan.Sites, candidates)
	text := screened(t, "--rasters", rasters, "--sites", folder+"/sites.csv", "--candidates", folder+"/candidates.csv",
		"--out", folder+"/out.ndjson", "--frequency-ghz", "5.8", "--range-km", "30", "--workers", "4", "--chunk-rows", "32")
	if !strings.HasPrefix(text, "80 candidates: ") || !strings.Contains(text, "pairs/s") {
		t.Errorf("got %s", text)
	}
	loaded, err := loadTerrain(context.Background(), terrainFlags{Rasters: []string{rasters}, CacheMB: 64, Open: 8}, "", slog.New(slog.DiscardHandler))
	if err != nil {
		t.Fatal(err)
	}
	defer loaded.Close()
	inside, err := coveredPlaces(context.Background(), loaded)
	if err != nil {
		t.Fatal(err)
	}
	if !inside(orb.Point{-4.3, 56.2}) || !inside(orb.Point{-5.9, 56.9}) || inside(orb.Point{56.2, -4.3}) || inside(orb.Point{-3.9, 56.2}) {
		t.Error("the two rasters do not cover what they do, or more")
	}
	service, verdicts := assess.NewService(loaded), map[string]int{}
	lines := strings.Split(strings.TrimSpace(contentOf(t, folder+"/out.ndjson")), "\n")
	for i, c := range candidates {
		var got struct {
			ID      string
			Choices []struct {
				SiteID  string `json:"site_id"`
				Verdict string
				MastM   *float64 `json:"mast_m"`
			}
		}
		if err := json.Unmarshal([]byte(lines[i]), &got); err != nil {
			t.Fatal(err)
		}
		want := single(t, service, plan, c)
		if got.ID != c.ID || len(got.Choices) != min(3, len(want)) {
			t.Fatalf("line %d: got %s, want %s with %d sites", i, lines[i], c.ID, len(want))
		}
		for k, choice := range got.Choices {
			mast := mastOf(want[k])
			if choice.SiteID != want[k].Request.A.Name || choice.Verdict != string(want[k].Judgement.Verdict) ||
				(choice.MastM == nil) != math.IsNaN(mast) || choice.MastM != nil && !(*choice.MastM >= mast-1e-9 && *choice.MastM < mast+0.01) {
				t.Errorf("%s, choice %d: got %+v, want %s %s with a mast of %v", c.ID, k, choice, want[k].Request.A.Name, want[k].Judgement.Verdict, mast)
			}
			verdicts[choice.Verdict]++
		}
	}
	if verdicts["clear"] == 0 || verdicts["obstructed"] == 0 {
		t.Errorf("got %v, want both clear and obstructed", verdicts)
	}
}

// broadcastSites are the registered sites inside the two rasters.
func broadcastSites(t *testing.T, shared string) (sites []intake.Site) {
	t.Helper()
	f, err := os.Open(filepath.Join(shared, "truth", "ofcom_dab_sites_shared.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows {
		if !strings.HasPrefix(row[0], "N56") {
			continue
		}
		s := intake.Site{ID: row[1], HeightAbove: intake.Ground}
		if _, err := fmt.Sscan(row[4]+" "+row[5]+" "+row[7], &s.Lat, &s.Lon, &s.AntennaHeightM); err != nil {
			t.Fatal(err)
		}
		sites = append(sites, s)
	}
	if len(sites) < 5 {
		t.Fatalf("got %d sites, want those of both rasters", len(sites))
	}
	return sites
}

// writeLists writes sites.csv and candidates.csv.
func writeLists(t *testing.T, folder string, sites []intake.Site, candidates []intake.Candidate) {
	t.Helper()
	var s, c strings.Builder
	s.WriteString("id,lon,lat,antenna_height_m\n")
	for _, site := range sites {
		fmt.Fprintf(&s, "%s,%v,%v,%v\n", site.ID, site.Lon, site.Lat, site.AntennaHeightM)
	}
	c.WriteString("id,lon,lat,height_m\n")
	for _, one := range candidates {
		fmt.Fprintf(&c, "%s,%v,%v,%v\n", one.ID, one.Lon, one.Lat, one.AntennaHeightM)
	}
	for name, text := range map[string]string{"sites.csv": s.String(), "candidates.csv": c.String()} {
		if err := os.WriteFile(filepath.Join(folder, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
}

// screened runs ridgehop screen, which must succeed, and returns what it prints.
func screened(t *testing.T, args ...string) string {
	t.Helper()
	var out, errs bytes.Buffer
	if code := run(context.Background(), append([]string{"screen"}, args...), streams{strings.NewReader(""), &out, &errs}); code != exitOK {
		t.Fatalf("got %d %s", code, errs.String())
	}
	return out.String()
}

func contentOf(t *testing.T, path string) string {
	t.Helper()
	raw, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(raw)
}
