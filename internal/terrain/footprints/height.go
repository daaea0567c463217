package footprints

import (
	"encoding/json"
	"fmt"
	"strconv"
	"strings"
)

// maxHeightM is above every building: the tallest is 828 m high (from memory).
const maxHeightM = 1000

// height is the height in metres that a feature's properties give. It is not
// known where the property is absent, null or blank.
func height(properties json.RawMessage, name string) (heightM float64, known bool, err error) {
	if len(properties) == 0 {
		return 0, false, nil
	}
	var values map[string]json.RawMessage
	if err := json.Unmarshal(properties, &values); err != nil {
		return 0, false, fmt.Errorf("properties: %w", plain(err))
	}
	raw := string(values[name])
	if strings.HasPrefix(raw, `"`) {
		var text string
		if err := json.Unmarshal(values[name], &text); err != nil {
			return 0, false, fmt.Errorf("properties: %w", plain(err))
		}
		raw = strings.TrimSpace(text)
	}
	if raw == "" || raw == "null" {
		return 0, false, nil
	}
	heightM, err = strconv.ParseFloat(raw, 64)
	if err != nil {
		return 0, false, refusedError(fmt.Sprintf("height %s: must be a number of metres", quoted(raw)))
	}
	if !(heightM > 0 && heightM <= maxHeightM) {
		return 0, false, refusedError(fmt.Sprintf("height %g m: must be above 0 and at most %d", heightM, maxHeightM))
	}
	return heightM, true, nil
}
