package api

import "testing"

func TestRepeatedName(t *testing.T) {
	for body, want := range map[string]string{
		`{"a":1,"b":{"a":2},"c":[{"a":1},{"a":1}]}`: "",
		`{"a":1,"a":2}`:                      "a",
		`{"x":{"lon":1,"lat":2,"lon":3}}`:    "lon",
		`{"x":["a","a"],"y":"x","z":{}}`:     "",
		`{"x":[{"p":1},{"q":1,"q":"q"}]}`:    "q",
		`{"x":"y","y":"x"}`:                  "",
		`[[],[{"k":[]},{"k":{}}],"k","k"]`:   "",
		`{"a":`:                              "",
		``:                                   "",
		`{"n":null,"m":true,"n":false}`:      "n",
		`{"o":{},"l":[],"o":1}`:              "o",
		`{"deep":{"deep":{"deep":1}},"z":1}`: "",
	} {
		if got := repeatedName([]byte(body)); got != want {
			t.Errorf("%s: got %q, want %q", body, got, want)
		}
	}
}
