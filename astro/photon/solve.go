package photon

import (
	"errors"
	"math"
)

// Per says what a wanted signal to noise is meant of.
type Per int

// What a signal to noise may be meant of.
const (
	PerTotal   Per = iota // all frames together; of a spectrum, its element
	PerFrame              // one frame, of a series
	PerPixel              // one pixel along the dispersion, all frames
	PerElement            // one resolution element, all frames
)

// Ask is what is wanted of an exposure. One of SNR and TotalS is given, or
// both: then the time is fixed and the S/N that it gives is the answer.
type Ask struct {
	SNR    float64
	Per    Per
	TotalS float64 // of open shutter, all frames; 0: to be found
	Frames int     // 0: as many as saturation and sky ask; of a series, how many are taken
}

// Answer is an exposure and what it gives.
type Answer struct {
	Exposure
	SNR    float64 // of what was asked: frame, pixel, element, total
	Budget Budget  // of the same
	Limit  Limit
	// LongestS is the frame in which the brightest pixel reaches 0.8 of its
	// limit; +Inf where no limit is given.
	LongestS float64
	// Saturated is set where the frames are longer than that: a fixed time, or
	// a fixed number of frames, or the shutter's shortest, wants them so.
	Saturated bool
	// Reached tells whether SNR is what was wanted.
	Reached bool
}

// Where it is no observation any more: frames, and seconds in all.
const (
	mostFrames = 10_000_000
	longestS   = 1e9
)

// Why there is no exposure.
var (
	ErrSaturates = errors.New("saturates in the shortest exposure")
	ErrFloor     = errors.New("the calibration's floor keeps the signal to noise below that, however long")
	ErrFrames    = errors.New("would take years, or more frames than can be counted")
	ErrFrameLong = errors.New("one frame cannot be so long")
	ErrAsk       = errors.New("neither a signal to noise nor a time is wanted")
)

// Frames: how much of its limit a pixel is filled; how much of the noise the
// read noise may add (5 per cent: 1/(1.05²-1) = 9.76); from what total time, s,
// there are at least 3 frames against cosmic rays. Common practice, no source.
const (
	fillShare   = 0.8
	skyOverRead = 9.76
	cosmicFromS = 300
	cosmicAtMin = 3
)

// LongestS returns the frame in which the brightest pixel reaches 0.8 of its
// limit.
//
//	t = 0.8 L / (n f + s + d)                            s
//
// Returns:
//   - seconds; +Inf where no limit is given.
//
// Checked: TestExamples.
func LongestS(r Rates, d Detector) float64 {
	return fillShare * d.LimitE() / (r.PeakES + r.SkyES + d.DarkES)
}

// SkyLimitedS returns the frame in which read noise adds 5 per cent to the
// noise of the sky.
//
//	t = 9.76 N_R²/s                                      s
//
// Checked: TestExamples.
func SkyLimitedS(r Rates, d Detector) float64 {
	if !(r.SkyES > 0) {
		return math.Inf(1)
	}
	return skyOverRead * d.ReadNoiseE * d.ReadNoiseE / r.SkyES
}

// FramesFor returns into how many frames a total time is divided.
//
//	frame = min(t_sat, max(t_sky, t/3), t_max);  K = ceil(t/frame), at least 3 where t > 300 s
//
// Given:
//   - totalS: t, above 0.
//
// Returns:
//   - K, 1 and up, not falling with t.
//
// Checked: TestFrames.
func FramesFor(r Rates, d Detector, totalS float64) int {
	return max(hardFrames(r, d, totalS), softFrames(r, d, totalS))
}

// hardFrames is how many saturation and the longest frame ask.
func hardFrames(r Rates, d Detector, totalS float64) int {
	longest := math.Min(LongestS(r, d), d.maxFrame())
	return int(math.Max(1, math.Min(mostFrames, math.Ceil(totalS/longest*(1-1e-12)))))
}

// softFrames is how many are asked by custom, 1 to 3.
func softFrames(r Rates, d Detector, totalS float64) int {
	if totalS > cosmicFromS {
		return cosmicAtMin
	}
	frame := math.Max(SkyLimitedS(r, d), totalS/3)
	return int(math.Max(1, math.Min(3, math.Ceil(totalS/frame*(1-1e-12)))))
}

