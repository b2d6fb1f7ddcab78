package main

import (
	"bytes"
	"context"
	"encoding/xml"
	"errors"
	"image/png"
	"io"
	"os"
	"path/filepath"
	"testing"
)

// TestCurvePictures draws the demo's transmission gate and reads the pictures.
func TestCurvePictures(t *testing.T) {
	dir := t.TempDir()
	draw := func(name string) []byte {
		t.Helper()
		path := filepath.Join(dir, name)
		var out, errs bytes.Buffer
		args := []string{"curve", "../../testdata/demo/sampler_tgate.sp", "x_sw", "--out", path}
		if code := run(context.Background(), args, streams{nil, &out, &errs}); code != exitClean || out.Len() > 0 {
			t.Fatalf("%s: status %d: %s%s", name, code, out.String(), errs.String())
		}
		data, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		return data
	}

	img, err := png.Decode(bytes.NewReader(draw("tgate.png")))
	if err != nil {
		t.Fatal(err)
	}
	seen := map[[3]uint32]bool{}
	for y := range img.Bounds().Dy() {
		for x := range img.Bounds().Dx() {
			r, g, b, _ := img.At(x, y).RGBA()
			seen[[3]uint32{r >> 8, g >> 8, b >> 8}] = true
		}
	}
	for i, ink := range inks[:3] {
		if !seen[[3]uint32{uint32(ink.colour.R), uint32(ink.colour.G), uint32(ink.colour.B)}] {
			t.Errorf("the PNG has no pixel of line %d", i+1)
		}
	}

	svg := draw("tgate.svg")
	for d := xml.NewDecoder(bytes.NewReader(svg)); ; {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			t.Fatal(err)
		}
	}
	for _, want := range []string{"X_sw.Mn", "X_sw.Mp", "parallel", "v(ref) / V"} {
		if !bytes.Contains(svg, []byte(want)) {
			t.Errorf("the SVG does not say %q", want)
		}
	}

	left, err := filepath.Glob(filepath.Join(dir, ".triodeck-*"))
	if err != nil || len(left) > 0 {
		t.Errorf("left behind: %v %v", left, err)
	}
}
