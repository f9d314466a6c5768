package kinematics_test

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/rational/kinematics"
)

// in wraps points, which begin on line 2, into a document.
func in(points string) string {
	return `{"format": "eliminant/points/1", "points": [` + "\n" + points + "\n]}"
}

// broken documents: each with all errors expected, in order.
var broken = []struct {
	name, text string
	want       []string // "line:column code leg: message fragment"
}{
	{"empty file", "", []string{"1:1 json 0: expected a value, the file ends here"}},
	{"not JSON", "format = 1", []string{"1:1 json 0: expected a value, found 'f'"}},
	{"cut off", `{"format": "eliminant/points/1", "points": [`, []string{"1:45 json 0: the file ends here"}},
	{"text after the end", in(`{"twistors": []}`) + "\n]", []string{"4:1 json 0: expected the end of the file, found ']'"}},
	{"trailing comma", in(`{"twistors": [[1,2,3,4],]}`), []string{"2:25 json 0: expected a value, found ']'"}},
	{"open string", "{\"format", []string{"1:2 json 0: no closing quote"}},
	{"control character", "{\"a\tb\": 1}", []string{"1:4 json 0: control character"}},
	{"bad escape", `{"a\q": 1}`, []string{"1:4 json 0: not an escape"}},
	{"bad hexadecimal", `{"\u12g4": 1}`, []string{"1:3 json 0: not an escape"}},
	{"escape cut off", `{"\`, []string{"1:3 json 0: not an escape"}},
	{"lonely minus", in(`{"twistors": [[-]]}`), []string{"2:17 json 0: expected a digit, found ']'"}},
	{"no digits after the point", in(`{"twistors": [[1.]]}`), []string{"2:18 json 0: expected a digit"}},
	{"no digits in the exponent", in(`{"twistors": [[1e+]]}`), []string{"2:19 json 0: expected a digit"}},
	{"key without value", `{"a"}`, []string{"1:5 json 0: expected ':', found '}'"}},
	{"no comma between keys", `{"a": 1 "b": 2}`, []string{"1:9 json 0: expected ',' or '}'"}},
	{"no comma between values", `[1 2]`, []string{"1:4 json 0: expected ',' or ']'"}},
	{"key is a number", `{1: 2}`, []string{"1:2 json 0: expected a key in quotes"}},
	{"half a surrogate", `{"\ud800": 1}`, []string{"1:3 json 0: surrogate"}},
	{"leading zeros", in(`{"twistors": [[01,2,3,4]]}`), []string{"2:16 json 0: leading zeros"}},
	{"key twice", in(`{"twistors": 1, "twistors": 2}`), []string{`2:17 json 0: the key "twistors" is given twice`}},
	{"not UTF-8", "{\"a\": \"\xff\"}", []string{"1:8 json 0: not UTF-8"}},
	{"too deep", in("[[[[[[[[[[1]]]]]]]]]]"), []string{"2:8 json 0: nested more than 8 levels"}},
	{"array at the top", "[]", []string{"1:1 format 0: expected an object"}},
	{"no format", `{"points": []}`, []string{`1:1 format 0: "format" is missing`}},
	{"another format", "{\n  \"format\": \"eliminant/points/2\"}", []string{`2:13 format 0: expected "eliminant/points/1"`}},
	{"no points", `{"format": "eliminant/points/1"}`, []string{`1:1 key 0: "points" is missing`}},
	{"empty points", `{"format": "eliminant/points/1", "points": []}`, []string{"1:44 shape 0: found an empty array"}},
	{"unknown key", `{"format": "eliminant/points/1", "pionts": [], "points": [{}]}`, []string{
		`1:34 key 0: unknown key "pionts"`, "1:59 kind 0: no kinematics"}},
	{"point is a number", in("7"), []string{"2:1 shape 0: a point must be an object, found the number 7"}},
	{"two kinds", in(`{"twistors": [], "spinors": {}}`), []string{"2:1 kind 0: twistors, spinors"}},
	{"misspelt key", in(`{"polarizations": [], "momenta": [[1,1,0,0],[1,-1,0,0],[-1,0,1,0],[-1,0,-1,0]]}`), []string{`2:2 key 0: unknown key "polarizations"`}},
	{"key of another kind", in(`{"metric": "+---", "twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3,1]]}`), []string{`2:2 key 0: unknown key "metric"`}},
	{"label is a number", in(`{"label": 3, "twistors": []}`), []string{"2:11 label 0: found the number 3"}},
	{"empty label", in(`{"label": "", "twistors": []}`), []string{"2:11 label 0: a label must be text"}},
	{"label twice", in(`{"label": "p2", "twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3,1]]},
{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3,1]]}`), []string{`3:1 label 0: "p2" is used twice`}},

	{"JSON float", in(`{"twistors": [[1,0.5,3,4]]}`), []string{"2:18 number 1: 0.5 is a decimal number"}},
	{"exponent", in(`{"twistors": [[1,2,3,1e3]]}`), []string{"2:22 number 1: 1e3 is a decimal number"}},
	{"float in a string", in(`{"twistors": [[1,2,"0.25",4]]}`), []string{"2:20 number 1: 0.25 is a decimal number"}},
	{"zero denominator", in(`{"twistors": [[1,2,3,4],["1/0",2,3,4]]}`), []string{`2:26 number 2: "1/0" has a zero denominator`}},
	{"space in a number", in(`{"twistors": [["1 /2",2,3,4]]}`), []string{`2:16 number 1: "1 /2" is not an exact number`}},
	{"complex number", in(`{"twistors": [["3/5+2/7*i",2,3,4]]}`), []string{"2:16 number 1: is not real"}},
	{"null component", in(`{"twistors": [[null,2,3,4]]}`), []string{"2:16 number 1: found null"}},
	{"empty string", in(`{"twistors": [["",2,3,4]]}`), []string{`2:16 number 1: "" is not an exact number`}},
	{"too many digits", in(`{"twistors": [["` + strings.Repeat("9", 4097) + `",2,3,4]]}`), []string{"2:16 number 1: 4097 digits, more than the limit of 4096"}},
	{"too many digits below", in(`{"twistors": [["1/` + strings.Repeat("9", 4097) + `",2,3,4]]}`), []string{"2:16 number 1: 4097 digits, more than the limit of 4096"}},
	{"no coefficients", in(`{"twistors": [[[],2,3,4]]}`), []string{"2:16 shape 1: 0 coefficients"}},
	{"too many coefficients", in(`{"twistors": [[[` + strings.Repeat("1,", 65) + `1],2,3,4]]}`), []string{"2:16 shape 1: 66 coefficients"}},
	{"nested coefficients", in(`{"twistors": [[[[1]],2,3,4]]}`), []string{"2:17 number 1: found an array"}},
	{"several at once", in(`{"label": "a", "twistors": [[1,2,3,x]]}`), []string{"2:36 json 0: expected a value, found 'x'"}},
	{"every wrong number", in(`{"twistors": [[1.5,2,3,4],
[1,"a",3,true]]}`), []string{"2:16 number 1: 1.5", `3:4 number 2: "a"`, "3:10 number 2: true"}},

	{"three legs", in(`{"twistors": [[1,2,3,4],[2,1,1,1],[1,0,0,1]]}`), []string{"2:14 legs 0: 3 legs; from 4 to 64"}},
	{"too many legs", in(`{"twistors": [` + strings.Repeat("[1,2,3,4],", 64) + `[1,2,3,4]]}`), []string{"2:14 legs 0: 65 rows"}},
	{"short twistor", in(`{"twistors": [[1,0,0,1],[0,1,2],[1,1,1,1],[2,1,3,1]]}`), []string{"2:25 shape 2: twistors of leg 2: 3 components, expected 4"}},
	{"row is a number", in(`{"twistors": [[1,0,0,1],5,[1,1,1,1],[2,1,3,1]]}`), []string{"2:25 shape 2: found the number 5"}},
	{"rows are no array", in(`{"twistors": {}}`), []string{"2:14 shape 0: twistors must be an array of rows"}},
	{"vanishing bracket", in(`{"twistors": [[1,0,0,1],[0,1,2,0],[0,2,1,1],[2,1,3,1]]}`), []string{"2:25 bracket 2: <2 3> = 0"}},
	{"vanishing cyclic bracket", in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,2,1,1],[2,0,3,1]]}`), []string{"2:45 bracket 4: <4 1> = 0"}},

	{"spinors without square", in(`{"spinors": {"angle": [[1,0],[0,1],[1,1],[1,3]]}}`), []string{`2:13 key 0: "square" is missing`}},
	{"spinors are an array", in(`{"spinors": []}`), []string{`2:13 shape 0: "spinors" must be an object`}},
	{"unequal spinors", in(`{"spinors": {"angle": [[1,0],[0,1],[1,1],[1,3]],
"square": [[1,2],[3,-1],[0,0]]}}`), []string{"3:11 shape 0: square: 3 rows for 4 legs"}},
	{"spinors not conserved", in(`{"spinors": {"angle": [[1,0],[0,1],[1,1],[1,3]],
"square": [[1,2],[3,-1],[0,"-7/2"],[-1,2]]}}`), []string{
		"2:13 conservation 0: component 1 of angle times component 2 of square sums to 1/2",
		"2:13 conservation 0: component 2 of angle times component 2 of square sums to 3/2"}},

	{"off shell and not conserved", in(`{"momenta": [[3,1,2,2],
[3,-1,-2,-2],
[-3,2,"1/2",2],
[-3,-2,-1,-2]]}`), []string{
		"2:13 conservation 0: component 3 sums to -1/2",
		"4:1 on-shell 3: leg 3 is off shell: k^2 - m^2 = 3/4 - 0 = 3/4"}},
	{"massless declared massive", in(`{"masses_squared": "1/3",
"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]]}`), []string{
		"3:13 on-shell 1: 0 - 1/3 = -1/3", "3:23 on-shell 2: = -1/3", "3:36 on-shell 3: = -1/3", "3:47 on-shell 4: = -1/3"}},
	{"number of masses", in(`{"masses_squared": [0,0,1],
"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]]}`), []string{"2:20 mass 0: 3 squared masses for 4 legs"}},
	{"mass of a family", in(`{"masses_squared": [0,0,1,[1,2]],
"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]]}`), []string{"2:27 mass 4: masses do not depend on the parameter"}},
	{"metric is a number", in(`{"metric": 4, "momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]]}`), []string{"2:12 metric 0: found the number 4"}},
	{"metric of letters", in(`{"metric": "pmmm", "momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]]}`), []string{`2:12 metric 0: "pmmm" is not a string of signs`}},
	{"metric too long", in(`{"metric": "+----", "momenta": [[3,1,2,2],[3,-1,-2,-2,0],[-3,2,1,2,0],[-3,-2,-1,-2,0]]}`), []string{
		"2:33 shape 1: momenta of leg 1: 4 components, expected 5"}},
	{"two dimensions", in(`{"momenta": [[1,1],[1,1],[-1,-1],[-1,-1]]}`), []string{"2:13 metric 0: momenta in 2 dimensions"}},
	{"the metric decides", in(`{"metric": "+-+-", "momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,-2,-2,-1],[-3,2,2,1]]}`), []string{
		"2:32 on-shell 1: = 8", "2:42 on-shell 2: = 8", "2:55 on-shell 3: = 8", "2:69 on-shell 4: = 8"}},
	{"polarisation not transverse", in(`{"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]],
"polarisations": [[0,2,-1,0],[0,2,-1,0],null,[1,0,0,1]]}`), []string{"3:46 transversality 4: e.k = -1, not 0"}},
	{"polarisation of another length", in(`{"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]],
"polarisations": [[0,2,-1,0],[0,2,-1],null,null]}`), []string{"3:30 shape 2: polarisations of leg 2: 3 components, expected 4"}},
	{"second polarisations alone", in(`{"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]],
"polarisations2": [[0,2,-1,0],null,null,null]}`), []string{"3:19 key 0: second polarisations without first ones"}},
	{"second polarisation not transverse", in(`{"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]],
"polarisations": [null,null,null,null],
"polarisations2": [[0,2,1,0],null,null,null]}`), []string{"4:20 transversality 1: polarisations2 of leg 1: e.k = -4, not 0"}},

	{"invariants not symmetric", in(`{"invariants": [
[0,2,-5,3],
[2,0,3,-5],
[-5,4,0,1],
[3,-5,2,0]]}`), []string{
		"5:5 symmetry 3: entry (3,2) is 4, entry (2,3) is 3",
		"6:7 symmetry 4: entry (4,3) is 2, entry (3,4) is 1"}},
	{"diagonal not zero", in(`{"invariants": [[0,2,-5,3],
[2,0,3,-5],
[-5,3,"1/2","3/2"],
[3,-5,"3/2","1/2"]]}`), []string{
		"4:7 diagonal 3: (3,3) is 1/2, not 0", "5:13 diagonal 4: (4,4) is 1/2, not 0"}},
	{"row sums", in(`{"invariants": [[0,2,-5,3],
[2,0,3,-5],
[-5,3,0,1],
[3,-5,1,0]]}`), []string{
		"4:1 row-sum 3: row 3 sums to -1, not 0 (off by -1)", "5:1 row-sum 4: row 4 sums to -1, not 0 (off by -1)"}},
	{"massive row sums", in(`{"masses_squared": 1, "invariants": [[0,2,-5,3],
[2,0,3,-5],
[-5,3,0,2],
[3,-5,2,0]]}`), []string{
		"2:38 row-sum 1: row 1 sums to 0, not 4 (off by -4)", "3:1 row-sum 2: off by -4", "4:1 row-sum 3: off by -4", "5:1 row-sum 4: off by -4"}},
	{"row too long", in(`{"invariants": [[0,2,-5,3,0],[2,0,3,-5],[-5,3,0,2],[3,-5,2,0]]}`), []string{"2:17 shape 1: invariants of leg 1: 5 components, expected 4"}},

	{"products without k.k", in(`{"products": {"e.k": []}}`), []string{`2:14 key 0: "k.k" is missing`}},
	{"unknown product", in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]], "g.k": 1}}`), []string{`2:69 key 0: unknown key "g.k"`}},
	{"products not conserved", in(`{"products": {"k.k": [[0,1,-3,2],
[1,0,2,-3],
[-3,2,1,1],
[2,-3,1,0]]}}`), []string{"4:1 row-sum 3: k.k: row 3 sums to 1"}},
	{"e.k without e.e", in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]],
"e.k": [[0,1,-1,0],null,null,null]}}`), []string{"3:8 key 0: e.k needs e.e too"}},
	{"f without e", in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]],
