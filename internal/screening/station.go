package screening

import (
	"math"

	"github.com/paulmach/orb"

	"ridgehop/internal/assess"
	"ridgehop/internal/geodesy"
	"ridgehop/internal/screening/intake"
)

// minLengthM is the shortest path that is judged: nearer ends are one place.
const minLengthM = 1.0

// station is a site made ready: the plan's defaults filled in, and what is
// needed to leave out candidates that it does not reach.
type station struct {
	id       string
	lon, lat float64
	rangeM   float64
	sectors  []intake.Sector // none is all round
	request  assess.Request  // all but end B

	direction vector
	// chord2 is the square of the longest chord of the unit sphere that may
	// belong to a path within the range.
	chord2 float64
}

// stations makes the sites of a plan ready.
func (p *Plan) stations() []station {
	out := make([]station, len(p.Sites))
	for i, s := range p.Sites {
		out[i] = p.station(s)
	}
	return out
}

func (p *Plan) station(s intake.Site) station {
	st := station{id: s.ID, lon: s.Lon, lat: s.Lat, rangeM: p.RangeM, sectors: s.Sectors, direction: toward(s.Lon, s.Lat)}
	if s.RangeM != 0 {
		st.rangeM = s.RangeM
	}
	st.chord2 = math.Pow(mostAngle(st.rangeM), 2) * (1 + 1e-9) // rounding
	st.request = assess.Request{
		A: assess.End{
			Lon: s.Lon, Lat: s.Lat, Placed: true,
			AntennaHeightM: s.AntennaHeightM, HeightAbove: assess.HeightAbove(s.HeightAbove),
		},
		FrequencyGHz: p.FrequencyGHz, Polarisation: p.Polarisation, CriteriaSet: p.CriteriaSet,
		CoverHeightM: p.CoverHeightM, Rasters: p.Rasters,
	}
	if s.FrequencyGHz != 0 {
		st.request.FrequencyGHz = s.FrequencyGHz
	}
	if s.Polarisation != "" {
		st.request.Polarisation = assess.Polarisation(s.Polarisation)
	}
	return st
}

// vector is a direction from the middle of the unit sphere.
type vector [3]float64

// toward is the direction of a longitude and a latitude.
func toward(lonDeg, latDeg float64) vector {
	sinLat, cosLat := math.Sincos(latDeg * math.Pi / 180)
	sinLon, cosLon := math.Sincos(lonDeg * math.Pi / 180)
	return vector{cosLat * cosLon, cosLat * sinLon, sinLat}
}

// chord2 is the square of the chord between two directions.
func (v vector) chord2(w vector) float64 {
	x, y, z := v[0]-w[0], v[1]-w[1], v[2]-w[2]
	return x*x + y*y + z*z
}

// leastCurvatureM is the least radius of curvature of the WGS 84 ellipsoid,
// that of the meridian at the equator, a (1 - e^2), with a and e^2 of WGS 84.
const leastCurvatureM = 6378137 * (1 - 0.00669437999014)

// mostAngle is the widest angle between the normals at two places so far apart,
// in radians. The chord of the unit sphere between the normals is shorter still.
func mostAngle(lengthM float64) float64 { return lengthM / leastCurvatureM }

// serves says whether a candidate lies in range, and in a sector.
func (s *station) serves(c *intake.Candidate, direction vector) bool {
	if s.direction.chord2(direction) > s.chord2 {
		return false
	}
	lengthM, azimuthDeg, _ := s.line(c)
	return lengthM <= s.rangeM && (lengthM < minLengthM || s.covers(azimuthDeg))
}

// covers says whether an azimuth at the site lies in one of its sectors.
func (s *station) covers(azimuthDeg float64) bool {
	for _, sector := range s.sectors {
		off := math.Abs(math.Remainder(azimuthDeg-sector.AzimuthDeg, 360))
		if off <= sector.WidthDeg/2+1e-9 { // rounding, at the seam of two sectors
			return true
		}
	}
	return len(s.sectors) == 0
}

// line measures the path to a candidate: its length, and the azimuths at the
// site and at the candidate. Places that are no places were refused before: NaN
// is within no range.
func (s *station) line(c *intake.Candidate) (lengthM, azimuthDeg, backDeg float64) {
	path, err := geodesy.NewLine(orb.Point{s.lon, s.lat}, c.Point())
	if err != nil {
		return math.NaN(), math.NaN(), math.NaN()
	}
	return path.LengthM(), path.AzimuthADeg(), path.AzimuthBDeg()
}
