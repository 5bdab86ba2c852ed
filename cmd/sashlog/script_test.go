package main

import (
	"flag"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

var update = flag.Bool("update", false, "write the scripts' expected outputs anew")

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"sashlog": main})
}

// TestScripts runs each story in testdata/script as a user would.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{Dir: "testdata/script", UpdateScripts: *update, RequireExplicitExec: true, RequireUniqueNames: true})
}
