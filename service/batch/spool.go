package batch

import (
	"errors"
	"io"
	"os"
	"sync"
)

// ErrSpoolFull is more answers waiting for their reader than the bound allows.
var ErrSpoolFull = errors.New("more answers wait for their reader than the spool holds")

// memoryBytes is what a spool keeps in memory before it takes to a file.
const memoryBytes = 1 << 20

// Spool stands between rows that are answered and a client that may read them only
// when it has sent everything: writing never waits for reading. It keeps a little in
// memory and the rest in a file, to a bound.
type Spool struct {
	most int64

	mu       sync.Mutex
	news     sync.Cond // something was written, or the end came
	memory   [][]byte
	held     int64 // bytes in memory
	file     *os.File
	from, to int64 // unread bytes of the file
	ended    bool
	err      error // of the writer, told to the reader at the end
}

// NewSpool returns a spool for most bytes.
func NewSpool(most int64) *Spool {
	s := &Spool{most: most}
	s.news.L = &s.mu
	return s
}

// Write takes bytes, or refuses them when the bound is reached.
func (s *Spool) Write(p []byte) (int, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.ended {
		return 0, io.ErrClosedPipe
	}
	waiting := s.held + s.to - s.from
	switch {
	case waiting > 0 && waiting+int64(len(p)) > s.most:
		return 0, ErrSpoolFull
	case s.to == s.from && s.held+int64(len(p)) <= memoryBytes || waiting == 0:
		s.memory = append(s.memory, append([]byte(nil), p...))
		s.held += int64(len(p))
	default:
		if err := s.toFile(p); err != nil {
			return 0, err
		}
	}
	s.news.Signal()
	return len(p), nil
}

// WriteLast takes bytes whatever the bound: the row that says why there is no more.
func (s *Spool) WriteLast(p []byte) error {
	s.mu.Lock()
	s.most += int64(len(p))
	s.mu.Unlock()
	_, err := s.Write(p)
	return err
}

func (s *Spool) toFile(p []byte) error {
	if s.file == nil {
		f, err := os.CreateTemp("", "borewright-spool-*")
		if err != nil {
			return err
		}
		s.file = f
		_ = os.Remove(f.Name()) // gone with its last handle, whatever happens to the process
	}
	n, err := s.file.WriteAt(p, s.to)
	s.to += int64(n)
	return err
}

// End tells the reader that nothing more comes, and what the writer met.
func (s *Spool) End(err error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.ended, s.err = true, err
	s.news.Broadcast()
}

// Next waits for bytes and puts some of them into p's memory. At the end it says
// io.EOF, or what the writer met.
func (s *Spool) Next(p []byte) ([]byte, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	for s.held == 0 && s.to == s.from && !s.ended {
		s.news.Wait()
	}
	switch {
	case s.held > 0:
		first := s.memory[0]
		s.memory = s.memory[1:]
		s.held -= int64(len(first))
		return first, nil
	case s.to > s.from:
		return s.fromFile(p)
	case s.err != nil:
		return nil, s.err
	}
	return nil, io.EOF
}

func (s *Spool) fromFile(p []byte) ([]byte, error) {
	n, err := s.file.ReadAt(p[:min(int64(cap(p)), s.to-s.from)], s.from)
	if n == 0 && err != nil {
		return nil, err
	}
	if s.from += int64(n); s.from == s.to {
		s.from, s.to = 0, 0 // what comes next overwrites what has been read
	}
	return p[:n], nil
}

// Close gives up what the spool holds.
func (s *Spool) Close() error {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.ended, s.memory, s.held = true, nil, 0
	s.news.Broadcast()
	if s.file == nil {
		return nil
	}
	f := s.file
	s.file, s.from, s.to = nil, 0, 0
	return f.Close()
}
