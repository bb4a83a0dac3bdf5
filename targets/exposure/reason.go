package exposure

import (
	"errors"
	"fmt"

	"evenfall/astro/photon"
	"evenfall/targets"
	"evenfall/targets/instrument"
)

// Reason is why there is no exposure, and what can be done.
type Reason struct {
	Code targets.Code // instrument, saturates, too_faint, sky, seeing, below_horizon, window; "": nothing forbids it, it is not known
	Key  string       // of run.toml or of a request, where one is at fault
	What string
	Fix  string
	Lack *instrument.Lack // what the instrument lacks
	of   error
}

// Error says it in one sentence.
func (r *Reason) Error() string {
	if r.Fix == "" {
		return r.What
	}
	return r.What + ": " + r.Fix
}

// Unwrap returns the error of the formulas, or nil.
func (r *Reason) Unwrap() error { return r.of }

// notKnown is the code where nothing forbids an exposure: the brightness is not
// known.
const notKnown targets.Code = ""

// fail makes a reason.
func fail(code targets.Code, key, fix, what string, a ...any) *Reason {
	return &Reason{Code: code, Key: key, Fix: fix, What: fmt.Sprintf(what, a...)}
}

// reason turns an error of the formulas into one of this package.
func (w *work) reason(err error, a *Answer) *Reason {
	r := &Reason{Code: targets.CodeTooFaint, What: err.Error(), of: err}
	switch {
	case errors.Is(err, photon.ErrSaturates):
		r.Code = targets.CodeSaturates
		a.LimitedBy = photon.LimitSaturation
		if m, ok := photon.Saturates(w.ratesAt(w.booked), w.det, w.det.ShutterMinS); ok {
			a.SaturatesAt = targets.Known(w.booked.Mags() + m)
			r.What = fmt.Sprintf("saturates at %s < %.1f even in the shortest exposure of %s", w.bandName(), a.SaturatesAt.Value, seconds(w.det.ShutterMinS))
		}
	case errors.Is(err, photon.ErrFloor):
		r.What = fmt.Sprintf("S/N %g is out of reach: flat field and calibration keep it below %.0f, however long", w.s.Goal.SNR, 1/w.rates.Floor)
		r.Key, r.Fix = "snr", "ask for less"
	case errors.Is(err, photon.ErrFrameLong):
		r.What = fmt.Sprintf("S/N %g in one frame would take longer than a frame can be", w.s.Goal.SNR)
		r.Key, r.Fix = "snr_per", "ask for it in total"
	case errors.Is(err, photon.ErrAsk):
		r.Code, r.Key = targets.CodeInstrument, "snr"
		r.What, r.Fix = "neither S/N nor time is wanted", "write snr or exposure_s in the request"
	case errors.Is(err, photon.ErrRange):
		r.Code = targets.CodeInstrument
	}
	return r
}

// seconds writes a time for a sentence.
func seconds(s float64) string {
	switch {
	case s >= 5400:
		return fmt.Sprintf("%.1f h", s/3600)
	case s >= 100:
		return fmt.Sprintf("%.0f s", s)
	case s >= 10:
		return fmt.Sprintf("%.1f s", s)
	}
	return fmt.Sprintf("%.2g s", s)
}
