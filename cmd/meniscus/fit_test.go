package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/spf13/pflag"
	"google.golang.org/protobuf/encoding/protojson"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

var usualFit = []string{"fit", "--rx", "-4.25 / -1.50 x 175", "--vertex", "12", "--k", "7.80 @ 180 / 7.60 @ 90"}

func TestAFitIsLaidOutWithTheLensFirstAndTheNoticeLast(t *testing.T) {
	t.Parallel()
	for name, c := range map[string]struct {
		answer *pb.FitResponse
		more   []string
	}{
		"fit_spherical.txt":      {sphericalFit(), nil},
		"fit_full.txt":           {fullFit(), nil},
		"fit_full_explained.txt": {fullFit(), []string{"--explain"}},
		"fit_spherical.json":     {sphericalFit(), []string{"--json"}},
		"fit_without_parts.txt":  {&pb.FitResponse{}, nil},
	} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			got := call(t, &fake{answer: c.answer}, "", append(usualFit[:len(usualFit):len(usualFit)], c.more...)...)
			if got.code != exitFine || got.err != "" {
				t.Fatalf("exit code %d, standard error %q", got.code, got.err)
			}
			golden(t, name, got.out)
		})
	}
}

func TestJSONIsExactlyTheAnswerWithTheNamesOfTheSchema(t *testing.T) {
	t.Parallel()
	want := fullFit()
	got := call(t, &fake{answer: want}, "", append(usualFit[:len(usualFit):len(usualFit)], "--json")...)
	read := &pb.FitResponse{}
	if err := protojson.Unmarshal([]byte(got.out), read); err != nil || got.code != exitFine || got.err != "" {
		t.Fatalf("%v, exit code %d, standard error %q", err, got.code, got.err)
	}
	if !proto.Equal(read, want) {
		t.Errorf("got %v, want %v", read, want)
	}
	if !strings.Contains(got.out, `"optic_zone_radius_mm": 8.125`) {
		t.Errorf("the names are not those of the schema, or the white space varies:\n%s", got.out)
	}
}

