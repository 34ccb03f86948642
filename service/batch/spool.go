package batch

import (
	"errors"
	"io"
	"os"
	"sync"
	"time"
)

// ErrSpoolFull is more answers waiting for their reader than the bound allows, and no
// reader who takes them.
var ErrSpoolFull = errors.New("more answers wait for their reader than the spool holds")

// memoryBytes is what a spool keeps in memory before it takes to a file.
const memoryBytes = 1 << 20

// Spool stands between rows that are answered and a client that may read them only
// when it has sent everything: writing does not wait for reading until the bound is
// reached. It keeps a little in memory and the rest in a file that is written round
// and round, so that the file never outgrows the bound. It is for one writer and one
// reader.
type Spool struct {
	most     int64         // bytes in all
	size     int64         // of them in the file
	patience time.Duration // how long a full spool waits for a reader who takes nothing

	mu       sync.Mutex
	change   sync.Cond // something was written or taken, or the end came
	memory   [][]byte  // the oldest bytes
	held     int64     // of them
	file     *os.File
	from, to int64    // unread bytes of the file, counted from its first
	last     [][]byte // behind the file, whatever the bound
	ended    bool
	err      error // of the writer, told to the reader at the end
}

// NewSpool returns a spool for most bytes. A writer who finds it full waits as long as
// the reader goes on reading, and for the patience when it does not: a client slower
// than the calculation slows it down, and one that reads only at the end is told.
func NewSpool(most int64, patience time.Duration) *Spool {
	s := &Spool{most: most, size: max(most, 1), patience: patience}
	s.change.L = &s.mu
	return s
}

// waiting is how many bytes nobody has read.
func (s *Spool) waiting() int64 { return s.held + s.to - s.from }

// Write takes bytes, or refuses them when the bound is reached and nobody reads. An
// empty spool takes one piece of any size.
func (s *Spool) Write(p []byte) (int, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if err := s.room(int64(len(p))); err != nil {
		return 0, err
	}
	if onlyMemory := s.to == s.from; onlyMemory && (s.held == 0 || s.held+int64(len(p)) <= memoryBytes) {
		s.memory = append(s.memory, append([]byte(nil), p...))
		s.held += int64(len(p))
	} else if err := s.toFile(p); err != nil {
		return 0, err
	}
	s.change.Broadcast()
	return len(p), nil
}

// room waits until n bytes more fit, or the reader has taken nothing for too long.
func (s *Spool) room(n int64) error {
	for {
		before := s.waiting()
		switch {
		case s.ended:
			return io.ErrClosedPipe
		case before == 0 || before+n <= s.most:
			return nil
		case !s.taken(before):
			return ErrSpoolFull
		}
	}
}

// taken waits until fewer bytes wait than before, or the patience is over.
func (s *Spool) taken(before int64) bool {
	over := false
	timer := time.AfterFunc(s.patience, func() {
		s.mu.Lock()
		defer s.mu.Unlock()
		over = true
		s.change.Broadcast()
	})
	defer timer.Stop()
	for s.waiting() == before && !s.ended && !over {
		s.change.Wait()
	}
	return s.waiting() < before || s.ended
}

// WriteLast takes bytes whatever the bound: the row that says why there is no more.
func (s *Spool) WriteLast(p []byte) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.last = append(s.last, append([]byte(nil), p...))
	s.change.Broadcast()
}

// toFile puts bytes behind those in the file, from its beginning again where it ends.
func (s *Spool) toFile(p []byte) error {
	if s.file == nil {
		f, err := os.CreateTemp("", "borewright-spool-*")
		if err != nil {
			return err
		}
		s.file = f
		_ = os.Remove(f.Name()) // gone with its last handle, whatever happens to the process
	}
	for len(p) > 0 {
		at := s.to % s.size
		n, err := s.file.WriteAt(p[:min(int64(len(p)), s.size-at)], at)
		if err != nil {
			return err
		}
		s.to += int64(n)
		p = p[n:]
	}
	return nil
}

// End tells the reader that nothing more comes, and what the writer met.
func (s *Spool) End(err error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.ended, s.err = true, err
	s.change.Broadcast()
}

// Next waits for bytes and gives some of them, in p's memory or its own. At the end it
// says io.EOF, or what the writer met.
func (s *Spool) Next(p []byte) ([]byte, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	for s.waiting() == 0 && len(s.last) == 0 && !s.ended {
		s.change.Wait()
	}
	defer s.change.Broadcast()
	switch {
	case s.held > 0:
		first := s.memory[0]
		s.memory = s.memory[1:]
		s.held -= int64(len(first))
		return first, nil
	case s.to > s.from:
		return s.fromFile(p)
	case len(s.last) > 0:
		first := s.last[0]
		s.last = s.last[1:]
		return first, nil
	case s.err != nil:
		return nil, s.err
	}
	return nil, io.EOF
}

func (s *Spool) fromFile(p []byte) ([]byte, error) {
	at := s.from % s.size
	n, err := s.file.ReadAt(p[:min(int64(cap(p)), s.to-s.from, s.size-at)], at)
	if n == 0 && err != nil {
		return nil, err
	}
	if s.from += int64(n); s.from == s.to {
		s.from, s.to = 0, 0 // the file begins anew, and stays short for a reader who keeps up
	}
	return p[:n], nil
}

// Close gives up what the spool holds.
func (s *Spool) Close() error {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.ended, s.memory, s.held, s.last = true, nil, 0, nil
	s.change.Broadcast()
	if s.file == nil {
		return nil
	}
	f := s.file
	s.file, s.from, s.to = nil, 0, 0
	return f.Close()
}
