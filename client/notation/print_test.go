package notation_test

import (
	"math"
	"strings"
	"testing"

	"google.golang.org/protobuf/proto"

	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
)

func TestAPowerIsWrittenAsTheTradeWritesIt(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		sphere, cylinder, axis float64
		decimals               int
		want                   string
	}{
		{-4.25, -1.5, 175, 2, "-4.25 / -1.50 x 175"},
		{4.25, 1.5, 5, 2, "+4.25 / +1.50 x 5"},
		{-4.25, absent, absent, 2, "-4.25"},
		{-4.25, 0, absent, 2, "-4.25"},
		{-4.25, -0.004, 30, 2, "-4.25"},
		{-4.25, -0.004, 30, 3, "-4.250 / -0.004 x 30"},
		{0, absent, absent, 2, "plano"},
		{math.Copysign(0, -1), absent, absent, 2, "plano"},
		{-0.004, absent, absent, 2, "plano"},
		{0.004, -0.75, 90, 2, "plano / -0.75 x 90"},
		{-0.125, absent, absent, 2, "-0.13"},
		{0.125, absent, absent, 2, "+0.13"},
		{0.375, -0.625, 10, 2, "+0.38 / -0.63 x 10"},
		{-4.25, -1.5, absent, 2, "-4.25 / -1.50"},
		{-4.25, -1.5, 153.61, 3, "-4.250 / -1.500 x 153.6"},
		{-4.25, -1.5, 153.99, 2, "-4.25 / -1.50 x 154"},
		{-4.25, -1.5, 0, 2, "-4.25 / -1.50 x 180"},
		{-4.25, -1.5, 0.04, 2, "-4.25 / -1.50 x 180"},
		{-4.25, -1.5, 153.6125, notation.Exact, "-4.25 / -1.50 x 153.6125"},
		{-4.1875, 0, absent, notation.Exact, "-4.1875 / 0.00"},
		{-4, -1.5, 0, notation.Exact, "-4.00 / -1.50 x 0"},
		{absent, -1.5, 10, 2, "no sphere / -1.50 x 10"},
	} {
		p := pb.SphereCylinder_builder{SphereD: present(c.sphere), CylinderD: present(c.cylinder), AxisDeg: present(c.axis)}.Build()
		got := notation.FormatPower(p, c.decimals)
		if got != c.want {
			t.Errorf("%v, %v, %v with %d decimals: got %q, want %q", c.sphere, c.cylinder, c.axis, c.decimals, got, c.want)
		}
	}
}

func TestRoundingSendsTiesAwayFromZeroAndKeepsNoNegativeZero(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		x        float64
		decimals int
		want     float64
	}{
		{0.125, 2, 0.13}, {-0.125, 2, -0.13}, {0.375, 2, 0.38}, {2.5, 0, 3}, {-2.5, 0, -3},
		{-0.004, 2, 0}, {math.Copysign(0, -1), 2, 0}, {math.Copysign(0, -1), notation.Exact, 0},
		{7.8, 2, 7.8}, {1e300, 2, 1e300}, {-1e300, 15, -1e300}, {math.Inf(1), 2, math.Inf(1)},
	} {
		got := notation.Round(c.x, c.decimals)
		if got != c.want || math.Signbit(got) != (c.want < 0) {
			t.Errorf("Round(%v, %d) is %v, want %v", c.x, c.decimals, got, c.want)
		}
	}
	if got := notation.Round(math.NaN(), 2); !math.IsNaN(got) {
		t.Errorf("Round(NaN, 2) is %v", got)
	}
}

func TestZeroHasNoSignAndNoNumberLosesDigits(t *testing.T) {
	t.Parallel()
	for x, want := range map[float64]string{0: "0.00", -0.001: "0.00", 0.001: "0.00", 1: "+1.00", -1: "-1.00"} {
		if got := notation.Signed(x, 2); got != want {
			t.Errorf("Signed(%v, 2) is %q, want %q", x, got, want)
		}
	}
	if got := notation.Signed(1e300, 2); !strings.HasPrefix(got, "+1") || len(got) != len("+.00")+301 {
		t.Errorf("Signed(1e300, 2) is %q", got)
	}
}

