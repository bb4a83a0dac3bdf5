package main

import (
	"encoding/csv"
	"fmt"
	"io"
	"sort"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"evenfall/targets/moment"
)

func listCommand(w world, o *options) *cobra.Command {
	c := &cobra.Command{
		Use:   "list",
		Short: "the targets at one moment, in the order of what to take next",
		Long: "The targets at one moment, in the order of what to take next: first those inside the\n" +
			"wished-for limits by how soon their window closes, then those merely possible, then\n" +
			"blocked ones with the reason and when it ends.\n\n" + caution,
		Example: "  evenfall list --lat -29.26 --lon -70.73 --elev 2400 --at 2026-12-02T04:00:00Z\n" +
			"  evenfall list --targets my.csv --format json",
		Args: noArgs,
		RunE: func(*cobra.Command, []string) error { return runList(w, o) },
	}
	c.Flags().StringVar(&o.sort, "sort", "", "order by `KEY`: "+strings.Join(sortNames(), ", ")+"; -KEY reverses")
	c.RegisterFlagCompletionFunc("sort", cobra.FixedCompletions(sortNames(), cobra.ShellCompDirectiveNoFileComp))
	return c
}

func runList(w world, o *options) error {
	if err := o.oneOf("text", "json", "csv"); err != nil {
		return err
	}
	key, err := sortKey(o.sort)
	if err != nil {
		return err
	}
	s, err := openSession(w, o)
	if err != nil {
		return err
	}
	s.compute(o)
	if key != nil {
		sort.SliceStable(s.order, func(a, b int) bool { return key(s, s.order[a], s.order[b]) })
	}
	switch o.format {
	case "json":
		err = printJSON(w.out, s.listShape())
	case "csv":
		err = s.listCSV(w.out)
	default:
		err = s.listText(w.out, w.width)
	}
	if err != nil {
		return err
	}
	return s.status()
}

// less compares two targets, by their places in the list.
type less func(s *session, a, b int) bool

// sortKeys holds what a list can be ordered by; names bring the most wanted
// end first.
var sortKeys = map[string]less{
	"rank":    nil,
	"name":    func(s *session, a, b int) bool { return naturalName(s, a) < naturalName(s, b) },
	"kind":    func(s *session, a, b int) bool { return s.targets[a].Kind < s.targets[b].Kind },
	"stage":   func(s *session, a, b int) bool { return s.moments[a].Stage.Best < s.moments[b].Stage.Best },
	"alt":     func(s *session, a, b int) bool { return s.moments[b].Place.Alt.Less(s.moments[a].Place.Alt) },
	"airmass": func(s *session, a, b int) bool { return s.moments[b].Place.Alt.Less(s.moments[a].Place.Alt) },
	"ra":      func(s *session, a, b int) bool { return s.moments[a].RA.Less(s.moments[b].RA) },
	"dec":     func(s *session, a, b int) bool { return s.moments[a].Dec.Less(s.moments[b].Dec) },
	"moon":    func(s *session, a, b int) bool { return s.moments[b].MoonSep.Less(s.moments[a].MoonSep) },
	"mag": func(s *session, a, b int) bool {
		x, y := &s.moments[a].Expect, &s.moments[b].Expect
		if x.Known != y.Known {
			return x.Known
		}
		return x.Known && x.Mag.Brighter(y.Mag)
	},
	"best": func(s *session, a, b int) bool {
		x, y := s.moments[a].Course.Best, s.moments[b].Course.Best
		if x == nil || y == nil {
			return x != nil
		}
		return x.Before(*y)
	},
	"left": func(s *session, a, b int) bool {
		x, y := &s.moments[a], &s.moments[b]
		if (x.Left > 0) != (y.Left > 0) {
			return x.Left > 0
		}
		return x.Left < y.Left
	},
}

func naturalName(s *session, i int) string { return strings.ToLower(s.targets[i].Name) }

func sortNames() []string {
	var names []string
	for n := range sortKeys {
		names = append(names, n)
	}
	sort.Strings(names)
	return names
}

// sortKey returns the order that --sort names; nil: the rank.
func sortKey(name string) (less, error) {
	if name == "" || name == "rank" {
		return nil, nil
	}
	plain, reversed := strings.CutPrefix(name, "-")
	key, ok := sortKeys[plain]
	if !ok {
		return nil, usagef("--sort %s: use one of %s", quote(name), strings.Join(sortNames(), ", "))
	}
	if key == nil { // "-rank"
		key = func(s *session, a, b int) bool { return place(s, a) < place(s, b) }
	}
	if reversed {
		forward := key
		key = func(s *session, a, b int) bool { return forward(s, b, a) }
	}
	return key, nil
}

