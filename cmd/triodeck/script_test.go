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
	testscript.Run(t, testscript.Params{Dir: "../../testdata/cli", UpdateScripts: *update, Cmds: map[string]func(*testscript.TestScript, bool, []string){"bytes": writeBytes}})
}

// writeBytes is the script command `bytes FILE`: every byte there is, four times
// over, which no text can hold.
func writeBytes(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 1 {
		ts.Fatalf("usage: bytes file")
	}
	data := make([]byte, 1024)
	for i := range data {
		data[i] = byte(i)
	}
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), data, 0o644))
}