// Solve finds an exposure.
//
//	t = [B + √(B² + 4 A C)] / (2 A),  Q the wanted S/N
//	A = n² (1 - Q² ε²),  B = Q² [(n + q (s + d))/W + n² σ1²],  C = Q² q K [N_R² + (0.289 G)²]/W
//
// Given:
//   - r, d: of the set-up; for PerPixel the element is left out.
//   - ask: what is wanted.
//
// Returns:
//   - the exposure of the smallest total time that reaches Q: at a fixed number
//     of frames exactly (each rounded up to the shutter's step and shortest
//     exposure); otherwise over all numbers of frames that [FramesFor] allows.
//   - [ErrSaturates], [ErrFloor], [ErrFrames], [ErrFrameLong], [ErrAsk], or an
//     error for a number out of range; the answer then holds LongestS, and the
//     limit where it saturates.
//
// Notes:
//  1. K depends on t and t on K. Both rise together, so going up from K = 1
//     until K serves its own t ends at the least of both.
//  2. With a shutter's step up to 256 frames more are tried, as rounding may
//     favour them.
//  3. Of a series (PerFrame) K = 1 in the formula, and the number of frames is
//     that asked for, or 1.
//
// Source: [cite.MerlineHowell1995], solved for time.
//
// Checked: TestSolve, 10,000 random set-ups to 0.1 per cent; TestSmallest,
// against every number of frames; TestMonotone; TestExamples.
func Solve(r Rates, d Detector, ask Ask) (Answer, error) {
	none := Answer{LongestS: math.NaN()}
	if err := first(r.valid(), d.valid(), within("the wanted S/N", ask.SNR, 0, 1e9), within("the time in s", ask.TotalS, 0, 10*longestS),
		within("frames", float64(ask.Frames), 0, mostFrames)); err != nil {
		return none, err
	}
	if !(r.SourceES > 0) {
		return none, ErrNoSource
	}
	if ask.Per == PerPixel {
		r.Element = 1
	}
	none.LongestS = LongestS(r, d)
	var e Exposure
	var err error
	switch {
	case ask.TotalS > 0:
		e, err = fixedTime(r, d, ask)
	case !(ask.SNR > 0):
		err = ErrAsk
	case ask.Per == PerFrame:
		e, err = oneFrame(r, d, ask)
	case ask.Frames > 0:
		e, err = fixedFrames(r, d, ask.SNR, ask.Frames)
	default:
		e, err = freeFrames(r, d, ask.SNR)
	}
	if errors.Is(err, ErrSaturates) {
		none.Limit = LimitSaturation
	}
	if err != nil {
		return none, err
	}
	return answer(r, d, ask, e), nil
}

// answer works out what an exposure gives.
func answer(r Rates, d Detector, ask Ask, e Exposure) Answer {
	counted := e
	if ask.Per == PerFrame {
		counted.Frames = 1
	}
	a := Answer{Exposure: e, Budget: noise(r, d, counted), LongestS: LongestS(r, d)}
	a.SNR = a.Budget.SNR()
	a.Limit = a.Budget.Limit()
	if a.Saturated = e.EachS > a.LongestS*(1+1e-9); a.Saturated {
		a.Limit = LimitSaturation
	}
	a.Reached = ask.SNR > 0 && a.SNR >= ask.SNR*(1-1e-9)
	return a
}

// timeFor returns the total time in which k frames reach Q, without any
// rounding.
func timeFor(r Rates, d Detector, snr float64, k int) (float64, error) {
	q2, n, w := snr*snr, r.SourceES, r.element()
	load := (n + r.crowd()*(r.SkyES+d.DarkES)) / w
	read := r.crowd() * float64(k) * d.read2() / w
	scint := n * n * r.Scint1 * r.Scint1
	a := n * n * (1 - q2*r.Floor*r.Floor)
	if !(a > 0) {
		return 0, ErrFloor
	}
	t := root(a, q2*(load+scint), q2*read)
	if t < r.ScintCapS {
		// Scintillation does not grow below the cap: there it is a floor.
		if capped := a - q2*scint/r.ScintCapS; capped > 0 {
			t = math.Min(r.ScintCapS, root(capped, q2*load, q2*read))
		}
	}
	if !(t > 0 && t <= longestS) {
		return 0, ErrFrames
	}
	return t, nil
}

// root is the positive root of a t² - b t - c = 0.
func root(a, b, c float64) float64 {
	if c == 0 {
		return b / a
	}
	return (b + math.Sqrt(b*b+4*a*c)) / (2 * a)
}

