package moment

import "sort"

// Rank numbers the targets in the order of what to take next, and returns the
// order: positions in the list, first to take first, blocked ones last.
//
// Without a plan the order is by the end of the wished-for window, then by
// weight, then by airmass; targets that are possible but not wished for come
// after those that are, by the end of the possible window. Blocked ones follow
// by when they open, and have rank 0. Ties go by place in the list, so the
// order is the same everywhere.
func Rank(list []Moment) []int {
	order := make([]int, len(list))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool { return before(&list[order[a]], &list[order[b]]) })
	for place, i := range order {
		list[i].Rank = 0
		if list[i].InCan {
			list[i].Rank = place + 1
		}
	}
	return order
}

// class is 0 for targets to take, 1 for those merely possible, 2 for blocked.
func (m *Moment) class() int {
	switch {
	case m.InShould:
		return 0
	case m.InCan:
		return 1
	}
	return 2
}

func before(a, b *Moment) bool {
	if ca, cb := a.class(), b.class(); ca != cb {
		return ca < cb
	}
	if a.class() == 2 {
		return opensBefore(a, b)
	}
	if ea, eb := a.ends(), b.ends(); ea != eb {
		return ea < eb
	}
	if a.Weight != b.Weight {
		return a.Weight > b.Weight
	}
	if a.AirOK != b.AirOK {
		return a.AirOK
	}
	return a.Airmass < b.Airmass
}

// ends returns when the window that ranks a target ends, unix seconds.
func (m *Moment) ends() int64 {
	spans := m.Course.Can
	if m.InShould {
		spans = m.Course.Should
	}
	if s, ok := within(spans, m.At); ok {
		return s.Until.UTC().Unix()
	}
	return 0
}

// opensBefore orders blocked targets by when they can next be taken; those
// that cannot tonight come last.
func opensBefore(a, b *Moment) bool {
	sa, oka := pick(a.Course.Can, a.At)
	sb, okb := pick(b.Course.Can, b.At)
	if oka != okb {
		return oka
	}
	return oka && sa.From.Before(sb.From)
}