"f.k": [null,null,null,null], "f.e": [null,null,null,null], "f.f": [null,null,null,null]}}`), []string{"3:8 key 0: f.k needs e.k too"}},
	{"e.k of its own leg", in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]],
"e.k": [[1,0,-1,0],[1,0,-2,0],null,null],
"e.e": [[0,1,null,null],[2,0,null,0],null,null]}}`), []string{
		"3:10 diagonal 1: e.k: the diagonal entry (1,1) is 1",
		"3:20 row-sum 2: e.k: row 2 sums to -1",
		"4:26 symmetry 2: e.e is not symmetric: entry (2,1) is 2, entry (1,2) is 1"}},
	{"null product of a polarised leg", in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]],
"e.k": [[0,1,null,0],[1,0,-1,0],null,null],
"e.e": [[0,null,null,null],[null,0,null,0],null,null]}}`), []string{
		"3:14 shape 1: e.k: entry (1,3) is null", "4:12 shape 1: e.e: entry (1,2) is null", "4:29 shape 2: e.e: entry (2,1) is null"}},
	{"product of an unpolarised leg", in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]],
"e.k": [[0,1,-1,0],null,null,null],
"e.e": [[0,5,null,0],null,null,[0,0,0,0]]}}`), []string{
		"4:12 shape 1: entry (1,2) is 5, but leg 2 has no polarisation", "4:32 shape 4: leg 4 has a row in only one of e.k and e.e"}},
	{"null row of k.k", in(`{"products": {"k.k": [[0,1,-3,2],null,[-3,2,0,1],[2,-3,1,0]]}}`), []string{"2:34 shape 2: must be an array, found null"}},
	{"mass that depends on the parameter", in(`{"products": {"k.k": [[[0,1],[1,-1],-3,2],[[1,-1],[0,1],2,-3],[-3,2,0,1],[2,-3,1,0]]}}`), []string{
		"2:24 mass 1: the squared mass of leg 1 depends on the parameter: e", "2:51 mass 2: depends on the parameter: e"}},

	{"family off shell", in(`{"momenta": [[[3,1],1,2,2],[[3,-1],-1,-2,-2],[-3,2,1,2],[-3,-2,-1,-2]]}`), []string{
		"2:14 on-shell 1: = 6*e+e^2", "2:28 on-shell 2: = -6*e+e^2"}},
	{"family not conserved", in(`{"momenta": [[3,1,2,2],[3,-1,-2,-2],[-3,2,1,2],[[-3,3],[-2,2],[-1,1],[-2,2]]]}`), []string{
		"2:13 conservation 0: component 1 sums to 3*e", "2:13 conservation 0: component 2 sums to 2*e",
		"2:13 conservation 0: component 3 sums to e", "2:13 conservation 0: component 4 sums to 2*e"}},
	{"bracket zero for every parameter", in(`{"twistors": [[[1,1],0,0,1],[[2,3],0,2,0],[1,1,1,1],[2,1,3,1]]}`), []string{"2:15 bracket 1: <1 2> = 0"}},
	{"errors of every point", in(`{"twistors": [[1,2,3]]},
{"label": "second", "momenta": [[1,1,0,0],[1,-1,0,0],[-1,0,1,0],[-1,0,-1,1]]}`), []string{
		"2:14 legs 0: 1 leg;", "3:32 conservation 0: component 4 sums to 1", "3:65 on-shell 4: leg 4 is off shell: k^2 - m^2 = -1 - 0 = -1"}},
	{"Unicode before the place", in(`{"label": "\u03bb\u00e9λé", "twistors": [[1,0,0,1],[0,1,2,0],[0,2,1,1],[2,1,3,0.5]]}`), []string{"2:79 number 4: 0.5"}},
}

