package notation_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"google.golang.org/protobuf/proto"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

// absent stands in a table for a field that is not set.
var absent = math.NaN()

// present is a pointer to a number, or nil for absent.
func present(x float64) *float64 {
	if math.IsNaN(x) {
		return nil
	}
	return proto.Float64(x)
}

func refraction(sphere, cylinder, axis, vertex, add float64) *pb.Refraction {
	return pb.Refraction_builder{
		SphereD: present(sphere), CylinderD: present(cylinder), AxisDeg: present(axis),
		VertexDistanceMm: present(vertex), AddD: present(add),
	}.Build()
}

func TestRefractionIsReadAsItIsWrittenByHand(t *testing.T) {
	t.Parallel()
	full := refraction(-4.25, -1.50, 175, absent, absent)
	sphere := refraction(-4.25, absent, absent, absent, absent)
	for _, c := range []struct {
		text string
		want *pb.Refraction
	}{
		{"-4.25 / -1.50 x 175", full},
		{"-4.25 -1.50 x 175", full},
		{"-4.25/-1.50x175", full},
		{"-4.25-1.50x175", full},
		{"-4.25, -1.50 x 175", full},
		{"-4.25 / -1.50 × 175°", full},
		{"-4.25 / -1.50 @ 175", full},
		{"-4.25 / -1.50 axis 175", full},
		{"-4.25 / -1.50 ax 175", full},
		{"-4.25 D / -1.50 DC X 175º", full},
		{"  -4.25\t/\u00a0-1.50\nx 175  ", full},
		{"\u22124.25 / \u22121.50 x 175", full},
		{"\u20134.25 / \u20131.50 x 175", full},
		{"- 4.25 / - 1.50 x 175", full},
		{"-4,25 / -1,50 x 175", full},
		{"-4,25,-1,50x175", full},
		{"-4.25", sphere},
		{"-4,25", sphere},
		{"-4.25 DS", sphere},
		{"-4.25DS", sphere},
		{"-4.25 sph", sphere},
		{"-4.25 D sphere", sphere},
		{"-04.250", sphere},
		{"+2.00/-0.50×10", refraction(2, -0.5, 10, absent, absent)},
		{"plano / -0.75 x 90", refraction(0, -0.75, 90, absent, absent)},
		{"PL -0.75x90", refraction(0, -0.75, 90, absent, absent)},
		{"pl", refraction(0, absent, absent, absent, absent)},
		{"plano", refraction(0, absent, absent, absent, absent)},
		{"-0.00", refraction(0, absent, absent, absent, absent)},
		{"-.25", refraction(-0.25, absent, absent, absent, absent)},
		{"4.", refraction(4, absent, absent, absent, absent)},
		{"4.25", refraction(4.25, absent, absent, absent, absent)},
		{"-425", refraction(-425, absent, absent, absent, absent)},
		{"+1.00 / +2.50 x 20", refraction(1, 2.5, 20, absent, absent)},
		{"-4.25 / -1.50", refraction(-4.25, -1.5, absent, absent, absent)},
		{"-4.25 / 0", refraction(-4.25, 0, absent, absent, absent)},
		{"-4.25 / -1.50 x 0", refraction(-4.25, -1.5, 0, absent, absent)},
		{"-4.25 / -1.50 x 172.5", refraction(-4.25, -1.5, 172.5, absent, absent)},
		{"-4.25 / -1.50 x 175 add +2.00", refraction(-4.25, -1.5, 175, absent, 2)},
		{"-4.25 / -1.50 x 175 Add 2", refraction(-4.25, -1.5, 175, absent, 2)},
		{"-4.25 / -1.50 x 175 vertex 12", refraction(-4.25, -1.5, 175, 12, absent)},
		{"-4.25 / -1.50 x 175,vertex 12", refraction(-4.25, -1.5, 175, 12, absent)},
		{"-4.25 / -1.50 x 175; BVD 12 mm", refraction(-4.25, -1.5, 175, 12, absent)},
		{"-4.25, vd 12mm", refraction(-4.25, absent, absent, 12, absent)},
		{"-4,25 vertex 12,5", refraction(-4.25, absent, absent, 12.5, absent)},
		{"-4.25 vertex 0", refraction(-4.25, absent, absent, 0, absent)},
		{"-4.25 DS, vertex 12.5, add +1.75", refraction(-4.25, absent, absent, 12.5, 1.75)},
		{"-4.25 DS / add +1.75 D / vertex 12.5", refraction(-4.25, absent, absent, 12.5, 1.75)},
	} {
		got, err := notation.ParseRefraction(c.text)
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if !proto.Equal(got, c.want) {
			t.Errorf("%q: got %v, want %v", c.text, got, c.want)
		}
	}
}