// roundUp makes a frame one that the shutter can do.
func (d Detector) roundUp(eachS float64) float64 {
	eachS = math.Max(eachS, d.ShutterMinS)
	if d.ShutterStepS > 0 {
		eachS = math.Ceil(eachS/d.ShutterStepS*(1-1e-12)) * d.ShutterStepS
	}
	return eachS
}

// longestDone is the longest frame that neither saturates nor is too long, and
// that the shutter can do; 0 where there is none.
func longestDone(r Rates, d Detector) float64 {
	t := math.Min(LongestS(r, d), d.maxFrame())
	if d.ShutterStepS > 0 {
		t = math.Floor(t/d.ShutterStepS*(1+1e-12)) * d.ShutterStepS
	}
	if t < d.ShutterMinS {
		return 0
	}
	return t
}

func fixedTime(r Rates, d Detector, ask Ask) (Exposure, error) {
	k := ask.Frames
	if k == 0 {
		k = 1
		if ask.Per != PerFrame {
			k = FramesFor(r, d, ask.TotalS)
		}
	}
	return Exposure{k, d.roundUp(ask.TotalS / float64(k))}, nil
}

func fixedFrames(r Rates, d Detector, snr float64, k int) (Exposure, error) {
	t, err := timeFor(r, d, snr, k)
	if err != nil {
		return Exposure{}, err
	}
	return Exposure{k, d.roundUp(t / float64(k))}, nil
}

func oneFrame(r Rates, d Detector, ask Ask) (Exposure, error) {
	t, err := timeFor(r, d, ask.SNR, 1)
	if err != nil {
		return Exposure{}, err
	}
	e := Exposure{max(1, ask.Frames), d.roundUp(t)}
	if e.EachS > d.maxFrame() {
		return Exposure{}, ErrFrameLong
	}
	return e, nil
}

// freeFrames goes up in K until it serves its own time.
func freeFrames(r Rates, d Detector, snr float64) (Exposure, error) {
	longest := longestDone(r, d)
	if !(longest > 0) {
		return Exposure{}, ErrSaturates
	}
	k, err := leastFrames(r, d, snr, longest)
	if err != nil {
		return Exposure{}, err
	}
	for range 8 { // at most 3 more by custom, 2 by rounding of the above
		t, err := timeFor(r, d, snr, k)
		if err != nil {
			return Exposure{}, err
		}
		each := d.roundUp(t / float64(k))
		need := softFrames(r, d, each*float64(k))
		if each > longest*(1+1e-9) {
			need = k + 1
		}
		if need <= k {
			return thriftier(r, d, snr, Exposure{k, each}), nil
		}
		k = need
	}
	return Exposure{}, ErrFrames
}

// stepTries limits the search of thriftier.
const stepTries = 256

// thriftier looks for more frames that, rounded up to the shutter's step, take
// less time in all; without a step there are none, as each frame more costs
// read noise.
func thriftier(r Rates, d Detector, snr float64, best Exposure) Exposure {
	if d.ShutterStepS == 0 {
		return best
	}
	first := best.Frames + 1
	for k := first; k < first+stepTries; k++ {
		t, err := timeFor(r, d, snr, k)
		if err != nil || t >= best.TotalS() {
			break
		}
		e := Exposure{k, d.roundUp(t / float64(k))}
		if e.TotalS() < best.TotalS()*(1-1e-9) && softFrames(r, d, e.TotalS()) <= k {
			best = e
		}
	}
	return best
}

// leastFrames is how many frames, none longer than can be, reach Q.
//
//	K = v / (1/Q² - ε²), v = 1/(S/N)² of one longest frame without ε
func leastFrames(r Rates, d Detector, snr, longest float64) (int, error) {
	b := noise(r, d, Exposure{1, longest})
	v := b.Photons + b.Sky + b.Dark + b.ReadNoise
	left := 1/(snr*snr) - r.Floor*r.Floor
	if !(left > 0) {
		return 0, ErrFloor
	}
	k := (v + r.Scint1*r.Scint1/longest) / left
	if r.ScintCapS > 0 {
		// As long as all frames together are shorter than the cap.
		if l := left - r.Scint1*r.Scint1/r.ScintCapS; l > 0 {
			if few := math.Ceil(v / l * (1 - 1e-12)); few*longest <= r.ScintCapS {
				k = math.Min(k, few)
			}
		}
	}
	k = math.Max(1, math.Ceil(k*(1-1e-12)))
	if !(k <= mostFrames) {
		return 0, ErrFrames
	}
	return int(k), nil
}
