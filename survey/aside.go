package survey

// PutAside keeps a reading out of everything that follows: the reading at index i is
// marked with the problem's reason, and its file's count of used rows goes down, so
// that rows = used + set aside still holds. It gives the problem with the reading's
// place and SetAside filled in.
func (s *Survey) PutAside(i int, p Problem) Problem {
	r := &s.Readings[i]
	p.Source, p.Severity = r.Source, SetAside
	if r.SetAside == "" {
		for k := range s.Inputs {
			if s.Inputs[k].File == r.Source.File {
				s.Inputs[k].Used--
				break
			}
		}
	}
	r.SetAside = p.Reason
	return p
}
