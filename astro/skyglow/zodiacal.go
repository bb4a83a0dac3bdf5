package skyglow

import (
	"errors"
	"math"

	"evenfall/astro"
)

// ErrNearSun says that the zodiacal light has not been measured so near to the
// Sun, and that nothing is to be observed there.
var ErrNearSun = errors.New("too near the Sun; the sky there is not modelled")

// zodiacalLon and zodiacalLat are the nodes of the table, degrees of ecliptic
// longitude from the Sun and of ecliptic latitude.
var (
	zodiacalLon = []float64{0, 5, 10, 15, 20, 25, 30, 35, 40, 45, 60, 75, 90, 105, 120, 135, 150, 165, 180}
	zodiacalLat = []float64{0, 5, 10, 15, 20, 25, 30, 45, 60, 75, 90}
)

// zodiacalS10 is the zodiacal light at 0.5 micrometres outside the atmosphere,
// in stars of V = 10 like the Sun per square degree; 0 where it is blank.
//
// Source: [cite.LeinertEtAl1998], table 16. Seen as two others print it.
var zodiacalS10 = [19][11]float64{
	{0, 0, 0, 2450, 1260, 770, 500, 215, 117, 78, 60},
	{0, 0, 0, 2300, 1200, 740, 490, 212, 117, 78, 60},
	{0, 0, 3700, 1930, 1070, 675, 460, 206, 116, 78, 60},
	{9000, 5300, 2690, 1450, 870, 590, 410, 196, 114, 78, 60},
	{5000, 3500, 1880, 1100, 710, 495, 355, 185, 110, 77, 60},
	{3000, 2210, 1350, 860, 585, 425, 320, 174, 106, 76, 60},
	{1940, 1460, 955, 660, 480, 365, 285, 162, 102, 74, 60},
	{1290, 990, 710, 530, 400, 310, 250, 151, 98, 73, 60},
	{925, 735, 545, 415, 325, 264, 220, 140, 94, 72, 60},
	{710, 570, 435, 345, 278, 228, 195, 130, 91, 70, 60},
	{395, 345, 275, 228, 190, 163, 143, 105, 81, 67, 60},
	{264, 248, 210, 177, 153, 134, 118, 91, 73, 64, 60},
	{202, 196, 176, 151, 130, 115, 103, 81, 67, 62, 60},
	{166, 164, 154, 133, 117, 104, 93, 75, 64, 60, 60},
	{147, 145, 138, 120, 108, 98, 88, 70, 60, 58, 60},
	{140, 139, 130, 115, 105, 95, 86, 70, 60, 57, 60},
	{140, 139, 129, 116, 107, 99, 91, 75, 62, 56, 60},
	{153, 150, 140, 129, 118, 110, 102, 81, 64, 56, 60},
	{180, 166, 152, 139, 127, 116, 105, 82, 65, 56, 60},
}

// zodiacalLog is the natural logarithm of the table, in which it is read.
var zodiacalLog = func() (out [19][11]float64) {
	for i, row := range zodiacalS10 {
		for j, v := range row {
			out[i][j] = math.Log(v) // -Inf for a blank
		}
	}
	return out
}()

// Zodiacal returns the zodiacal light, bilinear in its logarithm.
//
// Given:
//   - lonFromSun: ecliptic longitude from the Sun, any; it is folded.
//   - lat: ecliptic latitude; its sign does not matter.
//
// Returns:
//   - stars of V = 10 per square degree, outside the atmosphere, 56 and more.
//   - [ErrNearSun] where the table is blank.
//
// Source: [cite.LeinertEtAl1998], table 16.
//
// Checked: TestZodiacal, at nodes exactly.
func Zodiacal(lonFromSun, lat astro.Angle) (float64, error) {
	x, y := math.Abs(lonFromSun.Signed().Deg()), math.Abs(lat.Deg())
	if math.IsNaN(x) || !(y <= 90+1e-9) {
		return math.NaN(), errDirection
	}
	i, u := cell(zodiacalLon, x)
	j, v := cell(zodiacalLat, y)
	sum := 0.0
	for _, c := range [4]struct {
		weight float64
		i, j   int
	}{{(1 - u) * (1 - v), i, j}, {u * (1 - v), i + 1, j}, {(1 - u) * v, i, j + 1}, {u * v, i + 1, j + 1}} {
		switch {
		case c.weight < 1e-9: // on a node or a line of the table
		case zodiacalS10[c.i][c.j] == 0:
			return math.NaN(), ErrNearSun
		default:
			sum += c.weight * zodiacalLog[c.i][c.j]
		}
	}
	return math.Exp(sum), nil
}

// cell returns the interval of a grid that holds a value, and where in it.
func cell(grid []float64, x float64) (int, float64) {
	i := 0
	for i < len(grid)-2 && x >= grid[i+1] {
		i++
	}
	return i, math.Min(1, (x-grid[i])/(grid[i+1]-grid[i]))
}

// Starlight returns the light of stars too faint to be seen one by one.
//
//	L = 12 + 100 exp(-|b|/10)                           b in degrees
//
// Given:
//   - galacticLat: b.
//
// Returns:
//   - stars of V = 10 per square degree, 12 to 112; clouds of the Milky Way
//     differ by half of it.
//
// Source: [cite.BennEllison1998] for the second term; the 12, for scattered
// starlight, is common practice without a source.
//
// Checked: TestDarkSky.
func Starlight(galacticLat astro.Angle) float64 {
	return 12 + 100*math.Exp(-math.Abs(galacticLat.Deg())/10)
}

// poles of the ecliptic (J2000, obliquity 84381.406 arcsec) and the Galaxy
// along the ICRS axes; precession moves neither by what matters here.
//
// Source: [cite.CapitaineWallaceChapront2003] for the obliquity; [cite.ESA1997],
// volume 1, eq. 1.5.11, for the pole of the Galaxy.
var (
	obliquity    = astro.Arcsec(84381.406)
	toEcliptic   = astro.Rotation(0, obliquity)
	galacticPole = astro.Direction(astro.Deg(192.85948), astro.Deg(27.12825))
)

// galacticLat returns the galactic latitude of a direction.
func galacticLat(dir astro.Vec) astro.Angle {
	return astro.Rad(math.Asin(math.Max(-1, math.Min(1, dir.Dot(galacticPole)))))
}
