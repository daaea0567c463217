package geodesy

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/paulmach/orb"
	"github.com/tidwall/geodesic"

	"ridgehop/internal/sharedtest"
)

// checkFile is a file of published check values in the shared data folder.
type checkFile struct {
	Tol   map[string]float64 `json:"tol"`
	Cases []checkCase        `json:"cases"`
}

type checkCase struct {
	ID     string             `json:"id"`
	In     map[string]float64 `json:"in"`
	Expect map[string]float64 `json:"expect"`
	Tol    map[string]float64 `json:"tol"`
}

// readChecks reads a file of the shared folder's checks, or skips the test.
func readChecks(t *testing.T, name string, into any) {
	t.Helper()
	path := filepath.Join(sharedtest.Dir(t), "standards", "checks", name)
	data, err := os.ReadFile(path)
	if os.IsNotExist(err) {
		t.Skipf("the shared data folder holds no %s: its check values were not compared", name)
	}
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, into); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
}

// runChecks compares every case of a file with what compute gives, azimuths and
// declinations modulo 360, and logs the worst error of each quantity.
func runChecks(t *testing.T, name string, compute func(*testing.T, map[string]float64) map[string]float64) {
	t.Helper()
	var file checkFile
	readChecks(t, name, &file)
	if len(file.Cases) == 0 {
		t.Fatalf("%s: got no cases, want some", name)
	}
	worst := map[string]float64{}
	for _, c := range file.Cases {
		got := compute(t, c.In)
		for quantity, want := range c.Expect {
			value, ok := got[quantity]
			if !ok {
				t.Errorf("%s: got no %s, want %v", c.ID, quantity, want)
				continue
			}
			tolerance, ok := c.Tol[quantity]
			if !ok {
				tolerance = file.Tol[quantity]
			}
			miss := math.Abs(value - want)
			if strings.HasSuffix(quantity, "_deg") {
				miss = math.Abs(math.Remainder(value-want, 360))
			}
			if !(miss <= tolerance) {
				t.Errorf("%s: %s: got %.12g, want %.12g (within %.3g)", c.ID, quantity, value, want, tolerance)
			}
			worst[quantity] = max(worst[quantity], miss)
		}
	}
	t.Logf("%s: %d cases, worst errors %v", name, len(file.Cases), worst)
}

func TestSharedGeodesics(t *testing.T) {
	for _, name := range []string{"geodesic_wgs84_geodtest.json", "geodesic_wgs84_links.json"} {
		runChecks(t, name, func(t *testing.T, in map[string]float64) map[string]float64 {
			a, b := orb.Point{in["lon1"], in["lat1"]}, orb.Point{in["lon2"], in["lat2"]}
			l, err := NewLine(a, b)
			if err != nil {
				t.Fatal(err)
			}
			off, err := NewLine(Direct(a, l.AzimuthADeg(), l.LengthM()), b)
			if err != nil || off.LengthM() > 1e-6 {
				t.Errorf("%v to %v: the direct problem ends %g m from b (%v), want 0", a, b, off.LengthM(), err)
			}
			return map[string]float64{
				"s_m": l.LengthM(), "az1_deg": l.AzimuthADeg(), "az2_deg": l.AzimuthBDeg() + 180,
			}
		})
	}
}

// These lines lie on other ellipsoids. The room itself only measures on WGS 84,
// so they check the kept library beneath it, and not NewLine.
func TestSharedGeodesicsOnOtherEllipsoids(t *testing.T) {
	runChecks(t, "geodesic_published_ellipsoids.json", func(_ *testing.T, in map[string]float64) map[string]float64 {
		var length, azimuthA, azimuthB float64
		geodesic.NewEllipsoid(in["a_m"], in["f"]).
			Inverse(in["lat1"], in["lon1"], in["lat2"], in["lon2"], &length, &azimuthA, &azimuthB)
		return map[string]float64{"s_m": length, "az1_deg": azimuthA, "az2_deg": azimuthB}
	})
}

func TestSharedMagneticField(t *testing.T) {
	runChecks(t, "wmm2025_test_values.json", func(t *testing.T, in map[string]float64) map[string]float64 {
		f := magnetic(t, orb.Point{in["lon"], in["lat"]}, in["alt_km"]*1000, at(in["year"]))
		return map[string]float64{
			"D_deg": f.DeclinationDeg, "I_deg": f.InclinationDeg, "H_nt": f.HorizontalNT,
			"X_nt": f.NorthNT, "Y_nt": f.EastNT, "Z_nt": f.VerticalNT, "F_nt": f.TotalNT,
		}
	})
}

func TestSharedMagneticCoefficients(t *testing.T) {
	var file struct {
		Rows [][6]float64 `json:"rows"`
	}
	readChecks(t, "wmm2025_coefficients.json", &file)
	if len(file.Rows) != len(wmm2025) {
		t.Fatalf("got %d coefficients, want %d", len(wmm2025), len(file.Rows))
	}
	for i, row := range file.Rows {
		n, m := int(row[0]), int(row[1])
		if got, want := wmm2025[n*(n+1)/2+m-1], (gauss{row[2], row[3], row[4], row[5]}); got != want {
			t.Errorf("row %d, degree %d, order %d: got %v, want %v", i, n, m, got, want)
		}
	}
}
