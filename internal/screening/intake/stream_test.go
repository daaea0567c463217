package intake

import (
	"errors"
	"io"
	"runtime"
	"strconv"
	"strings"
	"testing"
	"time"
)

// made is a list that is written while it is read, and held nowhere.
type made struct {
	head, foot string
	row        func(into []byte, i int) []byte
	rows, next int
	pending    []byte
	buffer     []byte
}

func (m *made) Read(p []byte) (int, error) {
	for len(m.pending) == 0 {
		m.buffer = m.buffer[:0]
		switch {
		case m.next > m.rows:
			return 0, io.EOF
		case m.next == m.rows:
			m.buffer = append(m.buffer, m.foot...)
		}
		if m.next == 0 {
			m.buffer = append(m.buffer, m.head...)
		}
		for n := 0; n < 100 && m.next < m.rows; n++ {
			m.buffer = m.row(m.buffer, m.next)
			m.next++
		}
		if m.next == m.rows && len(m.buffer) == len(m.foot) || m.rows == 0 {
			m.next++
		}
		m.pending = m.buffer
	}
	n := copy(p, m.pending)
	m.pending = m.pending[n:]
	return n, nil
}

// coordinate writes a number with six decimals, 0 to below 60, that differs from
// row to row.
func coordinate(into []byte, i int) []byte {
	into = strconv.AppendInt(into, int64(i%60), 10)
	into = append(into, '.')
	return strconv.AppendInt(into, int64(100000+i%900000), 10)
}

// padded lists have rows of 500 bytes: far more text than may be held.
func padded(format Format, rows int) *made {
	pad := strings.Repeat("padding ", 60)
	switch format {
	case CSV:
		return &made{rows: rows, head: "id,lon,lat,note\n", row: between("roof-", ",", ",", ","+pad+"\n")}
	case NDJSON:
		return &made{rows: rows, row: between(`{"id":"roof-`, `","lon":`, `,"lat":`, `,"note":"`+pad+"\"}\n")}
	case GeoJSON:
	}
	return &made{rows: rows, head: `{"features":[{}`, foot: `]}`, row: between(
		`,{"id":"roof-`, `","geometry":{"type":"Point","coordinates":[`, `,`, `]},"properties":{"note":"`+pad+`"}}`)}
}

// between writes rows with an id and two coordinates between fixed texts.
func between(id, lon, lat, rest string) func(into []byte, i int) []byte {
	return func(into []byte, i int) []byte {
		into = strconv.AppendInt(append(into, id...), int64(i), 10)
		into = coordinate(append(into, lon...), i)
		into = coordinate(append(into, lat...), i)
		return append(into, rest...)
	}
}

// 200,000 rows, 100 MB of text, are read within a few MB: the window, and the
// hashes of ids and places. The formats of JSON, which take longer, have fewer.
func TestStreamsInBoundedMemory(t *testing.T) {
	const mostMB = 16
	for format, count := range map[Format]int{CSV: 200_000, NDJSON: 50_000, GeoJSON: 50_000} {
		t.Run(string(format), func(t *testing.T) {
			before, most, candidates := heap(), uint64(0), 0
			for row, err := range Candidates(padded(format, count), format, Options{}) {
				if err != nil {
					t.Fatalf("got %v after %d rows, want none", err, candidates)
				}
				if row.Problem == nil {
					candidates++
				}
				if candidates%25_000 == 0 {
					most = max(most, heap())
				}
			}
			if candidates != count {
				t.Errorf("got %d candidates, want %d", candidates, count)
			}
			if grown := (int64(most) - int64(before)) >> 20; grown > mostMB {
				t.Errorf("got %d MB held, want at most %d", grown, mostMB)
			} else {
				t.Logf("%d MB held", grown)
			}
		})
	}
}

// heap is what is in use after a collection.
func heap() uint64 {
	runtime.GC()
	var now runtime.MemStats
	runtime.ReadMemStats(&now)
	return now.HeapAlloc
}

// Hostile lists cost about as much as their size: quotes that never close, lines
// that never end, brackets without end.
func TestHostileLists(t *testing.T) {
	const size = 1 << 20
	for name, list := range map[string]struct {
		format Format
		row    string
	}{
		"open quotes":      {CSV, "\"\n"},
		"lines in fields":  {CSV, "\",\"\n"},
		"quotes in quotes": {CSV, "\"\"\"\n"},
		"delimiters":       {CSV, ",,,,"},
		"an endless line":  {NDJSON, "{\"a\":["},
		"brackets":         {GeoJSON, "["},
		"escapes":          {GeoJSON, `"\"`},
	} {
		t.Run(name, func(t *testing.T) {
			head := map[Format]string{CSV: "id,lon,lat\n", GeoJSON: `{"features":[`}[list.format]
			from := &made{head: head, rows: size / len(list.row), row: func(into []byte, _ int) []byte { return append(into, list.row...) }}
			began := time.Now()
			for _, err := range Candidates(from, list.format, Options{MaxRows: size}) {
				if unreadable := new(ListError); err != nil && !errors.As(err, &unreadable) {
					t.Fatalf("got %v, want an error about the list, or none", err)
				}
			}
			if took := time.Since(began); took > 20*time.Second { // 0.1 s where it is linear
				t.Errorf("1 MB took %v, want well under 20 s", took)
			}
		})
	}
}
