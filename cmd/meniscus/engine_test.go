package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"google.golang.org/protobuf/encoding/protojson"

	pb "meniscus.example/proto/meniscus/v1"
	"meniscus.example/server"
)

// These tests run the whole program, with the engine in the process.

func TestAFitFromTheEngine(t *testing.T) {
	t.Parallel()
	got := call(t, nil, "", "fit", "--rx", "-4.25", "--vertex", "0", "--k", "7.80", "--json")
	res := &pb.FitResponse{}
	if err := protojson.Unmarshal([]byte(got.out), res); err != nil || got.code != exitFine || got.err != "" {
		t.Fatalf("%v, %+v", err, got)
	}
	// At the cornea, on a spherical cornea and on its radius there is no tear lens: the lens has the power of the refraction.
	if res.GetLens().GetPower().GetSphereD() != -4.25 || res.GetLens().GetBackSurface().GetOpticZoneRadiusMm() != 7.8 {
		t.Errorf("got %v", res.GetLens())
	}
	if res.GetProvenance().GetNotice() == "" || len(res.GetCautions()) == 0 || res.HasSide() {
		t.Errorf("got %v", res)
	}
}

func TestTextOfTheEngineKeepsWithinThePage(t *testing.T) {
	t.Parallel()
	for _, args := range [][]string{
		append(usualFit[:len(usualFit):len(usualFit)], "--explain", "--dk", "100", "--eye", "OS"),
		{"fit", "--rx", "+12.25 / -8.50 x 42.5, vertex 13.5", "--k", "8.50 @ 172.5 / 6.50 @ 70", "--toricity", "bitoric", "--explain", "--material", "invented XP", "--dk", "141.5"},
		{"fit", "--rx", "-24 / -8 x 20", "--vertex", "0", "--k", "6.2 @ 180 / 5.2 @ 75", "--toricity", "spherical", "--plus-cylinder"},
		{"fit", "--rx", "-2.25 / -1.50 x 100", "--k", "7.80", "--toricity", "front"},
		{"vertex", "-7.00 / -3.00 x 180", "--from", "12", "--explain"},
		{"combine", "+1.75/+0.50x45", "-2.25/-1.00x135", "--explain"},
		{"express", "+2.00/+5.00x30", "--turn", "-10", "--explain"},
		{"cornea", "43.25@180,44.50@90", "--chord", "9,10", "--explain"},
		{"cautions"},
		{"methods"},
	} {
		got := call(t, nil, "", args...)
		if got.code != exitFine || got.err != "" {
			t.Errorf("%q: exit code %d, %s", args, got.code, got.err)
		}
		withinTheWidth(t, strings.Join(args, " "), got.out)
	}
}

// A step of the derivation for each in the answer, numbered to the last, and the notice at the end.
func TestExplainTellsEveryStep(t *testing.T) {
	t.Parallel()
	explained := append(usualFit[:len(usualFit):len(usualFit)], "--explain")
	res := &pb.FitResponse{}
	if err := protojson.Unmarshal([]byte(call(t, nil, "", append(explained, "--json")...).out), res); err != nil {
		t.Fatal(err)
	}
	text := oneLine(call(t, nil, "", explained...).out)
	if len(res.GetDerivation()) == 0 {
		t.Fatal("no derivation")
	}
	at := 0
	for i, s := range res.GetDerivation() {
		step := oneLine(fmt.Sprintf("%d. %s: %s = %s = ", i+1, s.GetName(), s.GetResult().GetName(), s.GetFormula()))
		next := strings.Index(text[at:], step)
		if next < 0 {
			t.Fatalf("step %d, %q, is not there in its place", i+1, step)
		}
		at += next
	}
	if !strings.Contains(text[at:], res.GetProvenance().GetNotice()) {
		t.Errorf("the notice does not come after the derivation")
	}
}

