package api

import (
	"encoding/json"
	"math"
	"net/http"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/assess"
)

const radioLink = `{"a":{"name":"North","lon":-20.5,"lat":-30.5,"antenna_height_m":60},
 "b":{"name":"South","lon":-20.4,"lat":-30.4,"antenna_height_m":60},"frequency_ghz":18.7,
 "radio":{"a":{"radio":"demo-backhaul-18ghz","antenna":"dish-0.6m-18ghz","feeder_loss_db":1.5},
          "b":{"radio":"demo-backhaul-18ghz","antenna":"dish-0.6m-18ghz"},
          "target":{"capacity_mbps":100,"margin_db":10,"availability_percent":99.9},
          "climate":{"dn1":-200,"rain_rate_mmh":30,"monthly":[{"rain_mm":1,"temperature_c":2}]},"date":"2026-12-01",
          "neighbours":[{"name":"N","lon":-20.3,"lat":-30.3,"antenna_amsl_m":200}]}}`

func TestRadioAnswersConform(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	for name, terrain := range map[string]hills{"known": {}, "void": {void: true}} {
		t.Run(name, func(t *testing.T) {
			antennas, _ := assess.NewAntennaRegister(nil, nil)
			radios, _ := assess.NewRadioRegister(nil, nil)
			h := service(t, func(d *Dependencies) {
				d.Assessor = assess.NewService(terrain).WithEquipment(assess.Equipment{Antennas: antennas, Radios: radios})
			})
			made := ask(h, http.MethodPost, "/v1/assessments", radioLink)
			if made.Code != http.StatusCreated {
				t.Fatalf("got %d %s", made.Code, made.Body)
			}
			conforms(t, contract, "Assessment", made.Body.Bytes())
		})
	}
}

// The lines of the budget add up to the received level that is shown beside
// them, and both directions differ by what differs between the ends.
func TestBudgetAddsUp(t *testing.T) {
	h := service(t, nil)
	var got Assessment
	if err := json.Unmarshal(ask(h, http.MethodPost, "/v1/assessments", radioLink).Body.Bytes(), &got); err != nil {
		t.Fatal(err)
	}
	for name, b := range map[string]Budget{"a_to_b": got.Radio.AToB, "b_to_a": got.Radio.BToA} {
		sum := 0.0
		for _, line := range b.Lines {
			sum += line.Value
			if line.Source == "" {
				t.Errorf("%s: line %s has no source", name, line.Code)
			}
		}
		if b.ReceivedDbm == nil || math.Abs(sum-*b.ReceivedDbm) > 0.006 {
			t.Errorf("%s: the lines add up to %.4f, received is %v", name, sum, b.ReceivedDbm)
		}
	}
	if got, want := *got.Radio.BToA.EirpDbm-*got.Radio.AToB.EirpDbm, 1.5; math.Abs(got-want) > 1e-9 {
		t.Errorf("EIRP of B over A: got %g, want the feeder loss of %g", got, want)
	}
	if got.Radio.Aim.A.MagneticAzimuthDeg == nil || got.Radio.Choice == nil || len(got.Radio.Neighbours) != 1 {
		t.Errorf("parts are missing: %+v", got.Radio)
	}
}

func TestAskedRadioKeepsEveryField(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	request, err := contract.DecodeAssessmentRequest([]byte(radioLink))
	if err != nil {
		t.Fatal(err)
	}
	got := request.Asked().Radio
	want := &assess.RadioRequest{
		A:       assess.TerminalRequest{RadioName: "demo-backhaul-18ghz", AntennaName: "dish-0.6m-18ghz", FeederLossDB: 1.5},
		B:       assess.TerminalRequest{RadioName: "demo-backhaul-18ghz", AntennaName: "dish-0.6m-18ghz"},
		Target:  assess.Target{CapacityMbps: 100, MarginDB: 10, AvailabilityPercent: 99.9},
		Climate: assess.ClimateRequest{DN1: new(-200.0), RainRateMMH: new(30.0), Monthly: []assess.Month{{RainMM: 1, TemperatureC: 2}}},
		Date:    "2026-12-01", Choose: true,
		Neighbours: []assess.NeighbourRequest{{Name: "N", Lon: -20.3, Lat: -30.3, AntennaAMSLM: 200}},
	}
	if diff := cmp.Diff(got, want); diff != "" {
		t.Error(diff)
	}
}

