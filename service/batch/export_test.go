package batch

import (
	"io"
	"strings"
)

// ArrayRows are the rows that a JSON array is read into.
func ArrayRows(in string) ([]string, error) {
	a, err := newArray(strings.NewReader(in), 0)
	if err != nil {
		return nil, err
	}
	var rows []string
	for {
		c := &chunk{}
		if err := a.next(c); err == io.EOF {
			return rows, nil
		} else if err != nil {
			return nil, err
		}
		rows = append(rows, string(c.in))
	}
}

// FileSize is how large the file of a spool is.
func FileSize(s *Spool) int64 {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.file == nil {
		return 0
	}
	info, err := s.file.Stat()
	if err != nil {
		panic(err)
	}
	return info.Size()
}