func TestReadingsAreWrittenWithUnitsAndMeridians(t *testing.T) {
	t.Parallel()
	extended := powers(51, 180, 52, 90)
	extended.GetSteep().SetAuxiliaryLensD(1.25)
	for _, c := range []struct {
		k        *pb.Keratometry
		decimals int
		want     string
	}{
		{radii(7.8, 180, 7.6, 90), 2, "7.80 mm @ 180 / 7.60 mm @ 90"},
		{radii(7.805, 0, 7.6, absent), notation.Exact, "7.805 mm @ 0 / 7.60 mm"},
		{powers(43.25, 0, 44.5, 87.55), 2, "43.25 D @ 180 / 44.50 D @ 87.6"},
		{extended, 2, "51.00 D @ 180 / 52.00 D (auxiliary lens +1.25 D) @ 90"},
		{&pb.Keratometry{}, 2, "no reading / no reading"},
	} {
		if got := notation.FormatKeratometry(c.k, c.decimals); got != c.want {
			t.Errorf("%v: got %q, want %q", c.k, got, c.want)
		}
	}
}

// Every power in quarters, with every axis in fives, comes back as it was, with two decimals and exact.
func TestWhatIsPrintedIsReadBackOverTheGridOfTheTrade(t *testing.T) {
	t.Parallel()
	axis := 0
	for s := -40 * 4; s <= 30*4; s++ {
		for c := -12 * 4; c <= 12*4; c++ {
			axis = axis%180 + 5
			want := pb.SphereCylinder_builder{SphereD: present(float64(s) / 4)}.Build()
			if c != 0 {
				want.SetCylinderD(float64(c) / 4)
				want.SetAxisDeg(float64(axis))
			}
			for _, decimals := range []int{2, 3, notation.Exact} {
				text := notation.FormatPower(want, decimals)
				got, err := notation.ParseSphereCylinder(text)
				if err != nil || !proto.Equal(got, want) {
					t.Fatalf("%v is printed as %q and read as %v, %v", want, text, got, err)
				}
			}
		}
	}
}

func TestRefractionsWithVertexDistanceAndAdditionAreReadBack(t *testing.T) {
	t.Parallel()
	for half := range 41 {
		for quarter := range 21 {
			want := refraction(-4.25, -1.5, 175, float64(half)/2, float64(quarter)/4)
			text := notation.FormatRefraction(want, 2)
			got, err := notation.ParseRefraction(text)
			if err != nil || !proto.Equal(got, want) {
				t.Fatalf("%v is printed as %q and read as %v, %v", want, text, got, err)
			}
		}
	}
}

// Radii of every hundredth of a millimetre and powers of every eighth of a dioptre, at every meridian in ones.
func TestReadingsArePrintedAndReadBack(t *testing.T) {
	t.Parallel()
	meridian := 0
	check := func(want *pb.Keratometry, decimals int) {
		t.Helper()
		text := notation.FormatKeratometry(want, decimals)
		got, err := notation.ParseKeratometry(text)
		if err != nil || !proto.Equal(got, want) {
			t.Fatalf("%v is printed as %q and read as %v, %v", want, text, got, err)
		}
	}
	for i := 450; i < 1100; i++ {
		meridian = meridian%180 + 1
		check(radii(float64(i+20)/100, float64(meridian), float64(i)/100, float64((meridian+89)%180+1)), 2)
	}
	for i := 28 * 8; i < 75*8; i++ {
		meridian = meridian%180 + 1
		check(powers(float64(i)/8, absent, float64(i+3)/8, float64(meridian)), 3)
	}
}
