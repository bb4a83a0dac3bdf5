package stage

import "evenfall/targets"

// ofNebula adds what a nebula's lines and size say.
func (m *Models) ofNebula(t *targets.Target, s *sight, st *Study) {}