// place returns where the order of what to take next has a target.
func place(s *session, i int) int {
	if r := s.moments[i].Rank; r > 0 {
		return r
	}
	return len(s.moments) + 1
}

func (s *session) listShape() jsonList {
	out := jsonList{
		Demonstration: s.demo, Site: siteShape(s.site), At: stamp(s.at), AtJD: round(s.at.JDUTC(), jdDigits),
		Night: s.night.Date.String(), LST: round(s.scene.Frame.LST.Hours(), placeDigits),
		Sun:     jsonAltAz{round(s.scene.Sun.Place.Az.Deg(), placeDigits), round(s.scene.Sun.Place.Alt.Deg(), placeDigits)},
		Targets: []jsonTarget{},
	}
	m := &s.scene.Moon
	out.Moon = jsonMoon{
		jsonAltAz{round(m.Place.Az.Deg(), placeDigits), round(m.Place.Alt.Deg(), placeDigits)},
		round(m.DistanceKm, 1), round(s.scene.Phase.Illuminated, 5), round(s.scene.Phase.Angle.Deg(), 4),
	}
	for _, i := range s.order {
		out.Targets = append(out.Targets, targetShape(&s.targets[i], &s.prepared[i], &s.moments[i], &s.wants[i]))
	}
	return out
}

var csvHeader = strings.Split("rank,id,name,kind,ra_deg,dec_deg,apparent_ra_deg,apparent_dec_deg,az_deg,alt_deg,"+
	"alt_refracted_deg,ha_h,parallactic_deg,airmass,rising,moon_sep_deg,sun_sep_deg,rv_correction_kms,bjd_tdb,"+
	"stage,stage_p,band,mag,lo,hi,level,sb_mag_arcsec2,ends_by,window_until_utc,best_utc,best_airmass,blocked_by,"+
	"blocked_until_utc,unconfirmed,sky_mag_arcsec2,sky_band,instrument,mode,booked_s,frames,each_s,up_to_s,p_reached,"+
	"saturates_at_mag,limited_by,snr,snr_per,position_angle_deg,standard", ",")

func (s *session) listCSV(w io.Writer) error {
	c := csv.NewWriter(w)
	c.Write(csvHeader)
	for _, i := range s.order {
		e := targetShape(&s.targets[i], &s.prepared[i], &s.moments[i], &s.wants[i])
		c.Write(csvRow(&e, &s.moments[i]))
	}
	c.Flush()
	return c.Error()
}

func num(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

// opt writes a number, nothing where there is none.
func opt(v *float64) string {
	if v == nil {
		return ""
	}
	return num(*v)
}

func csvRow(e *jsonTarget, m *moment.Moment) []string {
	rank, window, codes, open := "", "", []string{}, ""
	if e.Rank != nil {
		rank = strconv.Itoa(*e.Rank)
	}
	if m.WindowOK {
		window = stamp(m.Window.Until)
	}
	for _, b := range e.BlockedBy {
		codes = append(codes, b.Code)
	}
	if next := m.NextOpen(); next != nil {
		open = stamp(*next)
	}
	row := []string{rank, e.ID, e.Name, e.Kind, num(e.RA), num(e.Dec), num(e.ApparentRA), num(e.ApparentDec),
		num(e.Az), num(e.Alt), num(e.AltRefracted), num(e.HA), num(e.Parallactic), opt(e.Airmass),
		fmt.Sprint(e.Rising), num(e.MoonSep), num(e.SunSep), num(e.RVCorrection), num(e.BJD),
		e.Stage.Best, num(round(m.Stage.Sureness(), 4)), e.Expect.Band, opt(e.Expect.Mag), opt(e.Expect.Lo), opt(e.Expect.Hi),
		num(e.Expect.Level), opt(e.Expect.SB), e.EndsBy, window, e.BestUTC, opt(e.BestAirmass),
		strings.Join(codes, " "), open, strings.Join(e.Unconfirmed, " "), opt(e.SkyMag), e.SkyBand}
	x := e.Exposure
	if x == nil {
		return append(row, make([]string, len(csvHeader)-len(row))...)
	}
	standard := ""
	if x.Standard != nil {
		standard = *x.Standard
	}
	return append(row, x.Instrument, x.Mode, num(x.BookedS), strconv.Itoa(x.Frames), num(x.EachS), opt(x.UpToS), opt(x.PReached),
		opt(x.SaturatesAt), x.LimitedBy, opt(x.SNR), x.Per, opt(x.PA), standard)
}