// The request has what was given and nothing else, so that an absent flag and one that says zero differ.
func TestFlagsBecomeTheRequestAndAbsentStaysAbsent(t *testing.T) {
	t.Parallel()
	usual := `"refraction":{"sphere_d":-4.25,"cylinder_d":-1.5,"axis_deg":175},
		"keratometry":{"flat":{"radius_mm":7.8,"meridian_deg":180},"steep":{"radius_mm":7.6,"meridian_deg":90}}`
	withVertex := func(mm string) string {
		return `"refraction":{"sphere_d":-4.25,"cylinder_d":-1.5,"axis_deg":175,"vertex_distance_mm":` + mm + `},
		"keratometry":{"flat":{"radius_mm":7.8,"meridian_deg":180},"steep":{"radius_mm":7.6,"meridian_deg":90}}`
	}
	for _, c := range []struct {
		flags []string
		want  string
	}{
		{nil, `{"eye":{` + usual + `}}`},
		{[]string{"--vertex", "0"}, `{"eye":{` + withVertex("0") + `}}`},
		{[]string{"--vertex", "12"}, `{"eye":{` + withVertex("12") + `}}`},
		{[]string{"--vertex=12,5 mm"}, `{"eye":{` + withVertex("12.5") + `}}`},
		{[]string{"--eye", "OD"}, `{"eye":{"side":"SIDE_RIGHT",` + usual + `}}`},
		{[]string{"--eye", "l"}, `{"eye":{"side":"SIDE_LEFT",` + usual + `}}`},
		{
			[]string{"--shape-q", "-0.26", "--iris", "11.8", "--pupil", "4", "--eye", "Right"},
			`{"eye":{"side":"SIDE_RIGHT",` + usual + `,"cornea_shape":{"asphericity_q":-0.26},"iris_diameter_mm":11.8,"pupil_diameter_mm":4}}`,
		},
		{
			[]string{"--add", "+2.00", "--keratometric-index", "1.332"},
			`{"eye":{"refraction":{"sphere_d":-4.25,"cylinder_d":-1.5,"axis_deg":175,"add_d":2},
			"keratometry":{"flat":{"radius_mm":7.8,"meridian_deg":180},"steep":{"radius_mm":7.6,"meridian_deg":90},"keratometric_index":1.332}}}`,
		},
		{
			[]string{
				"--radius", "7.80", "--steep-radius", "7.65 mm", "--flat-meridian", "175°", "--diameter", "9.6", "--zone-diameter", "8",
				"--thickness", "0.14", "--index", "1.45", "--dk", "100", "--material", " invented XP", "--power", "-3.00 / -1.25 x 175", "--toricity", "Bitoric",
			},
			`{"eye":{` + usual + `},"lens":{"toricity":"TORICITY_BITORIC",
			"back_surface":{"optic_zone_radius_mm":7.8,"steep_radius_mm":7.65,"flat_meridian_deg":175,"optic_zone_diameter_mm":8},
			"total_diameter_mm":9.6,"centre_thickness_mm":0.14,"material":{"refractive_index":1.45,"dk":100,"name":"invented XP"},
			"power":{"sphere_d":-3,"cylinder_d":-1.25,"axis_deg":175}}}`,
		},
		{[]string{"--toricity", "spherical"}, `{"eye":{` + usual + `},"lens":{"toricity":"TORICITY_SPHERICAL"}}`},
		{[]string{"--toricity", "front"}, `{"eye":{` + usual + `},"lens":{"toricity":"TORICITY_FRONT"}}`},
		{[]string{"--toricity", "back"}, `{"eye":{` + usual + `},"lens":{"toricity":"TORICITY_BACK"}}`},
		{[]string{"--power", "-4.00"}, `{"eye":{` + usual + `},"lens":{"power":{"sphere_d":-4}}}`},
		{[]string{"--power", "plano"}, `{"eye":{` + usual + `},"lens":{"power":{"sphere_d":0}}}`},
		{[]string{"--offset", "-0.25"}, `{"eye":{` + usual + `},"plan":{"back_curve_rule":"BACK_CURVE_RULE_OFFSET","back_curve_offset_d":-0.25}}`},
		{[]string{"--offset", "0"}, `{"eye":{` + usual + `},"plan":{"back_curve_rule":"BACK_CURVE_RULE_OFFSET","back_curve_offset_d":0}}`},
		{[]string{"--offset", "\u22120.5 D"}, `{"eye":{` + usual + `},"plan":{"back_curve_rule":"BACK_CURVE_RULE_OFFSET","back_curve_offset_d":-0.5}}`},
		{
			[]string{
				"--tear-index", "1.336", "--power-step", "0.125", "--cylinder-step", "0.5", "--axis-step", "10", "--radius-step", "0.1", "--clearance", "15",
				"--plus-cylinder", "--explain",
			},
			`{"eye":{` + usual + `},"plan":{"tear_index":1.336,"power_step_d":0.125,"cylinder_step_d":0.5,"axis_step_deg":10,"radius_step_mm":0.1,
			"apex_clearance_um":15,"cylinder_form":"CYLINDER_FORM_PLUS","explain":true}}`,
		},
	} {
		want := &pb.FitRequest{}
		if err := protojson.Unmarshal([]byte(c.want), want); err != nil {
			t.Fatalf("%v: %v", c.flags, err)
		}
		f := &fake{answer: sphericalFit()}
		args := append([]string{"fit", "--rx", "-4.25 / -1.50 x 175", "--k", "7.80 @ 180 / 7.60 @ 90"}, c.flags...)
		got := call(t, f, "", args...)
		if got.code != exitFine {
			t.Errorf("%v: exit code %d, %s", c.flags, got.code, got.err)
			continue
		}
		if f.method != "/meniscus.v1.FittingService/Fit" || !proto.Equal(f.asked, want) {
			t.Errorf("%v: asked %s for\n%v\nwant\n%v", c.flags, f.method, f.asked, want)
		}
	}
}

func TestEveryNumberOfTheFlagsReachesAFieldOfItsOwn(t *testing.T) {
	t.Parallel()
	seen := map[string]string{}
	f := newFitFlags(pflag.NewFlagSet("fit", pflag.ContinueOnError))
	for _, one := range append(append(f.measured.list, f.ordered.list...), f.planned.list...) {
		if q := quantityOf(&pb.FitRequest{}, one.path); q.GetUnit() == "" {
			t.Errorf("--%s: %s is no number with a unit", one.flag, one.path)
		}
		if other := seen[one.path]; other != "" {
			t.Errorf("--%s and --%s are both %s", one.flag, other, one.path)
		}
		seen[one.path] = one.flag
	}
}

