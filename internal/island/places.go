package island

// Name is what the invented island is called.
const Name = "Brenshallow Island"

// Place is a named point of the island. The names are coined: no such places
// are known.
type Place struct {
	Name string
	Kind string  // summit, hill, mast, lighthouse, harbour or village
	Lon  float64 // degrees, WGS 84
	Lat  float64 // degrees, WGS 84
}

// Indexes into Places.
const (
	hathercrag = iota
	tollowrigg
	wendlecairn
	skerrivane
	pellowmere
	farrowmeath
	ostlewade
	marlowhythe
)

// spots gives the post each place stands on, by row and column of the tile, so
// that its height needs no interpolation.
var spots = [...]struct {
	name, kind string
	row, col   int
}{
	hathercrag:  {"Hathercrag", "summit", 1816, 1609},
	tollowrigg:  {"Tollowrigg", "hill", 1681, 2079},
	wendlecairn: {"Wendlecairn Mast", "mast", 1798, 2008},
	skerrivane:  {"Skerrivane Head", "lighthouse", 1938, 2016},
	pellowmere:  {"Pellowmere Harbour", "harbour", 1908, 1800},
	farrowmeath: {"Farrowmeath", "village", 1694, 1804},
	ostlewade:   {"Ostlewade", "village", 1604, 2052},
	marlowhythe: {"Marlowhythe", "village", 1640, 2388},
}

// Places returns the named places, in an order that does not change.
func Places() []Place {
	out := make([]Place, len(spots))
	for i, s := range spots {
		out[i] = Place{
			Name: s.name,
			Kind: s.kind,
			Lon:  West + float64(s.col)/perDegree,
			Lat:  South + 1 - float64(s.row)/perDegree,
		}
	}
	return out
}
