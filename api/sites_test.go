package api

import (
	"encoding/base64"
	"fmt"
	"net/http"
	"slices"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"ridgehop/internal/screening/sites"
	"ridgehop/internal/store"
)

const (
	mill = `{"id":"mill","name":"Mill Hill","lon":-20.5,"lat":-30.5,"antenna_height_m":25,"frequency_ghz":5.6,"polarisation":"slant","range_m":8000,
 "sectors":[{"azimuth_deg":45,"width_deg":90,"tilt_deg":-2,"antenna":"panel","radio":"r1"},{"azimuth_deg":180}]}`
	bare = `{"id":"bare","lon":0,"lat":0,"antenna_height_m":10}`
)

func TestASiteIsMadeReadReplacedAndTakenAway(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, nil)
	made := ask(h, http.MethodPost, "/v1/sites", mill)
	if made.Code != http.StatusCreated || made.Header().Get("Location") != "/v1/sites/mill" {
		t.Fatalf("got %d at %q: %s", made.Code, made.Header().Get("Location"), made.Body)
	}
	conforms(t, contract, "Site", made.Body.Bytes())
	got := decoded[Site](t, made.Body.Bytes())
	slant := SitePolarisationSlant
	want := Site{
		Id: "mill", Name: "Mill Hill", Lon: -20.5, Lat: -30.5, AntennaHeightM: 25, HeightAbove: "ground", FrequencyGhz: new(5.6),
		Polarisation: &slant, RangeM: new(8000.0), CreatedAt: got.CreatedAt, ChangedAt: got.CreatedAt,
		Sectors: []SiteSector{
			{AzimuthDeg: 45, WidthDeg: 90, TiltDeg: -2, Antenna: new("panel"), Radio: new("r1")}, {AzimuthDeg: 180, WidthDeg: 360},
		},
	}
	if diff := cmp.Diff(got, want); diff != "" || got.CreatedAt.IsZero() {
		t.Error(diff)
	}
	read := ask(h, http.MethodGet, "/v1/sites/mill", "")
	if read.Code != http.StatusOK || read.Body.String() != made.Body.String() || read.Header().Get("ETag") != made.Header().Get("ETag") {
		t.Errorf("read: got %d %s, want %s", read.Code, read.Body, made.Body)
	}
	if again := ask(h, http.MethodPost, "/v1/sites", mill); again.Code != http.StatusConflict || problemIn(t, again).Type != "/docs#problem-conflict" {
		t.Errorf("the same id: got %d %s", again.Code, again.Body)
	}
	same := ask(h, http.MethodPut, "/v1/sites/mill", mill)
	if same.Code != http.StatusOK || same.Header().Get("ETag") != made.Header().Get("ETag") || same.Header().Get("Location") != "" {
		t.Errorf("the same once more: got %d %s", same.Code, same.Body)
	}
	other := ask(h, http.MethodPut, "/v1/sites/mill", strings.Replace(bare, "bare", "mill", 1))
	conforms(t, contract, "Site", other.Body.Bytes())
	if s := decoded[Site](t, other.Body.Bytes()); other.Code != http.StatusOK || s.Name != "" || s.FrequencyGhz != nil || len(s.Sectors) != 1 {
		t.Errorf("another: got %d %s, want what it leaves out gone", other.Code, other.Body)
	}
	added := ask(h, http.MethodPut, "/v1/sites/bare", bare)
	if added.Code != http.StatusCreated || added.Header().Get("Location") != "/v1/sites/bare" {
		t.Errorf("put a new one: got %d %s", added.Code, added.Body)
	}
	if gone := ask(h, http.MethodDelete, "/v1/sites/mill", ""); gone.Code != http.StatusNoContent || gone.Body.Len() != 0 {
		t.Errorf("delete: got %d %s", gone.Code, gone.Body)
	}
	for _, method := range []string{http.MethodGet, http.MethodDelete} {
		if none := ask(h, method, "/v1/sites/mill", ""); none.Code != http.StatusNotFound || !strings.Contains(problemIn(t, none).Detail, "No site") {
			t.Errorf("%s after it is gone: got %d %s", method, none.Code, none.Body)
		}
	}
}

