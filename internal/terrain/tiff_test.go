package terrain

import (
	"bytes"
	"encoding/binary"
	"math"
	"sort"
)

// degreeTIFF is a GeoTIFF of one degree in side x side pixels, whose south-west
// corner is at lon, lat: Int16, in strips of 16 rows, WGS 84, pixel is area.
func degreeTIFF(lon, lat, side int, height func(column, row int) float64) []byte {
	const rowsPerStrip = 16
	le := binary.LittleEndian
	strips := (side + rowsPerStrip - 1) / rowsPerStrip
	type tag struct {
		id, kind uint16
		count    int
		data     []byte
	}
	short := func(v ...uint16) (out []byte) {
		for _, x := range v {
			out = le.AppendUint16(out, x)
		}
		return out
	}
	double := func(v ...float64) (out []byte) {
		for _, x := range v {
			out = le.AppendUint64(out, math.Float64bits(x))
		}
		return out
	}
	pixel := 1 / float64(side)
	tags := []tag{
		{256, 3, 1, short(uint16(side))}, {257, 3, 1, short(uint16(side))}, {258, 3, 1, short(16)}, {259, 3, 1, short(1)}, {262, 3, 1, short(1)},
		{273, 4, strips, make([]byte, 4*strips)}, {277, 3, 1, short(1)}, {278, 3, 1, short(rowsPerStrip)}, {279, 4, strips, make([]byte, 4*strips)},
		{339, 3, 1, short(2)}, {33550, 12, 3, double(pixel, pixel, 0)}, {33922, 12, 6, double(0, 0, 0, float64(lon), float64(lat+1), 0)},
		{34735, 3, 16, short(1, 1, 0, 3, 1024, 0, 1, 2, 1025, 0, 1, 1, 2048, 0, 1, 4326)},
	}
	sort.Slice(tags, func(i, j int) bool { return tags[i].id < tags[j].id })
	at := 8 + 2 + 12*len(tags) + 4
	place := map[uint16]int{}
	for _, t := range tags {
		if len(t.data) > 4 {
			place[t.id] = at
			at += len(t.data)
		}
	}
	for _, t := range tags {
		for s := range strips {
			rows := min(rowsPerStrip, side-s*rowsPerStrip)
			switch t.id {
			case 273:
				le.PutUint32(t.data[4*s:], uint32(at+s*rowsPerStrip*side*2))
			case 279:
				le.PutUint32(t.data[4*s:], uint32(rows*side*2))
			}
		}
	}
	var out bytes.Buffer
	out.Write([]byte{'I', 'I', 42, 0, 8, 0, 0, 0})
	out.Write(short(uint16(len(tags))))
	for _, t := range tags {
		out.Write(short(t.id, t.kind))
		out.Write(le.AppendUint32(nil, uint32(t.count)))
		value := append(append([]byte(nil), t.data...), 0, 0, 0, 0)[:4]
		if p, ok := place[t.id]; ok {
			value = le.AppendUint32(nil, uint32(p))
		}
		out.Write(value)
	}
	out.Write([]byte{0, 0, 0, 0})
	for _, t := range tags {
		if len(t.data) > 4 {
			out.Write(t.data)
		}
	}
	for row := range side {
		for column := range side {
			out.Write(le.AppendUint16(nil, uint16(int16(height(column, row)))))
		}
	}
	return out.Bytes()
}
