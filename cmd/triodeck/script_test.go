package main

import (
	"context"
	"flag"
	"os"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

var update = flag.Bool("update", false, "rewrite the expected output of the cases")

// TestMain lets the scripts run this program as `triodeck`.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){
		"triodeck": func() {
			os.Exit(run(context.Background(), os.Args[1:], streams{os.Stdin, os.Stdout, os.Stderr}))
		},
	})
}

// TestScripts runs testdata/cli: a command line, its files and what it prints.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{Dir: "../../testdata/cli", UpdateScripts: *update})
}