func TestETagsOfSites(t *testing.T) {
	h := service(t, nil)
	first := ask(h, http.MethodPut, "/v1/sites/a", strings.Replace(bare, "bare", "a", 1)).Header().Get("ETag")
	if !strings.HasPrefix(first, `"`) || len(first) < 10 {
		t.Fatalf("got ETag %s, want a strong one", first)
	}
	if not := ask(h, http.MethodGet, "/v1/sites/a", "", "If-None-Match", first); not.Code != http.StatusNotModified || not.Body.Len() != 0 {
		t.Errorf("If-None-Match: got %d, want 304", not.Code)
	}
	taller := `{"id":"a","lon":0,"lat":0,"antenna_height_m":11}`
	for _, stale := range []string{`"0123"`, "W/" + first, strings.Trim(first, `"`), "", `"`, `, ,`, first + "x"} {
		for _, got := range []int{
			ask(h, http.MethodPut, "/v1/sites/a", taller, "If-Match", stale).Code,
			ask(h, http.MethodDelete, "/v1/sites/a", "", "If-Match", stale).Code,
		} {
			if got != http.StatusPreconditionFailed {
				t.Errorf("If-Match %q: got %d, want 412", stale, got)
			}
		}
	}
	failed := ask(h, http.MethodPut, "/v1/sites/a", taller, "If-Match", `"0123"`)
	if p := problemIn(t, failed); p.Type != "/docs#problem-precondition-failed" {
		t.Errorf("got %s", failed.Body)
	}
	if now := ask(h, http.MethodGet, "/v1/sites/a", "").Header().Get("ETag"); now != first {
		t.Error("what failed has changed the site")
	}
	second := ask(h, http.MethodPut, "/v1/sites/a", taller, "If-Match", `"other", `+first)
	if second.Code != http.StatusOK || second.Header().Get("ETag") == first {
		t.Errorf("If-Match that matches: got %d, ETag %s", second.Code, second.Header().Get("ETag"))
	}
	if none := ask(h, http.MethodPut, "/v1/sites/b", strings.Replace(bare, "bare", "b", 1), "If-Match", "*"); none.Code != http.StatusPreconditionFailed {
		t.Errorf("If-Match: * of none: got %d, want 412", none.Code)
	}
	if none := ask(h, http.MethodDelete, "/v1/sites/b", "", "If-Match", first); none.Code != http.StatusNotFound {
		t.Errorf("delete none: got %d, want 404", none.Code)
	}
	if gone := ask(h, http.MethodDelete, "/v1/sites/a", "", "If-Match", "*"); gone.Code != http.StatusNoContent {
		t.Errorf("If-Match: *: got %d, want 204", gone.Code)
	}
}

// Of many who change the site that they all have read, one succeeds.
func TestOneOfManyChangesWins(t *testing.T) {
	h := service(t, nil)
	read := ask(h, http.MethodPut, "/v1/sites/bare", bare).Header().Get("ETag")
	codes := make([]int, 8)
	var wg sync.WaitGroup
	for i := range codes {
		wg.Go(func() {
			body := strings.Replace(bare, `"antenna_height_m":10`, fmt.Sprintf(`"antenna_height_m":%d`, 100+i), 1)
			codes[i] = ask(h, http.MethodPut, "/v1/sites/bare", body, "If-Match", read).Code
		})
	}
	wg.Wait()
	slices.Sort(codes)
	if codes[0] != http.StatusOK || codes[1] != http.StatusPreconditionFailed || codes[7] != http.StatusPreconditionFailed {
		t.Errorf("got %v, want one 200 and 412", codes)
	}
}

