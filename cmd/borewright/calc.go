package main

import (
	"bufio"
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"borewright/service"
	"borewright/service/answer"
	"borewright/service/batch"
	"borewright/service/document"
	"borewright/service/problem"
)

// calcFlags are what a person can say about calc.
type calcFlags struct {
	file        string
	from        choice
	format      choice
	layout      choice
	dialect     choice
	door        choice
	carry       string
	reportUnits string
	bom         bool
}

func readCalcFlags(p *process, args []string) (*calcFlags, error) {
	f := &calcFlags{
		from:    choice{"auto", []string{"auto", "json", "ndjson", "csv"}},
		format:  choice{"auto", []string{"auto", "json", "ndjson", "csv", "table"}},
		layout:  choice{"rows", []string{"rows", "columns", "blocks"}},
		dialect: choice{"comma", batch.DialectNames()},
		door:    choice{"segment", []string{"section", "fluid", "regime", "friction", "segment"}},
	}
	fs := flag.NewFlagSet("calc FILE|-", flag.ContinueOnError)
	fs.Var(&f.from, "from", "form of the input; auto tells it by the name of the file, or by its first bytes")
	fs.Var(&f.format, "format", "form of the answers; auto is that of the input, and a table on a terminal")
	fs.Var(&f.layout, "layout", "layout of a JSON batch")
	fs.Var(&f.dialect, "dialect", "dialect of CSV, in and out")
	fs.Var(&f.door, "door", "what one request document asks for; rows are whole segments")
	fs.StringVar(&f.carry, "carry", "", "columns or tags of the list that pass through, parted by commas; * for all columns")
	fs.StringVar(&f.reportUnits, "report-units", "", "units of the answers: si, plant, us, or kinds with units such as pressure:kPa (default si)")
	fs.BoolVar(&f.bom, "bom", false, "begin CSV with a byte order mark, by which spreadsheet programs know UTF-8")
	file, err := parseFileFlags(p, fs, args)
	f.file = file
	return f, err
}

// calculate answers a file without a server: the same code, the same digits.
func calculate(p *process, args []string) int {
	f, err := readCalcFlags(p, args)
	if errors.Is(err, errHelp) {
		return exitOK
	}
	if err != nil {
		return p.usage("calc: %v; borewright calc --help lists the flags", err)
	}
	in, name := p.stdin, "standard input"
	if f.file != "-" {
		file, err := os.Open(f.file)
		if err != nil {
			return p.usage("calc: %v", err)
		}
		defer func() { _ = file.Close() }() // only read
		in, name = file, f.file
	}
	code, err := f.answer(p, bufio.NewReaderSize(input{in}, 64<<10))
	var refused *document.Refusal
	var unreadable *inputError
	switch {
	case errors.As(err, &refused):
		for _, v := range refused.Violations {
			fmt.Fprintf(p.stderr, "borewright: %s: %s\n", name, shownViolation(v))
		}
		return exitUsage
	case errors.As(err, &unreadable):
		return p.usage("calc: %v", err)
	case errors.Is(err, service.ErrCalculation):
		return p.fault("calc: %v", err)
	case err != nil:
		return p.fault("calc: %s: %v", name, err)
	}
	return code
}

// input tells what goes wrong with the input from what goes wrong with the answers.
type input struct{ io.Reader }

func (in input) Read(b []byte) (int, error) {
	n, err := in.Reader.Read(b)
	if err != nil && !errors.Is(err, io.EOF) {
		err = &inputError{err}
	}
	return n, err
}

// inputError is an input that cannot be read.
type inputError struct{ error }

func (e *inputError) Unwrap() error { return e.error }

func shownViolation(v document.Violation) string {
	at := v.Parameter
	if at == "" {
		at = problem.Fragment(v.Pointer)
	}
	return answer.Printable(fmt.Sprintf("%s: %s (%s)", at, v.Detail, v.Code))
}

// answer answers what stands in the file. Answers are written as they come: another
// program may wait for each.
func (f *calcFlags) answer(p *process, in *bufio.Reader) (int, error) {
	if err := skipByteOrderMark(in); err != nil {
		return exitUsage, err
	}
	form, lone, err := f.form(in)
	if err != nil {
		return exitUsage, err
	}
	o, err := f.options(p, form)
	if err != nil {
		return exitUsage, err
	}
	var s batch.Summary
	if lone = lone && o.Out == batch.JSON; !lone && doors[f.door.value] != document.SegmentDoor {
		return exitUsage, &document.Refusal{Violations: []document.Violation{{Parameter: "--door", Code: "unknown_value", Detail: "rows are whole segments; another door answers one document, as JSON"}}}
	}
	if lone {
		s, err = f.document(p.stdout, in, o.Report)
	} else {
		s, err = batch.Run(context.Background(), service.New(), in, p.stdout, o)
	}
	switch {
	case err != nil:
		return exitUsage, err
	case s.Faults > 0:
		return exitFault, nil
	case s.Failed > 0:
		return exitFindings, nil
	}
	return exitOK, nil
}