// What a practitioner gets wrong: each is an error that says what it looks like, with the flag, and no lens.
func TestMistakesOfThePracticeAreRefusedWithTheirFlag(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		args []string
		says []string
	}{
		{[]string{"fit", "--rx", "-4.25 / -1.50 x 175", "--k", "7.80 @ 180 / 7.60 @ 90"}, []string{"(--vertex): is missing"}},
		{[]string{"fit", "--rx", "-4.25, vertex 12", "--k", "43 mm / 44 mm @ 90"}, []string{"flat.radius_mm (--k): is 44 mm", "looks like a keratometer power"}},
		{[]string{"fit", "--rx", "-4.25, vertex 12", "--k", "7.80 D / 7.60 D @ 90"}, []string{"(--k): is 7.6 D", "looks like a radius in millimetres"}},
		{
			[]string{"fit", "--rx", "-425 / -150 x 185", "--vertex", "62", "--k", "7.80", "--radius", "43.25", "--thickness", "140"},
			[]string{"sphere_d (--rx)", "cylinder_d (--rx)", "axis_deg (--rx)", "(--vertex): is 62 mm", "(--radius): is 43.25 mm", "(--thickness): is 140 mm"},
		},
		{[]string{"fit", "--rx", "-2.25 / -1.50", "--k", "7.80 / 7.60"}, []string{"axis_deg (--rx): is missing", "meridian_deg (--k): is missing"}},
		{[]string{"fit", "--rx", "-4.25, vertex 12", "--k", "7.80", "--diameter", "8", "--zone-diameter", "9"}, []string{"(--zone-diameter): is 9 mm"}},
		{[]string{"fit", "--rx", "-4.25, vertex 12", "--k", "7.80", "--toricity", "bitoric", "--power", "-3.00"}, []string{"lens.power.cylinder_d (--power)"}},
		{[]string{"vertex", "-7.00"}, []string{"(--from): is missing"}},
		{[]string{"vertex", "-2", "--to", "50"}, []string{"to_vertex_distance_mm (--to): is 50 mm"}},
		{[]string{"combine", "-1.00", "-2.00 / -1.00"}, []string{"terms[1].sphere_cylinder.axis_deg (POWER 2): is missing"}},
		{[]string{"combine", "-1.00", "--minus", "-2.00 / -1.00"}, []string{"terms[1].sphere_cylinder.axis_deg (--minus 1): is missing"}},
		{[]string{"express", "-2.00 / -1.00"}, []string{"axis_deg (POWER): is missing"}},
		{[]string{"express", "-2.00", "--turn", "190"}, []string{"rotation_deg (--turn): is 190°"}},
		{[]string{"cornea", "7.80 / 7.60"}, []string{"(READINGS): is missing"}},
		{[]string{"cornea", "7.80", "--chord", "9,14"}, []string{"chords_mm[1] (--chord): is 14 mm"}},
	} {
		got := call(t, nil, "", c.args...)
		if got.code != exitFailed || got.out != "" {
			t.Errorf("%q: exit code %d, standard output\n%s", c.args, got.code, got.out)
		}
		told := oneLine(got.err)
		for _, says := range c.says {
			if !strings.Contains(told, says) {
				t.Errorf("%q: the error has no %q:\n%s", c.args, says, got.err)
			}
		}
		withinTheWidth(t, strings.Join(c.args, " "), got.err)
	}
}

func TestHelpKeepsWithinThePageAndSaysWhatAnAnswerIs(t *testing.T) {
	t.Parallel()
	for _, command := range append(commandNames(), "") {
		args := []string{"--help"}
		if command != "" {
			args = []string{command, "--help"}
		}
		got := call(t, nil, "", args...)
		if got.code != exitFine || got.err != "" || !strings.Contains(got.out, safety) {
			t.Errorf("%q: %+v", args, got)
		}
		withinTheWidth(t, strings.Join(args, " "), got.out)
		golden(t, strings.Trim("help_"+command, "_")+".txt", got.out)
	}
	if got := call(t, nil, ""); got.code != exitFine || got.out != call(t, nil, "", "--help").out {
		t.Errorf("without a command: %+v", got)
	}
	if got := call(t, nil, "", "--version"); got.code != exitFine || got.out != "meniscus "+server.VersionText()+"\n" {
		t.Errorf("--version: %+v", got)
	}
}