func TestAWrongCommandLineIsToldInFullAndNothingIsAsked(t *testing.T) {
	t.Parallel()
	file := filepath.Join(t.TempDir(), "request.json")
	if err := os.WriteFile(file, []byte(`{"eye":{"refraction":{"sphere":-3}}}`), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		args []string
		says []string
	}{
		{[]string{"fit"}, []string{"fit needs --rx and --k, or --file"}},
		{[]string{"fit", "--rx", "-4.25"}, []string{"fit needs --rx and --k"}},
		{[]string{"fit", "--k", "7.80"}, []string{"fit needs --rx and --k"}},
		{
			[]string{"fit", "--rx", "-4.25 / x", "--k", "7.80 / 44", "--eye", "both", "--toricity", "oval", "--power", "y"},
			[]string{
				`--rx: refraction.cylinder_d: "x" at character 9 of "-4.25 / x"`, "--k: keratometry: ", `--eye: "both" is not a side`, `--toricity: "oval" is not a kind`,
				"--power: power.sphere_d: ",
			},
		},
		{append(usualFit[:len(usualFit):len(usualFit)], "--iris", "wide"), []string{`"wide" for "--iris"`, "a number in mm is needed"}},
		{append(usualFit[:len(usualFit):len(usualFit)], "--shape-q", "NaN"), []string{`"NaN" for "--shape-q"`, "a number is needed"}},
		{append(usualFit[:len(usualFit):len(usualFit)], "--radius", "7.80 D"), []string{`"7.80 D" for "--radius"`, "a number in mm is needed"}},
		{append(usualFit[:len(usualFit):len(usualFit)], "-4.25"), []string{`fit takes flags only, and "-4.25" is not one`}},
		{append(usualFit[:len(usualFit):len(usualFit)], "--colour"), []string{"unknown flag: --colour"}},
		{append(usualFit[:len(usualFit):len(usualFit)], "--iris"), []string{"flag needs an argument: --iris"}},
		{
			[]string{"fit", "--rx", "-4.25, vertex 13", "--vertex", "12", "--k", "7.80"},
			[]string{"the vertex distance is 13 mm in --rx and 12 mm by its flag"},
		},
		{
			[]string{"fit", "--rx", "-4.25, add +1.50", "--add", "2", "--k", "7.80"},
			[]string{"the addition is 1.5 D in --rx and 2 D by its flag"},
		},
		{[]string{"fit", "--file", filepath.Join(t.TempDir(), "none.json")}, []string{"--file: ", "no such file"}},
		{[]string{"fit", "--file", file}, []string{"is not a FitRequest as JSON", `unknown field "sphere"`}},
		{[]string{"fit", "--file", file, "--rx", "-3", "--vertex", "12", "--dk", "0"}, []string{"--file has the whole request; leave out --rx, --vertex, --dk"}},
		{[]string{"vertex"}, []string{"vertex takes one refraction, between quotes; 0 arguments were given"}},
		{[]string{"vertex", "-7.00", "/", "-3.00"}, []string{"vertex takes one refraction, between quotes; 3 arguments were given"}},
		{[]string{"vertex", "seven"}, []string{"REFRACTION: refraction.sphere_d: "}},
		{[]string{"vertex", "-7, vertex 12", "--from", "13"}, []string{"the vertex distance is 12 mm in REFRACTION and 13 mm by its flag"}},
		{[]string{"combine"}, []string{"combine takes one or more powers"}},
		{[]string{"combine", "x", "-1.00", "y", "--minus", "z"}, []string{"POWER 1: ", "POWER 3: ", "--minus 1: "}},
		{[]string{"express", "-1.00 vertex 12"}, []string{"POWER: power: "}},
		{[]string{"express"}, []string{"express takes one power"}},
		{[]string{"cornea", "7.80 / 44"}, []string{"READINGS: keratometry: "}},
		{[]string{"cornea", "7.80", "--chord", "9,wide"}, []string{`"9,wide" for "--chord"`, "a number in mm is needed, or more of them with commas between"}},
		{[]string{"cautions", "all"}, []string{`cautions takes flags only, and "all" is not one`}},
		{[]string{"methods", "-1"}, []string{`methods takes flags only, and "-1" is not one`}},
		{[]string{"prescribe"}, []string{`unknown command "prescribe"`}},
		{[]string{"methods", "--timeout", "0s"}, []string{"--timeout is 0s"}},
		{[]string{"methods", "--timeout", "soon"}, []string{`"soon" for "--timeout"`}},
		{[]string{"methods", "--plaintext"}, []string{"--server HOST:PORT is needed as well"}},
		{[]string{"methods", "--server", "localhost"}, []string{`--server is "localhost": HOST:PORT is needed`}},
		{[]string{"methods", "--server", ":7417"}, []string{`--server is ":7417": HOST:PORT is needed`}},
		{[]string{"methods", "--server", "localhost:"}, []string{"HOST:PORT is needed"}},
	} {
		f := &fake{answer: sphericalFit()}
		got := call(t, f, "", c.args...)
		if got.code != exitUsage || got.out != "" || f.asked != nil {
			t.Errorf("%q: exit code %d, standard output %q, asked %v", c.args, got.code, got.out, f.asked)
		}
		for _, says := range append(c.says, "meniscus COMMAND --help shows worked examples.\n") {
			if !strings.Contains(got.err, says) {
				t.Errorf("%q: the error has no %q:\n%s", c.args, says, got.err)
			}
		}
		for line := range strings.Lines(got.err) {
			if !strings.HasPrefix(line, "meniscus") {
				t.Errorf("%q: a line of the error does not say whose it is: %q", c.args, line)
			}
		}
	}
}