var (
	formats = map[string]batch.Format{"json": batch.JSON, "ndjson": batch.NDJSON, "csv": batch.CSV, "table": batch.Table}
	layouts = map[string]batch.Layout{"rows": batch.FlatRows, "columns": batch.Columns, "blocks": batch.Blocks}
)

// options are those of the batch for an input of the form.
func (f *calcFlags) options(p *process, form batch.Format) (batch.Options, error) {
	o := batch.Options{In: form, Out: form, Layout: layouts[f.layout.value], BOM: f.bom, OnFault: p.rowFault}
	o.Dialect, _ = batch.DialectByName(f.dialect.value) // the flag takes no other
	switch {
	case f.format.value != "auto":
		o.Out = formats[f.format.value]
	case p.terminal:
		o.Out = batch.Table
	}
	if f.carry != "" {
		for name := range strings.SplitSeq(f.carry, ",") {
			o.Carry = append(o.Carry, strings.TrimSpace(name))
		}
	}
	if f.reportUnits == "" {
		return o, nil
	}
	var err error
	if o.Report, err = answer.ReportIn(f.reportUnits); err != nil {
		return o, &document.Refusal{Violations: []document.Violation{{Parameter: "--report-units", Code: "unknown_value", Detail: err.Error()}}}
	}
	return o, nil
}

// skipByteOrderMark passes over what some editors put before a file that people save.
func skipByteOrderMark(in *bufio.Reader) error {
	start, err := in.Peek(len(batch.ByteOrderMark))
	if string(start) == batch.ByteOrderMark {
		_, err = in.Discard(len(start))
	}
	if errors.Is(err, io.EOF) {
		return nil // a short file
	}
	return err
}

// rowFault tells of a row that failed by our fault.
func (p *process) rowFault(row int, err error) {
	_ = p.fault("calc: row %d: %v", row, err) // the exit code is that of the whole batch
}

// doors by the names that callers give.
var doors = map[string]document.Door{"section": document.SectionDoor, "fluid": document.FluidDoor, "regime": document.RegimeDoor, "friction": document.FrictionDoor, "segment": document.SegmentDoor}

// document answers one request document as its door does. A refused one is
// answered by its problem.
func (f *calcFlags) document(out io.Writer, in io.Reader, r *answer.Report) (batch.Summary, error) {
	body, err := io.ReadAll(in)
	if err != nil {
		return batch.Summary{}, err
	}
	s := batch.Summary{Total: 1, OK: 1}
	answered, err := service.New().AnswerIn(nil, body, doors[f.door.value], r)
	var refused *document.Refusal
	if errors.As(err, &refused) && !refused.Malformed {
		answered, err = problem.AppendJSON(nil, problem.InvalidInput, refused.Violations), nil
		s = batch.Summary{Total: 1, Failed: 1}
	}
	if err != nil {
		return s, err
	}
	_, err = out.Write(append(answered, '\n'))
	return s, err
}

// form tells the form of the input, and whether it is one document alone. It looks
// into the input only where it must, since the rest of it may be long in coming.
func (f *calcFlags) form(in *bufio.Reader) (form batch.Format, lone bool, err error) {
	name := f.from.value
	if name == "auto" {
		name = strings.TrimPrefix(strings.ToLower(filepath.Ext(f.file)), ".")
	}
	switch name {
	case "csv":
		return batch.CSV, false, nil
	case "ndjson", "jsonl":
		return batch.NDJSON, false, nil
	}
	first, err := in.Peek(in.Size())
	if err != nil && !errors.Is(err, io.EOF) {
		return 0, false, err
	}
	first = bytes.TrimLeft(first, " \t\r\n")
	object := bytes.HasPrefix(first, []byte("{"))
	switch line, rest, _ := bytes.Cut(first, []byte("\n")); {
	case name == "json":
		return batch.JSON, object, nil
	case bytes.HasPrefix(first, []byte("[")):
		return batch.JSON, false, nil
	case object && json.Valid(line) && len(bytes.TrimSpace(rest)) > 0:
		return batch.NDJSON, false, nil
	case object:
		return batch.JSON, true, nil
	}
	return batch.CSV, false, nil
}
