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
	code, err := f.answer(p, bufio.NewReaderSize(in, 64<<10))
	var refused *document.Refusal
	switch {
	case errors.As(err, &refused):
		for _, v := range refused.Violations {
			fmt.Fprintf(p.stderr, "borewright: %s: %s\n", name, shownViolation(v))
		}
		return exitUsage
	case errors.Is(err, service.ErrCalculation):
		return p.fault("calc: %v", err)
	case err != nil:
		return p.fault("calc: %s: %v", name, err)
	}
	return code
}

func shownViolation(v document.Violation) string {
	at := v.Parameter
	if at == "" {
		at = problem.Fragment(v.Pointer)
	}
	return fmt.Sprintf("%s: %s (%s)", at, v.Detail, v.Code)
}

// answer answers what stands in the file.
func (f *calcFlags) answer(p *process, in *bufio.Reader) (int, error) {
	form, lone, err := f.form(in)
	if err != nil {
		return exitUsage, err
	}
	o := batch.Options{In: form, BOM: f.bom, Layout: map[string]batch.Layout{"rows": batch.FlatRows, "columns": batch.Columns, "blocks": batch.Blocks}[f.layout.value]}
	o.Dialect, _ = batch.DialectByName(f.dialect.value)
	if f.carry != "" {
		o.Carry = strings.Split(f.carry, ",")
	}
	if f.reportUnits != "" {
		if o.Report, err = answer.ReportIn(f.reportUnits); err != nil {
			return exitUsage, &document.Refusal{Violations: []document.Violation{{Parameter: "--report-units", Code: "unknown_value", Detail: err.Error()}}}
		}
	}
	switch f.format.value {
	case "auto":
		if o.Out = form; p.terminal {
			o.Out = batch.Table
		}
	case "table":
		o.Out = batch.Table
	default:
		o.Out = map[string]batch.Format{"json": batch.JSON, "ndjson": batch.NDJSON, "csv": batch.CSV}[f.format.value]
	}
	out := bufio.NewWriterSize(p.stdout, 64<<10)
	var failed bool
	if lone && o.Out == batch.JSON {
		failed, err = f.document(out, in, o.Report)
	} else {
		var s batch.Summary
		s, err = batch.Run(context.Background(), service.New(), in, out, o)
		failed = s.Failed > 0
	}
	if err != nil {
		return exitUsage, err
	}
	if err := out.Flush(); err != nil {
		return exitFault, err
	}
	if failed {
		return exitFindings, nil
	}
	return exitOK, nil
}

// document answers one request document as its door does. A refused one is
// answered by its problem.
func (f *calcFlags) document(out io.Writer, in io.Reader, r *answer.Report) (failed bool, err error) {
	body, err := io.ReadAll(in)
	if err != nil {
		return true, err
	}
	doors := map[string]document.Door{"section": document.SectionDoor, "fluid": document.FluidDoor, "regime": document.RegimeDoor, "friction": document.FrictionDoor, "segment": document.SegmentDoor}
	answered, err := service.New().AnswerIn(nil, body, doors[f.door.value], r)
	var refused *document.Refusal
	if errors.As(err, &refused) {
		if refused.Malformed {
			return true, err
		}
		answered, failed = problem.AppendJSON(nil, problem.InvalidInput, refused.Violations), true
	} else if err != nil {
		return true, err
	}
	_, err = out.Write(append(answered, '\n'))
	return failed, err
}

// form tells the form of the input, and whether it is one document alone.
func (f *calcFlags) form(in *bufio.Reader) (form batch.Format, lone bool, err error) {
	first, err := in.Peek(64 << 10)
	if err != nil && !errors.Is(err, io.EOF) && !errors.Is(err, bufio.ErrBufferFull) {
		return 0, false, err
	}
	first = bytes.TrimLeft(first, " \t\r\n")
	object := bytes.HasPrefix(first, []byte("{"))
	name := f.from.value
	if name == "auto" {
		name = strings.TrimPrefix(strings.ToLower(filepath.Ext(f.file)), ".")
	}
	switch name {
	case "csv":
		return batch.CSV, false, nil
	case "ndjson", "jsonl":
		return batch.NDJSON, false, nil
	case "json":
		return batch.JSON, object, nil
	}
	switch line, rest, more := bytes.Cut(first, []byte("\n")); {
	case bytes.HasPrefix(first, []byte("[")):
		return batch.JSON, false, nil
	case object && more && json.Valid(line) && len(bytes.TrimSpace(rest)) > 0:
		return batch.NDJSON, false, nil
	case object:
		return batch.JSON, true, nil
	}
	return batch.CSV, false, nil
}
