package main

import (
	"bytes"
	"context"
	"path/filepath"
	"testing"

	"github.com/owenrumney/go-sarif/v3/pkg/report/v210/sarif"
)

// TestSARIFIsValid holds the log to the OASIS schema for SARIF 2.1.0, with
// findings, with related places and edits, and with nothing found.
func TestSARIFIsValid(t *testing.T) {
	edits := filepath.Join(t.TempDir(), "µ edits.sp")
	writeDeck(t, edits, []byte("M1 d d 0 0 nch W=2u L=1u\nM2 d d 0 0 nch W=2 L=1u\nM2 d d 0 0 nch W=2u L=1u\n.model nch nmos\nV1 d 0 1\n.op\n.end\n"))
	for _, path := range []string{"../../testdata/demo", "../../testdata/handbook", edits} {
		var out, errs bytes.Buffer
		if code := run(context.Background(), []string{"lint", "--format", "sarif", path}, streams{nil, &out, &errs}); code == exitUnable {
			t.Fatal(errs.String())
		}
		log, err := sarif.FromBytes(out.Bytes())
		if err != nil {
			t.Fatalf("%s: %v", path, err)
		}
		if err := log.Validate(); err != nil {
			t.Errorf("%s: %v", path, err)
		}
		if path == edits {
			fixes := 0
			for _, r := range log.Runs[0].Results {
				fixes += len(r.Fixes)
			}
			if fixes == 0 {
				t.Error("no result carries a fix")
			}
		}
	}
}
