package order

// random is a 64-bit xorshift generator: the same numbers on every machine.
//
// Source: [cite.Marsaglia2003].
type random struct{ x uint64 }

// newRandom seeds a generator; neighbouring seeds give unlike streams.
func newRandom(seed uint64) *random {
	// One round of a mixing function, so that small seeds differ in many bits.
	z := seed + 0x9e3779b97f4a7c15
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	z ^= z >> 31
	if z == 0 {
		z = 1
	}
	return &random{z}
}

// next returns 64 bits, never all zero.
func (r *random) next() uint64 {
	r.x ^= r.x << 13
	r.x ^= r.x >> 7
	r.x ^= r.x << 17
	return r.x
}

// below returns a number from 0 to n-1; 0 when n is not positive.
func (r *random) below(n int) int {
	if n <= 0 {
		return 0
	}
	return int((r.next() >> 33) % uint64(n))
}

// one tells, once in n times.
func (r *random) one(n int) bool { return r.below(n) == 0 }