func TestWhatIsNotARefractionIsAnErrorThatNamesFieldAndPlace(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		text, field string
		character   int
		says        string
	}{
		{"", "refraction.sphere_d", 1, "the text is empty"},
		{"   ", "refraction.sphere_d", 4, "the text is empty"},
		{"abc", "refraction.sphere_d", 1, `"abc" at character 1`},
		{"--4.25", "refraction.sphere_d", 1, "a sphere in D"},
		{"1.2.3", "refraction.sphere_d", 1, "a sphere in D"},
		{".", "refraction.sphere_d", 1, "a sphere in D"},
		{"-", "refraction.sphere_d", 1, "a sphere in D"},
		{"planox", "refraction.sphere_d", 1, "a sphere in D"},
		{strings.Repeat("9", 400), "refraction.sphere_d", 1, "a sphere in D"},
		{"-4.25 / abc", "refraction.cylinder_d", 9, `"abc" at character 9 of "-4.25 / abc"`},
		{"-4.25 /", "refraction.cylinder_d", 8, "ends at character 8"},
		{"\u22124.25 / abc", "refraction.cylinder_d", 9, `"abc" at character 9`},
		{"-4.25 / -1.50 x", "refraction.axis_deg", 16, "an axis in degrees"},
		{"-4.25 / -1.50 x y", "refraction.axis_deg", 17, "an axis in degrees"},
		{"-4.25 / -1.50 175", "refraction.axis_deg", 15, "the axis after an x"},
		{"-4.25 / -1.50 by 175", "refraction.axis_deg", 15, "the axis after an x"},
		{"-4.25 x 175", "refraction", 7, "the end"},
		{"-4.25 DS -1.50 x 175", "refraction", 10, "the end"},
		{"-4.25 / -1.50 x 175 vertex", "refraction.vertex_distance_mm", 27, "a vertex distance in mm"},
		{"-4.25 vertex 12 vertex 13", "refraction", 17, "each once"},
		{"-4.25 add +1.00 add +2.00", "refraction", 17, "each once"},
		{"-4.25 add", "refraction.add_d", 10, "an addition in D"},
		{"-4.25,", "refraction", 7, "the end"},
		{"-4,25 / -1.50 x 175", "refraction.sphere_d", 3, "only one kind of decimal mark"},
		{"-4,1.50x175", "refraction.sphere_d", 3, "only one kind of decimal mark"},
		{"-4,25 vertex 12.5", "refraction.sphere_d", 3, "only one kind of decimal mark"},
		{"-4.25 / -1.50 x 175,5", "refraction", 21, "the end"},
		{"-4.25\xff", "refraction", 6, "the end"},
	} {
		got, err := notation.ParseRefraction(c.text)
		var bad *notation.Error
		if !errors.As(err, &bad) {
			t.Errorf("%q: got %v and error %v, want an *Error", c.text, got, err)
			continue
		}
		if got != nil || bad.Field != c.field || len([]rune(bad.Text[:bad.At]))+1 != c.character || !strings.Contains(bad.Error(), c.says) {
			t.Errorf("%q: got %v, field %s at byte %d, error\n%v\nwant field %s at character %d, and in the text %q",
				c.text, got, bad.Field, bad.At, bad, c.field, c.character, c.says)
		}
	}
}

func TestErrorsQuoteALongTextInPart(t *testing.T) {
	t.Parallel()
	_, err := notation.ParseRefraction("-4.25 / -1.50 x " + strings.Repeat("\u00e9", 1_000_000))
	if err == nil {
		t.Fatal("no error")
	}
	if text := err.Error(); len(text) > 500 || !strings.Contains(text, "...") {
		t.Errorf("an error of %d bytes", len(text))
	}
}

