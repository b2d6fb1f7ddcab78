package circuit_test

import (
	"context"
	"fmt"
	"strings"
	"testing"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// The generated library has the proportions of an open 130 nm one: a section
// that includes some sixty files, a dozen devices in 63 bins each, cards of
// about 290 parameters, some of them expressions over parameters of the corner
// and of the instance.
const (
	libraryDevices = 12
	libraryBins    = 63
	libraryParams  = 290
	libraryOthers  = 40
)

// generatedLibrary gives the files of the library, without the deck.
func generatedLibrary() map[string]string {
	files := map[string]string{}
	var top strings.Builder
	top.WriteString("* generated\n.lib ss\n.include gone.spice\n.endl\n.lib tt\n.option scale=1u\n")
	include := func(name, text string) {
		files["lib/"+name] = text
		fmt.Fprintf(&top, ".include \"%s\"\n", name)
	}
	for d := range libraryDevices {
		name := fmt.Sprintf("nfet_%02d", d)
		include(name+"_corner.spice", corner(name))
		include(name+".spice", wrapper(name))
	}
	for i := range libraryOthers {
		include(fmt.Sprintf("other_%02d.spice", i), fmt.Sprintf(".subckt res_%02d a b l=1 w=1\nR1 a b 'rsh_%02d*l/w'\n.ends\n.param rsh_%02d=%d\n", i, i, i, 100+i))
	}
	top.WriteString(".endl\n")
	files["lib/process.lib"] = top.String()
	return files
}

func corner(name string) string {
	var b strings.Builder
	fmt.Fprintf(&b, ".param\n+ %s_slope = 0.0\n", name)
	for bin := range libraryBins {
		for p := range 6 {
			fmt.Fprintf(&b, "+ %s_p%d_diff_%d = %g\n", name, p, bin, 1e-3*float64(p+bin))
		}
	}
	return b.String()
}

func wrapper(name string) string {
	var b strings.Builder
	fmt.Fprintf(&b, ".subckt %s d g s b\n+\n.param l = 1 w = 1 ad = 0 as = 0 mult = 1 nf = 1.0\n", name)
	fmt.Fprintf(&b, "m%s d g s b %s_model l = {l} w = {w} ad = {ad} as = {as} nf = {nf}\n", name, name)
	for bin := range libraryBins {
		fmt.Fprintf(&b, ".model %s_model.%d nmos\n* limits\n+ lmin = %ge-7 lmax = %ge-7 wmin = %ge-7 wmax = %ge-7\n+ level = 54.0\n",
			name, bin, 1.5+float64(bin/9), 2.5+float64(bin/9), 3.6+float64(bin%9), 4.6+float64(bin%9))
		for p := range libraryParams {
			if p%12 == 0 {
				fmt.Fprintf(&b, "+ q%d = {%g+%s_p%d_diff_%d+%s_slope*(0.01/sqrt(l*w*mult))}\n", p, 0.1*float64(p), name, p%6, bin, name)
			} else {
				fmt.Fprintf(&b, "+ q%d = %g\n", p, 1.5e-3*float64(p))
			}
		}
	}
	b.WriteString(".ends\n")
	return b.String()
}

// libraryDeck uses the library as a small cell does.
func libraryDeck(devices int) string {
	var b strings.Builder
	b.WriteString("a deck\n.lib 'lib/process.lib' tt\n")
	for i := range devices {
		fmt.Fprintf(&b, "X%d d%d g 0 0 nfet_%02d w=0.5 l=0.3\n", i, i, i%libraryDevices)
	}
	return b.String()
}

// parsedOnce is a reader that keeps what it has parsed, as a workspace does.
type parsedOnce struct {
	texts  map[string]string
	files  map[string]*parser.File
	parsed int
}

func (r *parsedOnce) File(path string) (*parser.File, error) {
	if f := r.files[path]; f != nil {
		return f, nil
	}
	f, err := deckFiles(r.texts).File(path)
	if err == nil {
		r.files[path] = f
		r.parsed++
	}
	return f, err
}

func libraryReader() *parsedOnce {
	r := &parsedOnce{texts: generatedLibrary(), files: map[string]*parser.File{}}
	r.texts["deck.sp"] = libraryDeck(4)
	return r
}

// BenchmarkLibraryCold reads, parses and builds a deck on the library.
func BenchmarkLibraryCold(b *testing.B) {
	texts := libraryReader().texts
	size := 0
	for _, t := range texts {
		size += len(t)
	}
	b.SetBytes(int64(size))
	for b.Loop() {
		r := &parsedOnce{texts: texts, files: map[string]*parser.File{}}
		use(b, circuit.Load(context.Background(), r, "deck.sp", circuit.Options{}))
	}
}

// BenchmarkLibraryWarm builds a further deck on a library that is parsed already.
func BenchmarkLibraryWarm(b *testing.B) {
	r := libraryReader()
	for b.Loop() {
		use(b, circuit.Load(context.Background(), r, "deck.sp", circuit.Options{}))
	}
}

func use(t testing.TB, d *circuit.Design) {
	for _, x := range d.Main.Instances {
		dev, ok := x.Cell.Wrapped()
		if !ok || dev.Model.Def == nil || dev.Model.Params["q12"].Err != nil || len(dev.Model.Params) < libraryParams {
			t.Fatalf("%s is not built: %+v", x.Name, d.Problems)
		}
	}
}

// A library of several megabytes is parsed once however many decks use it, and of
// its cards only those that an instance picks are evaluated.
func TestLibraryIsReadOnceAndLazily(t *testing.T) {
	r := libraryReader()
	spoilt := 0
	for path, text := range r.texts {
		// Every card but the one that X0 picks has a value that cannot be evaluated.
		if strings.HasPrefix(path, "lib/nfet") && !strings.Contains(path, "corner") {
			r.texts[path] = strings.ReplaceAll(text, "q7 = ", "q7 = nowhere*")
			spoilt++
		}
	}
	r.texts["lib/nfet_00.spice"] = spoilBut(r.texts["lib/nfet_00.spice"], "nfet_00_model.10")
	r.texts["deck.sp"] = libraryDeck(1)
	d := circuit.Load(context.Background(), r, "deck.sp", circuit.Options{})
	dev, ok := d.Main.Instances[0].Cell.Wrapped()
	if !ok || dev.Model.Def == nil || dev.Model.Def.Name != "nfet_00_model.10" || spoilt != libraryDevices {
		t.Fatalf("the device is %+v, %d files spoilt", dev, spoilt)
	}
	for _, p := range d.Problems {
		t.Errorf("evaluated although nothing asks for it: %s %s", p.Place.Text(), p.Message)
	}
	parsed := r.parsed
	r.texts["second.sp"] = libraryDeck(1)
	circuit.Load(context.Background(), r, "second.sp", circuit.Options{})
	if r.parsed != parsed+1 {
		t.Errorf("the second deck made %d files be parsed", r.parsed-parsed)
	}
}

// spoilBut mends the one card of a spoilt text that is to be used.
func spoilBut(text, model string) string {
	start := strings.Index(text, ".model "+model+" ")
	end := start + strings.Index(text[start+1:], ".model ") + 1
	return text[:start] + strings.ReplaceAll(text[start:end], "nowhere*", "") + text[end:]
}
