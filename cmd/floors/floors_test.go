package floors

import (
	"fmt"
	"go/parser"
	"go/token"
	"io/fs"
	"maps"
	"os"
	"path"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

// side is the floor of packages beside the house: data that tests share. They
// may import the lowest floor only, and only tests may import them.
const side = -1

// table is what the text block says.
type table struct {
	floor map[string]int // package path inside the module -> floor, or side
	place map[string]int // place from the left
}

// parseTable reads the text block that begins with "```text floors".
func parseTable(document string) (table, error) {
	t := table{map[string]int{}, map[string]int{}}
	_, block, found := strings.Cut(document, "```text floors\n")
	block, _, closed := strings.Cut(block, "\n```")
	if !found || !closed {
		return t, fmt.Errorf("no block ```text floors")
	}
	floors := 0
	for _, line := range strings.Split(block, "\n") {
		words := strings.Fields(line)
		if len(words) == 0 {
			continue
		}
		floor := floors
		switch words[0] {
		case "F" + strconv.Itoa(floors):
			floors++
		case "side":
			floor = side
		default:
			return t, fmt.Errorf("a line begins with %q, expected F%d or side", words[0], floors)
		}
		for i, name := range words[1:] {
			if _, ok := t.floor[name]; ok {
				return t, fmt.Errorf("%s stands twice", name)
			}
			t.floor[name], t.place[name] = floor, i
		}
	}
	if floors == 0 {
		return t, fmt.Errorf("no floors")
	}
	return t, nil
}

// reference is one import of a package of this module, or of C.
type reference struct {
	from, to string // package paths inside the module; "C" for cgo
	file     string
	test     bool
}

// violations lists what contradicts the table.
func (t table) violations(packages []string, references []reference) []string {
	var out []string
	for _, p := range packages {
		if _, ok := t.floor[p]; !ok {
			out = append(out, fmt.Sprintf("%s: the package has no floor", p))
		}
	}
	for _, p := range slices.Sorted(maps.Keys(t.floor)) {
		if !slices.Contains(packages, p) {
			out = append(out, fmt.Sprintf("%s: has a floor, but there is no such package", p))
		}
	}
	for _, r := range references {
		if why := t.refuse(r); why != "" {
			out = append(out, fmt.Sprintf("%s imports %s: %s", r.file, r.to, why))
		}
	}
	return out
}

// refuse says why an import is not allowed, "" if it is.
func (t table) refuse(r reference) string {
	from, known := t.floor[r.from]
	to, exists := t.floor[r.to]
	switch {
	case r.to == "C":
		return "there is no cgo in this module"
	case r.from == r.to && r.test:
		return "" // an external test of its own package
	case !known || !exists:
		return "not in the table"
	case to == side && !r.test:
		return "fixtures are for tests"
	case to == side:
		return ""
	case from == side && to > 0:
		return "fixtures import nothing above F0"
	case from == side:
		return ""
	case to > from:
		return fmt.Sprintf("F%d is above F%d", to, from)
	case to == from && t.place[r.to] >= t.place[r.from] && !r.test:
		return fmt.Sprintf("it is not to the left on F%d", to)
	}
	return ""
}

// scan reads the imports of every package below the root of the module.
func scan(root fs.FS, module string) (packages []string, references []reference, err error) {
	err = fs.WalkDir(root, ".", func(name string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() {
			if name != "." && (strings.HasPrefix(d.Name(), ".") || strings.HasPrefix(d.Name(), "_") || d.Name() == "testdata") {
				return fs.SkipDir
			}
			return nil
		}
		if path.Ext(name) != ".go" {
			return nil
		}
		text, err := fs.ReadFile(root, name)
		if err != nil {
			return err
		}
		file, err := parser.ParseFile(token.NewFileSet(), name, text, parser.ImportsOnly)
		if err != nil {
			return err
		}
		from := path.Dir(name)
		if !slices.Contains(packages, from) {
			packages = append(packages, from)
		}
		for _, i := range file.Imports {
			to, err := strconv.Unquote(i.Path.Value)
			if err != nil {
				return err
			}
			to, ours := strings.CutPrefix(to, module+"/")
			if ours || to == "C" {
				references = append(references, reference{from, to, name, strings.HasSuffix(name, "_test.go")})
			}
		}
		return nil
	})
	return packages, references, err
}

// moduleRoot returns the folder of go.mod and the path of the module.
func moduleRoot(t *testing.T) (folder, module string) {
	folder, err := os.Getwd()
	require.NoError(t, err)
	for {
		text, err := os.ReadFile(filepath.Join(folder, "go.mod"))
		if err == nil {
			first, _, _ := strings.Cut(string(text), "\n")
			return folder, strings.TrimSpace(strings.TrimPrefix(first, "module "))
		}
		parent := filepath.Dir(folder)
		require.NotEqual(t, parent, folder, "no go.mod above the test")
		folder = parent
	}
}

func TestFloors(t *testing.T) {
	root, module := moduleRoot(t)
	document, err := os.ReadFile(filepath.Join(root, "DEVELOPERS.md"))
	require.NoError(t, err)
	floors, err := parseTable(string(document))
	require.NoError(t, err)
	packages, references, err := scan(os.DirFS(root), module)
	require.NoError(t, err)
	require.Contains(t, packages, "rational/prime")
	require.Contains(t, packages, "cmd/floors")
	require.Greater(t, len(references), 20)
	require.Empty(t, floors.violations(packages, references))
}
