package kinematics_test

import (
	"bytes"
	"context"
	"math/big"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"
	"github.com/stretchr/testify/require"

	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
)

func pointsSchema(t *testing.T) *jsonschema.Schema {
	file, err := os.Open(filepath.Join("..", "..", "fixtures", "schema", "points.schema.json"))
	require.NoError(t, err)
	defer file.Close()
	document, err := jsonschema.UnmarshalJSON(file)
	require.NoError(t, err)
	require.Equal(t, "https://json-schema.org/draft/2020-12/schema", document.(map[string]any)["$schema"])
	c := jsonschema.NewCompiler()
	require.NoError(t, c.AddResource("points.schema.json", document))
	schema, err := c.Compile("points.schema.json")
	require.NoError(t, err)
	return schema
}

func validateDocument(t *testing.T, schema *jsonschema.Schema, text string) error {
	document, err := jsonschema.UnmarshalJSON(strings.NewReader(text))
	require.NoError(t, err)
	return schema.Validate(document)
}

// Every document that is written fits the published schema.
func TestWrittenDocumentsFitTheSchema(t *testing.T) {
	schema := pointsSchema(t)
	var points []*kinematics.Point
	for _, kind := range generate.Kinds {
		for _, mass := range []*big.Rat{nil, big.NewRat(2, 1), big.NewRat(-7, 3)} {
			for _, polarisations := range []bool{false, true} {
				for _, dimension := range []int{0, 3, 7} {
					list, err := generate.ComputePoints(context.Background(), 6, 2, generate.Options{
						Kind: kind, Dimension: dimension, MassesSquared: mass, Polarisations: polarisations, Seed: "schema"})
					if err != nil {
						continue // options that do not fit the kind
					}
					points = append(points, list...)
				}
			}
		}
	}
	require.Greater(t, len(points), 50)
	partial, err := points[0].Convert(kinematics.KindMomenta)
	require.NoError(t, err)
	partial.Polarisations = make(kinematics.Matrix, partial.Legs())
	partial.Polarisations[2] = partial.Momenta[2]
	partial.Polarisations2 = partial.Polarisations
	products, err := partial.Convert(kinematics.KindProducts)
	require.NoError(t, err)
	spinors, err := points[0].Convert(kinematics.KindSpinors)
	require.NoError(t, err)
	points = append(points, partial, products, shifted(spinors, 1, 3))
	for i, p := range points {
		p.Label = "p" + strconv.Itoa(i+1)
		require.NoError(t, p.Validate())
	}
	var b bytes.Buffer
	require.NoError(t, kinematics.WritePoints(&b, points))
	require.NoError(t, validateDocument(t, schema, b.String()))
}

// The schema refuses what has the wrong shape, keys or numbers.
func TestTheSchemaRefuses(t *testing.T) {
	schema := pointsSchema(t)
	require.NoError(t, validateDocument(t, schema, in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,"3/2",1]]}`)))
	for _, text := range []string{
		`[]`,
		`{"points": [{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3,1]]}]}`,
		`{"format": "eliminant/points/1", "points": []}`,
		in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1]]}`),
		in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,0.5,1]]}`),
		in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,"0.5",1]]}`),
		in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,"1/0",1]]}`),
		in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3]]}`),
		in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3,1]], "metric": "+---"}`),
		in(`{"twistors": [[1,0,0,1],[0,1,2,0],[1,1,1,1],[2,1,3,1]], "spinors": {}}`),
		in(`{"momenta": [[1,0,0],[0,1,2],[1,1,1],[2,1,3]], "metric": "+--", "polarisations2": [null,null,null,null]}`),
		in(`{"momenta": [[1,0,0],[0,1,2],[1,1,1],[2,1,3]], "metric": "+=-"}`),
		in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]], "e.k": [null,null,null,null]}}`),
		in(`{"products": {}}`),
		in(`{}`),
	} {
		require.Error(t, validateDocument(t, schema, text), text)
	}
}
