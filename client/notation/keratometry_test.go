package notation_test

import (
	"errors"
	"strings"
	"testing"

	"google.golang.org/protobuf/proto"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

func radii(flat, flatAlong, steep, steepAlong float64) *pb.Keratometry {
	return pb.Keratometry_builder{
		Flat:  pb.MeridianReading_builder{RadiusMm: &flat, MeridianDeg: present(flatAlong)}.Build(),
		Steep: pb.MeridianReading_builder{RadiusMm: &steep, MeridianDeg: present(steepAlong)}.Build(),
	}.Build()
}

func powers(flat, flatAlong, steep, steepAlong float64) *pb.Keratometry {
	return pb.Keratometry_builder{
		Flat:  pb.MeridianReading_builder{PowerD: &flat, MeridianDeg: present(flatAlong)}.Build(),
		Steep: pb.MeridianReading_builder{PowerD: &steep, MeridianDeg: present(steepAlong)}.Build(),
	}.Build()
}

func TestKeratometryIsReadAsItIsWrittenByHand(t *testing.T) {
	t.Parallel()
	mm, d := radii(7.8, 180, 7.6, 90), powers(43.25, 180, 44.5, 90)
	for _, c := range []struct {
		text string
		want *pb.Keratometry
	}{
		{"7.80 @ 180 / 7.60 @ 90", mm},
		{"7.80@180/7.60@90", mm},
		{"7.80 @ 180 7.60 @ 90", mm},
		{"7.80 x 180 / 7.60 x 90", mm},
		{"7.80 × 180° / 7.60 × 90°", mm},
		{"7.80 mm @ 180 / 7.60 mm @ 90", mm},
		{"7.80mm along 180; 7.60MM at 90", mm},
		{"7,80 @ 180 / 7,60 @ 90", mm},
		{"7,80@180,7,60@90", mm},
		{"7.60 @ 90 / 7.80 @ 180", mm},
		{"43.25 @ 180 / 44.50 @ 90", d},
		{"43.25@180, 44.50@90", d},
		{"43.25@180,44.50@90", d},
		{"43.25 D @ 180 / 44.50 D @ 90", d},
		{"44.50 @ 90 / 43.25 @ 180", d},
		{"43@180,44@90", powers(43, 180, 44, 90)},
		{"7.80 @ 180 / 7.60", radii(7.8, 180, 7.6, absent)},
		{"7.80 / 7.60 @ 90", radii(7.8, absent, 7.6, 90)},
		{"7.80/7.60@90", radii(7.8, absent, 7.6, 90)},
		{"7.80 / 7.60", radii(7.8, absent, 7.6, absent)},
		{"7.80,7.60@90", radii(7.8, absent, 7.6, 90)},
		{"7,80,7,60@90", radii(7.8, absent, 7.6, 90)},
		{"7.80", radii(7.8, absent, 7.8, absent)},
		{"7,80", radii(7.8, absent, 7.8, absent)},
		{"7.80 sph", radii(7.8, absent, 7.8, absent)},
		{"7.80 mm DS", radii(7.8, absent, 7.8, absent)},
		{"43.25 D sphere", powers(43.25, absent, 43.25, absent)},
		{"43 mm / 44 mm", radii(44, absent, 43, absent)},
		{"7.8 D / 7.9 D", powers(7.8, absent, 7.9, absent)},
		{"20 D / 21 D @ 90", powers(20, absent, 21, 90)},
		{"14.99", radii(14.99, absent, 14.99, absent)},
		{"25", powers(25, absent, 25, absent)},
	} {
		got, err := notation.ParseKeratometry(c.text)
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if !proto.Equal(got, c.want) {
			t.Errorf("%q: got %v, want %v", c.text, got, c.want)
		}
	}
}

func TestWhatIsNotKeratometryIsAnErrorThatSaysWhy(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		text      string
		character int
		says      string
	}{
		{"", 1, "the text is empty"},
		{"x", 1, "the first reading"},
		{"7.80 @ 180 /", 13, "the second reading"},
		{"7.80 @ 180 / x", 14, "the second reading"},
		{"7.80 @", 7, "the meridian of the first reading in degrees"},
		{"7.80 @ 180 / 7.60 @ n", 21, "the meridian of the second reading in degrees"},
		{"15 / 14", 1, "what lies between is neither"},
		{"24.99", 1, "what lies between is neither"},
		{"7.80 / 20", 8, "what lies between is neither"},
		{"7.80 @ 180 / 44.50 @ 90", 14, "in the unit of the first"},
		{"43.25 D / 7.60 mm", 11, "in the unit of the first"},
		{"7.80 @ 180", 11, "a second reading"},
		{"43,44@90", 9, "a second reading"},
		{"7.80 @ 180 / 7.60 @ 90 / 7.50 @ 45", 24, "the end"},
		{"7.80 @ 180 and 7.60 @ 90", 12, "the second reading"},
		{"43,25@180, 44.50@90", 3, "only one kind of decimal mark"},
		{"7.80 sph / 7.60", 10, "the end"},
	} {
		got, err := notation.ParseKeratometry(c.text)
		var bad *notation.Error
		if !errors.As(err, &bad) {
			t.Errorf("%q: got %v and error %v, want an *Error", c.text, got, err)
			continue
		}
		if got != nil || bad.Field != "keratometry" || len([]rune(bad.Text[:bad.At]))+1 != c.character || !strings.Contains(bad.Error(), c.says) {
			t.Errorf("%q: got %v, field %s at byte %d, error\n%v\nwant character %d, and in the text %q",
				c.text, got, bad.Field, bad.At, bad, c.character, c.says)
		}
	}
}

func FuzzParseKeratometry(f *testing.F) {
	for _, text := range []string{
		"7.80 @ 180 / 7.60 @ 90", "43.25@180,44.50@90", "43,25@180; 44,5@90", "7.80/7.60@90", "7.80 mm x 180", "43.25 sph", "20", "20 D", "43@180,44@90",
		"7,8,7,6", "-7.8 / -7.9",
	} {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		read, err := notation.ParseKeratometry(text)
		if err != nil {
			mustPointIntoTheText(t, text, err)
			return
		}
		if flat, steep := read.GetFlat(), read.GetSteep(); flat.GetRadiusMm() < steep.GetRadiusMm() || flat.GetPowerD() > steep.GetPowerD() {
			t.Fatalf("%q was read as %v: flat and steep are exchanged", text, read)
		}
		printed := notation.FormatKeratometry(read, notation.Exact)
		again, err := notation.ParseKeratometry(printed)
		if err != nil || !proto.Equal(again, read) {
			t.Fatalf("%q was read as %v and printed as %q, which is read as %v, %v", text, read, printed, again, err)
		}
		if twice := notation.FormatKeratometry(again, notation.Exact); twice != printed {
			t.Fatalf("%q is printed as %q and then as %q", text, printed, twice)
		}
	})
}