// Every model of the generic registers survives the way through the contract's
// types and back.
func TestModelsAreTheSameInBothWorlds(t *testing.T) {
	antennas, err := assess.NewAntennaRegister(nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	radios, err := assess.NewRadioRegister(nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range must(antennas.List(t.Context())) {
		if diff := cmp.Diff(same[assess.Antenna](same[Antenna](e.Model)), e.Model); diff != "" {
			t.Errorf("%s: %s", e.Model.Name, diff)
		}
	}
	for _, e := range must(radios.List(t.Context())) {
		if diff := cmp.Diff(same[assess.Radio](same[Radio](e.Model)), e.Model); diff != "" {
			t.Errorf("%s: %s", e.Model.Name, diff)
		}
	}
}

func must[T any](value T, err error) T {
	if err != nil {
		panic(err)
	}
	return value
}

const ownAntenna = `{"name":"own panel","class":"panel","min_ghz":5.1,"max_ghz":5.9,"gain_dbi":17,
 "azimuth_beamwidth_deg":25,"elevation_beamwidth_deg":25,"polarisations":["vertical"],"pattern":{"reference":"f1336_sector"}}`

func TestRegistersOverHTTP(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, func(d *Dependencies) {
		d.Antennas, _ = assess.NewAntennaRegister(nil, shelf{})
		d.Radios, _ = assess.NewRadioRegister(nil, shelf{})
	})
	list := ask(h, http.MethodGet, "/v1/antennas", "")
	conforms(t, contract, "AntennaList", list.Body.Bytes())
	conforms(t, contract, "RadioList", ask(h, http.MethodGet, "/v1/radios", "").Body.Bytes())
	made := ask(h, http.MethodPost, "/v1/antennas", ownAntenna)
	if made.Code != http.StatusCreated || made.Header().Get("Location") != "/v1/antennas/own%20panel" {
		t.Fatalf("got %d, Location %q: %s", made.Code, made.Header().Get("Location"), made.Body)
	}
	if got := ask(h, http.MethodGet, made.Header().Get("Location"), ""); got.Code != http.StatusOK || got.Body.String() != made.Body.String() {
		t.Errorf("read: got %d %s", got.Code, got.Body)
	}
	for _, c := range []struct {
		name, method, path, body string
		status                   int
		contains                 string
	}{
		{"a name twice", http.MethodPost, "/v1/antennas", ownAntenna, 409, "taken"},
		{"gain that the beams forbid", http.MethodPost, "/v1/antennas", strings.Replace(strings.Replace(ownAntenna, "own", "bad", 1), `"gain_dbi":17`, `"gain_dbi":40`, 1), 422, "/gain_dbi"},
		{"unknown field", http.MethodPost, "/v1/antennas", strings.Replace(ownAntenna, "gain_dbi", "gain_dbd", 1), 422, "gain_dbi is"},
		{"a generic one", http.MethodDelete, "/v1/antennas/dish-0.6m-18ghz", "", 409, "own"},
		{"taken away", http.MethodDelete, "/v1/antennas/own%20panel", "", 204, ""},
		{"taken away twice", http.MethodDelete, "/v1/antennas/own%20panel", "", 404, "this name"},
		{"unknown radio", http.MethodGet, "/v1/radios/none", "", 404, "this name"},
		{"thresholds out of order", http.MethodPost, "/v1/radios", `{"name":"x","min_ghz":5,"max_ghz":6,"min_power_dbm":0,"max_power_dbm":20,"power_step_db":1,"max_input_dbm":-20,
		  "modulations":[{"name":"a","threshold_dbm":-60,"capacity_mbps":100,"bandwidth_mhz":20},{"name":"b","threshold_dbm":-80,"capacity_mbps":200,"bandwidth_mhz":20}]}`, 422, "/modulations/1/threshold_dbm"},
	} {
		if got := ask(h, c.method, c.path, c.body); got.Code != c.status || !strings.Contains(got.Body.String(), c.contains) {
			t.Errorf("%s: got %d %s, want %d with %q", c.name, got.Code, got.Body, c.status, c.contains)
		}
	}
}
