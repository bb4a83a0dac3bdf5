package exposure

import "math"

// Together works out an exposure in which other modes are taken at the same
// time, with the same frames: beams of one instrument.
//
// Given:
//   - s: the mode that the goal is meant for; others: the same with the others'
//     modes and the brightness in their bands.
//
// Returns:
//   - the answers in that order; the frames are short enough for all that can be
//     worked out.
//
// Checked: TestTogether.
func Together(s Setting, others ...Setting) []Answer {
	longest := s.MaxFrameS
	if !(longest > 0) {
		longest = math.Inf(1)
	}
	for _, o := range others {
		w := &work{s: o}
		if w.prepare() == nil {
			longest = math.Min(longest, math.Max(w.longest(), w.det.ShutterMinS))
		}
	}
	if longest > 0 && !math.IsInf(longest, 1) {
		const most = 1200
		s.MaxFrameS = math.Min(longest, most)
	}
	first := Solve(s)
	out := []Answer{first}
	for _, o := range others {
		if first.Err == nil {
			series := o.Goal.DurationS > 0 || o.Goal.Per == "frame"
			o.Goal.SNR, o.Goal.DurationS, o.Goal.Frames = 0, 0, first.Frames
			if o.Goal.ExposureS = first.BookedS; series {
				o.Goal.Per, o.Goal.ExposureS = "frame", first.EachS
			}
		}
		out = append(out, Solve(o))
	}
	return out
}