func TestBadSites(t *testing.T) {
	h := service(t, nil)
	with := func(change string) string { return strings.TrimSuffix(bare, "}") + "," + change + "}" }
	for name, c := range map[string]struct {
		body, pointer, detail string
	}{
		"no id":             {strings.Replace(bare, `"id":"bare",`, "", 1), "/id", "is missing"},
		"id with a slash":   {strings.Replace(bare, "bare", "a/b", 1), "/id", ""},
		"id of a list":      {strings.Replace(bare, "bare", "export.csv", 1), "/id", "the address of a list"},
		"unknown field":     {with(`"range_km":8`), "/range_km", "range_m is"},
		"answers only":      {with(`"created_at":"2030-01-01T00:00:00Z"`), "/created_at", "is not a field here"},
		"null":              {with(`"name":null`), "/name", "is null"},
		"lon":               {strings.Replace(bare, `"lon":0`, `"lon":181`, 1), "/lon", "it must be -180 to 180"},
		"height":            {strings.Replace(bare, `:10`, `:1001`, 1), "/antenna_height_m", "0 to 1000 m above ground"},
		"text for a number": {strings.Replace(bare, `:10`, `:"10"`, 1), "/antenna_height_m", "must be a number"},
		"MHz":               {with(`"frequency_ghz":5600`), "/frequency_ghz", "5600 MHz would be 5.6"},
		"polarisation":      {with(`"polarisation":"V"`), "/polarisation", "vertical, horizontal, slant"},
		"range":             {with(`"range_m":0`), "/range_m", "it must be 1 to 300000"},
		"sector":            {with(`"sectors":[{"azimuth_deg":1},{"width_deg":3}]`), "/sectors/1/azimuth_deg", "is missing"},
		"sector's field":    {with(`"sectors":[{"azimuth_deg":1,"azimut":3}]`), "/sectors/0/azimut", "azimuth_deg is"},
		"no width":          {with(`"sectors":[{"azimuth_deg":1,"width_deg":0}]`), "/sectors/0/width_deg", "more than 0"},
		"twice":             {with(`"sectors":[{"azimuth_deg":0},{"azimuth_deg":360,"width_deg":360}]`), "/sectors/1", "repeats /sectors/0"},
		"too many":          {with(`"sectors":[{"azimuth_deg":0}` + strings.Repeat(`,{"azimuth_deg":0}`, 64) + `]`), "/sectors", "0 to 64"},
		"name":              {with(`"name":"a\u0000b"`), "/name", "control characters"},
	} {
		t.Run(name, func(t *testing.T) {
			for _, got := range []struct{ method, path string }{{http.MethodPost, "/v1/sites"}, {http.MethodPut, "/v1/sites/bare"}} {
				answer := ask(h, got.method, got.path, c.body)
				p := problemIn(t, answer)
				found := got.method == http.MethodPut && c.pointer == "/id" // which need not agree with the address
				for _, f := range orZero(p.Errors) {
					found = found || f.Pointer == c.pointer && strings.Contains(f.Detail, c.detail)
				}
				if answer.Code != 422 || !found {
					t.Errorf("%s: got %d %s, want %q at %s", got.method, answer.Code, answer.Body, c.detail, c.pointer)
				}
			}
		})
	}
	if got := ask(h, http.MethodPut, "/v1/sites/other", bare); got.Code != 422 || !strings.Contains(got.Body.String(), "must agree") {
		t.Errorf("an id that is not the address: got %d %s", got.Code, got.Body)
	}
	if got := ask(h, http.MethodPut, "/v1/sites/export.csv", strings.Replace(bare, "bare", "export.csv", 1)); got.Code != 422 {
		t.Errorf("the address of a list: got %d %s", got.Code, got.Body)
	}
	if got := ask(h, http.MethodPost, "/v1/sites", bare, "Content-Type", "text/csv"); got.Code != 415 {
		t.Errorf("CSV as a site: got %d %s", got.Code, got.Body)
	}
	if list := decoded[SiteList](t, ask(h, http.MethodGet, "/v1/sites", "").Body.Bytes()); len(list.Sites) != 0 {
		t.Errorf("something was kept: %v", list)
	}
}

func TestPagesOfSites(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, nil)
	empty := ask(h, http.MethodGet, "/v1/sites", "")
	conforms(t, contract, "SiteList", empty.Body.Bytes())
	if empty.Body.String() != `{"sites":[]}`+"\n" {
		t.Errorf("none: got %s", empty.Body)
	}
	want := []string{"A", "Z", "a", "b-1", "b.1", "b_1", "c"}
	for _, id := range want {
		ask(h, http.MethodPut, "/v1/sites/"+id, strings.Replace(bare, "bare", id, 1))
	}
	for _, size := range []int{1, 2, 7, 1000} {
		var got []string
		next := ""
		for pages := 0; pages == 0 || next != ""; pages++ {
			answer := ask(h, http.MethodGet, fmt.Sprintf("/v1/sites?page_size=%d%s", size, next), "")
			conforms(t, contract, "SiteList", answer.Body.Bytes())
			page := decoded[SiteList](t, answer.Body.Bytes())
			if len(page.Sites) > size || pages > len(want) {
				t.Fatalf("page %d of %d has %d sites", pages, size, len(page.Sites))
			}
			for _, s := range page.Sites {
				got = append(got, s.Id)
			}
			if next = ""; page.NextPageToken != nil {
				next = "&page_token=" + *page.NextPageToken
			}
		}
		if diff := cmp.Diff(got, want); diff != "" {
			t.Errorf("by %d: %s", size, diff)
		}
	}
}

