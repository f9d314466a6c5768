package main

import (
	"bytes"
	"context"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
	"github.com/santhosh-tekuri/jsonschema/v6"
	"github.com/stretchr/testify/require"
)

// TestMain lets scripts and shells run the program as "eliminant".
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"eliminant": main})
}

const schemas = "../../fixtures/schema"

// TestScripts runs testdata/script/*.txtar. Beside the usual commands there is
// "schema NAME FILE", which validates a file ("stdout" for the last output)
// against fixtures/schema/NAME.schema.json.
func TestScripts(t *testing.T) {
	folder, err := filepath.Abs(schemas)
	require.NoError(t, err)
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		RequireExplicitExec: true,
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"schema": func(ts *testscript.TestScript, neg bool, args []string) {
				if len(args) != 2 {
					ts.Fatalf("usage: schema NAME FILE")
				}
				err := validate(filepath.Join(folder, args[0]+".schema.json"), []byte(ts.ReadFile(args[1])))
				switch {
				case err == nil && neg:
					ts.Fatalf("the document is valid")
				case err != nil && !neg:
					ts.Fatalf("%v", err)
				}
			},
		},
	})
}

// schemaFile returns the absolute path of a schema, so that tests may change
// the folder.
func schemaFile(name string) string { return filepath.Join(schemaFolder, name+".schema.json") }

var schemaFolder, _ = filepath.Abs(schemas)

// validate checks a document against a schema file.
func validate(schema string, document []byte) error {
	s, err := jsonschema.NewCompiler().Compile(schema)
	if err != nil {
		return err
	}
	d, err := jsonschema.UnmarshalJSON(bytes.NewReader(document))
	if err != nil {
		return err
	}
	return s.Validate(d)
}

// outcome is what one run in this process did.
type outcome struct {
	code           int
	stdout, stderr string
}

// try runs the program with a standard input.
func try(t *testing.T, stdin string, args ...string) outcome {
	t.Helper()
	var out, errs bytes.Buffer
	code := run(t.Context(), args, strings.NewReader(stdin), &out, &errs)
	return outcome{code, out.String(), errs.String()}
}

// into reads a JSON document of the standard output.
func (o outcome) into(t *testing.T, target any) {
	t.Helper()
	d := json.NewDecoder(strings.NewReader(o.stdout))
	require.NoError(t, d.Decode(target), o.stdout)
	require.False(t, d.More(), "more than one document")
}

// file writes a file into a new folder and returns its path.
func file(t *testing.T, name, content string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	require.NoError(t, os.WriteFile(path, []byte(content), 0o666))
	return path
}

func TestEveryCommandHasHelpAndAnExample(t *testing.T) {
	root := (&program{}).root()
	for _, c := range root.Commands() {
		require.NotEmpty(t, c.Example, c.Name())
		for _, args := range [][]string{{c.Name(), "--help"}, {c.Name(), "-h"}, {"help", c.Name()}, {c.Name(), "x", "--help", "y"}} {
			o := try(t, "", args...)
			require.Zero(t, o.code)
			require.Contains(t, o.stdout, strings.TrimSpace(strings.Split(c.Example, "\n")[0]))
			require.Empty(t, o.stderr)
		}
	}
}

func TestNoOneLetterOptions(t *testing.T) {
	for _, c := range (&program{}).root().Commands() {
		require.NotContains(t, c.Flags().FlagUsages(), ", --", c.Name())
	}
}

func TestContextOfRunIsUsed(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	var out, errs bytes.Buffer
	require.Equal(t, exitInterrupted, run(ctx, []string{"point", "--legs", "5", "--json"}, strings.NewReader(""), &out, &errs))
	require.Contains(t, out.String(), `"code": "interrupted"`)
}