func TestBrokenDocuments(t *testing.T) {
	for _, c := range broken {
		t.Run(c.name, func(t *testing.T) {
			points, err := kinematics.ReadPoints(strings.NewReader(c.text), "points.json")
			require.Nil(t, points)
			var list kinematics.InputErrors
			require.ErrorAs(t, err, &list)
			var got []string
			for _, e := range list {
				require.Equal(t, "points.json", e.File)
				got = append(got, fmt.Sprintf("%d:%d %s %d: %s", e.Line, e.Column, e.Code, e.Leg, e.Message))
			}
			require.Len(t, got, len(c.want), "%s", strings.Join(got, "\n"))
			for i, want := range c.want {
				head, fragment, _ := strings.Cut(want, ": ")
				require.True(t, strings.HasPrefix(got[i], head+": "), "got %s, want %s", got[i], want)
				require.Contains(t, got[i], fragment)
			}
			require.Contains(t, err.Error(), "points.json:")
		})
	}
}

func TestHints(t *testing.T) {
	for text, hint := range map[string]string{
		in(`{"twistors": [[1,0.5,3,4]]}`):                                    `if it is meant exactly, write "1/2"`,
		in(`{"polarizations": [], "momenta": [[1,1,0]]}`):                    `"polarisations" is meant?`,
		in(`{"momenta": [[2,1,0],[2,-1,0],[-2,0,1],[-2,0,-1]]}`):             `massive legs need "masses_squared"`,
		in(`{"momenta": [[2,1,0],[2,-1,0],[-2,0,1]], "colour": "red"}`):      "known here: label, momenta, metric, polarisations",
		`{"format": "eliminant/points/1", "point": [], "points": [{"a":1}]}`: `"points" is meant?`,
	} {
		_, err := kinematics.ReadPoints(strings.NewReader(text), "")
		require.ErrorContains(t, err, hint)
	}
}

