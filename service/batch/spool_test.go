package batch_test

import (
	"bytes"
	"errors"
	"io"
	"math/rand/v2"
	"testing"
	"time"

	"borewright/service/batch"
)

// Whatever is written in whatever pieces comes out in order, whether the reader
// keeps up or not.
func TestSpoolKeepsTheOrder(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for _, late := range []bool{false, true} {
		s := batch.NewSpool(64<<20, 0)
		want := make([]byte, 20<<20)
		for i := range want {
			want[i] = byte(i*7 + i>>11)
		}
		written := make(chan error, 1)
		write := func() {
			rest := want
			for len(rest) > 0 {
				n := min(len(rest), 1+r.IntN(300<<10))
				if _, err := s.Write(rest[:n]); err != nil {
					written <- err
					return
				}
				rest = rest[n:]
			}
			s.End(nil)
			written <- nil
		}
		if late {
			write()
		} else {
			go write()
		}
		var got bytes.Buffer
		buffer := make([]byte, 64<<10)
		for {
			part, err := s.Next(buffer)
			if errors.Is(err, io.EOF) {
				break
			}
			if err != nil {
				t.Fatal(err)
			}
			got.Write(part)
		}
		if err := <-written; err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got.Bytes(), want) {
			t.Errorf("late %v: %d bytes of %d, or another order", late, got.Len(), len(want))
		}
		if err := s.Close(); err != nil {
			t.Error(err)
		}
	}
}

// A reader who keeps behind finds everything in order, and the file goes round: it
// never holds more than the bound.
func TestSpoolGoesRound(t *testing.T) {
	const most = 3 << 20
	r := rand.New(rand.NewPCG(3, 4))
	s := batch.NewSpool(most, time.Minute)
	want := make([]byte, 40<<20)
	for i := range want {
		want[i] = byte(i*7 + i>>11)
	}
	written := make(chan error, 1)
	go func() {
		for rest := want; len(rest) > 0; {
			n := min(len(rest), 1+r.IntN(200<<10))
			if _, err := s.Write(rest[:n]); err != nil {
				written <- err
				return
			}
			rest = rest[n:]
		}
		s.WriteLast([]byte("the end"))
		s.End(nil)
		written <- nil
	}()
	var got bytes.Buffer
	buffer := make([]byte, 64<<10)
	largest := int64(0)
	for {
		part, err := s.Next(buffer)
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			t.Fatal(err)
		}
		got.Write(part)
		largest = max(largest, batch.FileSize(s))
	}
	if err := errors.Join(<-written, s.Close()); err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got.Bytes(), append(want, "the end"...)) {
		t.Errorf("%d bytes of %d, or another order", got.Len(), len(want)+7)
	}
	if largest == 0 || largest > most {
		t.Errorf("the file grows to %d bytes, the bound is %d", largest, most)
	}
}

// A full spool waits for a reader who reads, and is full when none does.
func TestFullSpoolWaitsForItsReader(t *testing.T) {
	s := batch.NewSpool(100, 50*time.Millisecond)
	if _, err := s.Write(make([]byte, 90)); err != nil {
		t.Fatal(err)
	}
	began := time.Now()
	if _, err := s.Write(make([]byte, 90)); !errors.Is(err, batch.ErrSpoolFull) || time.Since(began) < 40*time.Millisecond {
		t.Errorf("%v after %v", err, time.Since(began))
	}
	wrote := make(chan error, 1)
	go func() {
		_, err := s.Write(make([]byte, 90))
		wrote <- err
	}()
	if _, err := s.Next(make([]byte, 100)); err != nil {
		t.Fatal(err)
	}
	if err := <-wrote; err != nil {
		t.Errorf("a reader has come: %v", err)
	}
	go func() {
		_, err := s.Write(make([]byte, 90))
		wrote <- err
	}()
	if err := s.Close(); err != nil {
		t.Fatal(err)
	}
	if err := <-wrote; err == nil {
		t.Error("a closed spool takes more")
	}
}

func TestSpoolHasABound(t *testing.T) {
	s := batch.NewSpool(1000, 0)
	if _, err := s.Write(make([]byte, 900)); err != nil {
		t.Fatal(err)
	}
	if _, err := s.Write(make([]byte, 200)); !errors.Is(err, batch.ErrSpoolFull) {
		t.Errorf("%v", err)
	}
	if _, err := s.Next(make([]byte, 100)); err != nil {
		t.Fatal(err)
	}
	if _, err := s.Write(make([]byte, 5000)); err != nil {
		t.Errorf("an empty spool takes one piece of any size: %v", err)
	}
	failed := errors.New("failed")
	s.End(failed)
	if _, err := s.Next(nil); err != nil {
		t.Fatal(err)
	}
	if _, err := s.Next(nil); !errors.Is(err, failed) {
		t.Errorf("%v", err)
	}
	if err := s.Close(); err != nil {
		t.Error(err)
	}
	if _, err := s.Write([]byte{1}); err == nil {
		t.Error("a closed spool takes more")
	}
}