func TestPowersWithoutASignAreReported(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ text, want string }{
		{"4.25", "sphere"},
		{"4.25 / 1.50 x 175", "sphere cylinder"},
		{"-4.25 / 1.50 x 175", "cylinder"},
		{"-4.25 / -1.50 x 175 add 2.00, vertex 12", ""},
		{"+4.25", ""},
		{"0.00 / -1.50 x 175", ""},
		{"plano", ""},
		{"not a power", ""},
	} {
		if got := strings.Join(notation.UnsignedPowers(c.text), " "); got != c.want {
			t.Errorf("%q: got %q, want %q", c.text, got, c.want)
		}
	}
}

func TestASphereCylinderTakesNoVertexDistanceAndNoAddition(t *testing.T) {
	t.Parallel()
	got, err := notation.ParseSphereCylinder("-3.00 / -1.25 x 175")
	want := pb.SphereCylinder_builder{SphereD: proto.Float64(-3), CylinderD: proto.Float64(-1.25), AxisDeg: proto.Float64(175)}.Build()
	if err != nil || !proto.Equal(got, want) {
		t.Errorf("got %v, %v; want %v", got, err, want)
	}
	for text, field := range map[string]string{
		"-3.00 vertex 12":           "power",
		"-3.00 / -1.25 x 175 add 2": "power",
		"-3.00 / -1.25 175":         "power.axis_deg",
		"-3.00 / -1.25 vertex 12":   "power.axis_deg",
		"x":                         "power.sphere_d",
	} {
		var bad *notation.Error
		if _, err := notation.ParseSphereCylinder(text); !errors.As(err, &bad) || bad.Field != field {
			t.Errorf("%q: got %v, want an error of %s", text, err, field)
		}
	}
}

func TestANumberIsReadWithOrWithoutItsUnit(t *testing.T) {
	t.Parallel()
	for text, want := range map[string]float64{
		"12": 12, "12 mm": 12, "12mm": 12, " -0.26": -0.26, "\u22120.26": -0.26, "12,5": 12.5, "+1": 1,
	} {
		if got, err := notation.ParseNumber("vertex", text, "mm"); err != nil || got != want {
			t.Errorf("%q: got %v, %v; want %v", text, got, err, want)
		}
	}
	for _, text := range []string{"", "twelve", "12 cm", "NaN", "Inf", "1e3", "0x10", "12 13"} {
		var bad *notation.Error
		if got, err := notation.ParseNumber("vertex", text, "mm"); !errors.As(err, &bad) || bad.Field != "vertex" {
			t.Errorf("%q: got %v, %v; want an error of vertex", text, got, err)
		}
	}
}

func FuzzParseRefraction(f *testing.F) {
	for _, text := range []string{
		"-4.25 / -1.50 x 175", "-4,25 -1,50 @ 175 add +2,00", "plano / -0.75×90", "pl", "+2.00 DS, BVD 12 mm", "4.25", "-425", "\u22121",
		"-4.25 / -1.50 175", "-4,1.50x175", "--", ".", "9e9", "-0 / -0 x 0",
	} {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		read, err := notation.ParseRefraction(text)
		if err != nil {
			mustPointIntoTheText(t, text, err)
			return
		}
		printed := notation.FormatRefraction(read, notation.Exact)
		again, err := notation.ParseRefraction(printed)
		if err != nil || !proto.Equal(again, read) {
			t.Fatalf("%q was read as %v and printed as %q, which is read as %v, %v", text, read, printed, again, err)
		}
		if twice := notation.FormatRefraction(again, notation.Exact); twice != printed {
			t.Fatalf("%q is printed as %q and then as %q", text, printed, twice)
		}
	})
}

// mustPointIntoTheText holds that an error is an *Error of this text, at a place in it, that says something.
func mustPointIntoTheText(t *testing.T, text string, err error) {
	t.Helper()
	var bad *notation.Error
	if !errors.As(err, &bad) || bad.Text != text || bad.At < 0 || bad.At > len(text) || bad.Field == "" || bad.Expected == "" || bad.Error() == "" {
		t.Fatalf("%q: the error is %#v", text, err)
	}
}