func TestManyErrorsAreCounted(t *testing.T) {
	row := strings.Repeat("0.5,", 149) + "0.5"
	_, err := kinematics.ReadPoints(strings.NewReader(in(`{"twistors": [[`+row+`]]}`)), "many.json")
	var list kinematics.InputErrors
	require.ErrorAs(t, err, &list)
	require.Len(t, list, 101)
	require.Equal(t, kinematics.CodeFurther, list[100].Code)
	require.Equal(t, "50 further errors are not listed", list[100].Message)
}

func TestFilesThatCannotBeRead(t *testing.T) {
	_, err := kinematics.ReadPointsFile(filepath.Join(t.TempDir(), "absent.json"))
	var list kinematics.InputErrors
	require.ErrorAs(t, err, &list)
	require.Equal(t, kinematics.CodeFile, list[0].Code)
	require.Contains(t, list[0].Message, "no such file")

	path := filepath.Join(t.TempDir(), "large.json")
	require.NoError(t, os.WriteFile(path, make([]byte, kinematics.MaxFileBytes+1), 0o600))
	_, err = kinematics.ReadPointsFile(path)
	require.ErrorContains(t, err, "more than the limit of 16777216 bytes")

	_, err = kinematics.ReadPoints(strings.NewReader(in(`{"twistors": [`+strings.Repeat("0,", 1<<20)+`0]}`)), "")
	require.ErrorContains(t, err, "more than 1048576 values")
}

