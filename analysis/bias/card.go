package bias

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
)

// labels are parameters that cards write as words and no equation takes.
var labels = map[string]bool{"type": true, "mfg": true, "lotgroup": true, "version": true}

// numbers puts a model's parameters into a card. The string says why it cannot:
// the first in the alphabet of those that the model needs and that have no value.
func numbers(card *mos.Card, model string, params map[string]circuit.Value) string {
	var without []string
	for name, v := range params {
		switch {
		case v.Err == nil:
			card.Params[name] = v.V
		case name == "level" && strings.HasPrefix(wordOf(v.Err), "ekv"):
			card.Params[name] = 44
		default:
			without = append(without, name)
		}
	}
	slices.Sort(without)
	var known []string
	for i, name := range without {
		if i == 0 {
			known = mos.KnownParams(*card)
		}
		// A remark, `foundry=acme`, is no reason to give up.
		if labels[name] || wordOf(params[name].Err) != "" && name != "level" && !slices.Contains(known, name) {
			continue
		}
		return fmt.Sprintf("parameter %q of model %q: %v", name, model, params[name].Err)
	}
	return ""
}

// wordOf is the folded word that stands where a number is wanted, "" if the error
// is another.
func wordOf(err error) string {
	var e *circuit.EvalError
	if errors.As(err, &e) && e.Kind == circuit.NotNumber {
		return strings.ToLower(strings.Trim(e.Name, `"'`))
	}
	return ""
}