func commandNames() []string {
	var names []string
	for _, c := range (&app{}).root().Commands() {
		names = append(names, c.Name())
	}
	return names
}

// Every example of the help is run, and gives what the lines after it say.
func TestTheExamplesOfTheHelpGiveWhatTheySay(t *testing.T) {
	t.Parallel()
	file := filepath.Join(t.TempDir(), "eye.json")
	if err := os.WriteFile(file, []byte(`{"eye":{"refraction":{"sphere_d":-3},"keratometry":{"flat":{"radius_mm":7.8},"steep":{"radius_mm":7.8}}}}`), 0o600); err != nil {
		t.Fatal(err)
	}
	run := 0
	root := (&app{}).root()
	for _, c := range append(root.Commands(), root) {
		for example := range strings.SplitSeq(strings.ReplaceAll(c.Example, "\\\n", ""), "\n\n") {
			command, gives, ok := strings.Cut(example, "\n")
			if !ok {
				t.Errorf("%s: the example does not say what it gives: %s", c.Name(), example)
				continue
			}
			args := words(command)
			for i := range args {
				args[i] = strings.ReplaceAll(args[i], "eye.json", file)
			}
			got := call(t, nil, "", args[1:]...)
			if args[0] != "meniscus" || got.code != exitFine || got.err != "" {
				t.Errorf("%s: exit code %d, %s", command, got.code, got.err)
			}
			for line := range strings.Lines(gives) {
				want := oneLine(strings.TrimPrefix(strings.TrimSpace(line), "#"))
				if !strings.Contains(oneLine(got.out), want) {
					t.Errorf("%s\ndoes not give %q but\n%s", command, want, got.out)
				}
			}
			run++
		}
	}
	if run < 10 {
		t.Errorf("%d examples were run", run)
	}
}

// oneLine is a text with one space for every stretch of white space.
func oneLine(text string) string { return strings.Join(strings.Fields(text), " ") }

// words splits a command as a shell does that knows only double quotes.
func words(command string) []string {
	var out []string
	for i, part := range strings.Split(command, `"`) {
		if i%2 == 1 {
			out = append(out, part)
			continue
		}
		out = append(out, strings.Fields(part)...)
	}
	return out
}

func TestPrescriptionsMayStandWhereFlagsDo(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ in, want []string }{
		{[]string{"vertex", "-7.00", "--from", "12"}, []string{"vertex", " -7.00", "--from", "12"}},
		{[]string{"-.25", "- 4.25", "--rx", "-4.25 / -1.50"}, []string{" -.25", " - 4.25", "--rx", " -4.25 / -1.50"}},
		{[]string{"-h", "--json", "-", "", "--rx=-4.25", "\u22124.25", "--file", "-"}, []string{"-h", "--json", "-", "", "--rx=-4.25", "\u22124.25", "--file", "-"}},
	} {
		got := shielded(c.in)
		if strings.Join(got, "|") != strings.Join(c.want, "|") {
			t.Errorf("%q: got %q, want %q", c.in, got, c.want)
		}
	}
	want := call(t, nil, "", "vertex", "-7.00 / -3.00 x 180", "--from", "12")
	for _, args := range [][]string{
		{"vertex", "--from", "12", "-7.00 / -3.00 x 180"},
		{"vertex", "--from=12", "--", "-7.00 / -3.00 x 180"},
		{"vertex", "- 7.00 / -3.00 x 180", "--from", "12"},
		{"vertex", "\u22127.00 / \u22123.00 x 180", "--from", "12"},
		{"vertex", "-7,00/-3,00x180, vertex 12"},
	} {
		if got := call(t, nil, "", args...); got != want {
			t.Errorf("%q: got %+v, want %+v", args, got, want)
		}
	}
}