func TestEscapesInLabels(t *testing.T) {
	text := in(`{"label": "\"\\\/\u00e9 \ud83d\ude00 \u03C6<", "twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3,1]]}`)
	points, err := kinematics.ReadPoints(strings.NewReader(text), "")
	require.NoError(t, err)
	require.Equal(t, "\"\\/é 😀 φ<", points[0].Label)
	requireRoundTrip(t, points)
}

func TestReadingWhatIsAllowed(t *testing.T) {
	text := "\ufeff" + in(`{"momenta": [["3", 1, 2, "4/2"], [3,-1,-2,-2], [-3,2,1,2], ["-006/2",-2,-1,-2]], "masses_squared": 0,
"polarisations": [[0,2,-1,0],null,null,null]},
{"label": "massive \u03c6", "metric": "-+++", "momenta": [[2,1,0,0],[2,-1,0,0],[-2,0,1,0],[-2,0,-1,0]], "masses_squared": ["-3",-3,-3,"-6/2"]},
{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]],
 "e.k": [[0,1,-1,0],[1,0,-1,0],null,null], "e.e": [[7,1,null,0],[1,0,0,null],null,null]}}`)
	points, err := kinematics.ReadPoints(strings.NewReader(text), "")
	require.NoError(t, err)
	require.Equal(t, []string{"p1", "massive φ", "p3"}, []string{points[0].Label, points[1].Label, points[2].Label})
	require.Equal(t, "+---", points[0].Metric)
	require.Nil(t, points[0].MassesSquared)
	require.Equal(t, "-3", points[1].MassesSquared[3].RatString())
	v, err := points[1].Invariants()
	require.NoError(t, err)
	m, common := v.CommonMassSquared()
	require.True(t, common)
	require.Equal(t, "-3", m.RatString())
	require.Equal(t, "-16", v.S(1, 2).RatString())
	requireRoundTrip(t, points)
}
