package circuit

import (
	"triodeck/parser"
)

// setting is a number that `.temp` or `.option` gives the whole design.
type setting struct {
	name  string // temp, tnom, scale
	value parser.Value
	doc   *Document
	card  int
}

func (r *reading) addSettings(w *walk, i int, st parser.Stmt) {
	switch st := st.(type) {
	case *parser.Temp:
		if len(st.Values) > 0 {
			r.settings = append(r.settings, setting{".temp", st.Values[0], w.doc, i})
		}
	case *parser.Options:
		for _, p := range st.Params {
			switch name := parser.Fold(p.Name.Text); name {
			case "temp", "tnom", "scale":
				r.settings = append(r.settings, setting{name, p.Value, w.doc, i})
			}
		}
	}
}

// topArgs gives the parameters that the options override.
func (r *reading) topArgs() map[string]Value {
	if len(r.options.Params) == 0 {
		return nil
	}
	env := newEnv(r.design.Top, nil, nil, &conditions{tempC: r.tempC()})
	args := map[string]Value{}
	for name, text := range r.options.Params {
		v := parser.Value{Word: parser.Word{Text: text}, Form: parser.ExprValue}
		args[parser.Fold(name)] = env.Value(v)
	}
	return args
}

// tempC is the temperature before the settings are evaluated.
func (r *reading) tempC() float64 {
	if r.options.TempC != nil {
		return *r.options.TempC
	}
	return 27
}

// applySettings evaluates the settings: the last of each kind counts, and `.temp`
// before `.option temp`.
func (r *reading) applySettings() {
	d := r.design
	env := newEnv(d.Top, nil, r.topArgs(), &conditions{tempC: r.tempC()})
	got := map[string]float64{"tnom": 27, "scale": 1, "temp": 27}
	for _, s := range r.settings {
		v := env.valueAt(s.value, s.doc, s.card)
		if v.Err != nil {
			r.report(d.Top, v.Err)
			continue
		}
		if s.name == "scale" && v.V <= 0 {
			r.problems.add(ParamInvalid, place(s.doc, s.card, s.value.Span()), s.name, "scale %s is not a positive number", s.value.Text)
			continue
		}
		if v.Set {
			got[s.name] = v.V
		}
	}
	d.TnomC, d.TempC = got["tnom"], got["temp"]
	if t, ok := got[".temp"]; ok {
		d.TempC = t
	}
	if r.options.TempC != nil {
		d.TempC = *r.options.TempC
	}
	r.scale = got["scale"]
}