func TestARequestIsReadFromAFileOrFromStandardInput(t *testing.T) {
	t.Parallel()
	const text = `{"eye":{"side":"SIDE_LEFT","refraction":{"sphere_d":-3,"vertex_distance_mm":0}},"plan":{"axis_step_deg":10}}`
	file := filepath.Join(t.TempDir(), "-1 request.json")
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	want := &pb.FitRequest{}
	if err := protojson.Unmarshal([]byte(text), want); err != nil {
		t.Fatal(err)
	}
	explained := proto.CloneOf(want)
	explained.GetPlan().SetExplain(true)
	explained.GetPlan().SetCylinderForm(pb.CylinderForm_CYLINDER_FORM_PLUS)
	for _, c := range []struct {
		stdin string
		args  []string
		want  *pb.FitRequest
	}{
		{"", []string{"fit", "--file", file}, want},
		{text, []string{"fit", "--file", "-"}, want},
		{text, []string{"fit", "--file", "-", "--explain", "--plus-cylinder"}, explained},
	} {
		f := &fake{answer: sphericalFit()}
		if got := call(t, f, c.stdin, c.args...); got.code != exitFine || !proto.Equal(f.asked, c.want) {
			t.Errorf("%q: exit code %d, %s; asked for\n%v\nwant\n%v", c.args, got.code, got.err, f.asked, c.want)
		}
	}
	f := &fake{answer: sphericalFit()}
	if got := call(t, f, strings.Repeat(" ", mostBytes+1), "fit", "--file", "-"); got.code != exitUsage || !strings.Contains(got.err, "more than 1048576 bytes") {
		t.Errorf("too long a file: exit code %d, %s", got.code, got.err)
	}
}

func TestAPowerWithoutASignIsPointedOut(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"fit", "--rx", "4.25 / -1.50 x 175", "--k", "7.80"}, "meniscus: note: the sphere in --rx has no sign and was read as plus\n"},
		{[]string{"fit", "--rx", "4.25 / 1.50 x 175", "--k", "7.80", "--json"}, "meniscus: note: the sphere and cylinder in --rx have no sign and were read as plus\n"},
		{[]string{"fit", "--rx", "-4.25", "--k", "7.80", "--power", "4"}, "meniscus: note: the sphere in --power has no sign and was read as plus\n"},
		{[]string{"fit", "--rx", "+4.25 / -1.50 x 175, vertex 12, add 2.00", "--k", "7.80"}, ""},
	} {
		if got := call(t, &fake{answer: sphericalFit()}, "", c.args...); got.code != exitFine || got.err != c.want {
			t.Errorf("%q: exit code %d, standard error %q, want %q", c.args, got.code, got.err, c.want)
		}
	}
	terms := &fake{answer: &pb.CombineResponse{}}
	got := call(t, terms, "", "combine", "-1.00", "2.00", "--minus", "3.00")
	want := "meniscus: note: the sphere in POWER 2 has no sign and was read as plus\nmeniscus: note: the sphere in --minus 1 has no sign and was read as plus\n"
	if got.code != exitFine || got.err != want {
		t.Errorf("exit code %d, standard error %q, want %q", got.code, got.err, want)
	}
}