func TestTokensOfPagesAreHarmless(t *testing.T) {
	h := service(t, nil)
	ask(h, http.MethodPost, "/v1/sites", mill)
	coded := base64.RawURLEncoding.EncodeToString
	for query, want := range map[string]int{
		"page_token=" + coded([]byte("a")):          200,
		"page_token=" + coded([]byte("no-such-id")): 200,
		"page_token=":                       400,
		"page_token=%00":                    400,
		"page_token=!!!":                    400,
		"page_token=YQ%3D%3D":               400,
		"page_token=" + coded([]byte{0xff}): 400,
		"page_token=" + coded([]byte("a'; DROP TABLE register; --")): 400,
		"page_token=" + strings.Repeat("YQ", 3000):                   400,
		"page_size=0":             400,
		"page_size=-1":            400,
		"page_size=1001":          400,
		"page_size=many":          400,
		"page_size=99999999999":   400,
		"page_size=1&page_size=2": 400,
		"page_size=1000":          200,
		"unknown=1":               200,
	} {
		got := ask(h, http.MethodGet, "/v1/sites?"+query, "")
		if got.Code != want {
			t.Errorf("%s: got %d %s, want %d", query, got.Code, got.Body, want)
		}
		if want == 400 {
			problemIn(t, got)
		}
	}
}

func TestAddressesThatAreNoSite(t *testing.T) {
	h := service(t, nil)
	for _, path := range []string{"/v1/sites/none", "/v1/sites/import.csv", "/v1/sites/a%2Fb", "/v1/sites/%00", "/v1/sites/%F0%28", "/v1/sites/" + strings.Repeat("a", 5000)} {
		for _, method := range []string{http.MethodGet, http.MethodDelete} {
			if got := ask(h, method, path, ""); got.Code != 404 && got.Code != 400 {
				t.Errorf("%s %.40s: got %d %s", method, path, got.Code, got.Body)
			}
		}
	}
	if got := ask(h, http.MethodPatch, "/v1/sites/none", ""); got.Code != 405 {
		t.Errorf("patch: got %d, want 405", got.Code)
	}
}

// Whatever is sent, the answer is one of the contract and no failure of the
// server, and what is kept can be read.
func TestAnySiteIsAnswered(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h := service(t, nil)
	rapid.Check(t, func(t *rapid.T) {
		number := func(label string, high float64) string {
			return rapid.OneOf(rapid.Just("0"), rapid.Just("-0.0"), rapid.Just(`"7"`), rapid.Just("null"),
				rapid.Map(rapid.Float64Range(-high/10, high), func(v float64) string { return fmt.Sprint(v) })).Draw(t, label)
		}
		body := fmt.Sprintf(`{"id":%q,"name":%q,"lon":%s,"lat":%s,"antenna_height_m":%s,"height_above":%q,"range_m":%s,"sectors":[{"azimuth_deg":%s,"width_deg":%s,"antenna":%q}]}`,
			rapid.SampledFrom([]string{"a", "b", ".", "é", "import.csv"}).Draw(t, "id"), rapid.StringMatching(`[ a=é'"]{0,4}`).Draw(t, "name"),
			number("lon", 190), number("lat", 95), number("height", 1100), rapid.SampledFrom([]string{"ground", "roof", "sea_level", "x"}).Draw(t, "above"),
			number("range", 310000), number("azimuth", 380), number("width", 380), rapid.StringMatching(`[ a=é]{0,4}`).Draw(t, "antenna"))
		got := ask(h, http.MethodPost, "/v1/sites", body)
		switch got.Code {
		case http.StatusCreated:
			conforms(t, contract, "Site", got.Body.Bytes())
			if read := ask(h, http.MethodGet, got.Header().Get("Location"), ""); read.Body.String() != got.Body.String() {
				t.Fatalf("got %s, want %s", read.Body, got.Body)
			}
			ask(h, http.MethodDelete, got.Header().Get("Location"), "")
		case 400, 422:
			conforms(t, contract, "Problem", got.Body.Bytes())
		default:
			t.Fatalf("%s: got %d %s", body, got.Code, got.Body)
		}
	})
}

func TestASiteThatCannotBeKept(t *testing.T) {
	full := &siteShelf{kept: map[string][]byte{}, err: fmt.Errorf("%w: disk full", store.ErrUnavailable)}
	h := service(t, func(d *Dependencies) { d.Sites = sites.NewRegister(full) })
	for _, got := range []*struct{ method, path, body, kind string }{
		{http.MethodPost, "/v1/sites", bare, "application/json"},
		{http.MethodPut, "/v1/sites/bare", bare, "application/json"},
		{http.MethodGet, "/v1/sites", "", ""},
		{http.MethodGet, "/v1/sites/bare", "", ""},
		{http.MethodGet, "/v1/sites/export.csv", "", ""},
		{http.MethodPost, "/v1/sites/import.csv", "id,lon,lat,height\na,1,1,1\n", "text/csv"},
	} {
		answer := ask(h, got.method, got.path, got.body, "Content-Type", got.kind)
		if p := problemIn(t, answer); answer.Code != 503 || p.Type != "/docs#problem-storage-unavailable" {
			t.Errorf("%s %s: got %d %s", got.method, got.path, answer.Code, answer.Body)
		}
	}
}
