package segment

import (
	"errors"
	"fmt"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/gas"
)

// choked words a gas that reaches its limiting velocity before the outlet, with
// the length and the flow at which it does; or answers at that flow.
func (out *Result) choked(in *Input, model GasModel, err error) error {
	var limit *gas.ChokedError
	if !errors.As(err, &limit) {
		return err
	}
	asked := out.Flow.MassFlow
	most, err := in.mostFlow(asked, model)
	if err != nil {
		return &calc.Error{Kind: calc.ErrChoked, Quantity: "flow", Value: asked, Detail: fmt.Sprintf(
			"the gas reaches its limiting velocity after %.6g m of %.6g m; how much passes cannot be told by this friction law, which does not hold for less flow: take colebrook_white",
			out.lengthToChoking(in, model), in.Length)}
	}
	if most == 0 {
		return &calc.Error{Kind: calc.ErrChoked, Quantity: "flow", Value: asked, Detail: "no flow of this gas gets through this segment from this state"}
	}
	if in.AnswerAtChoking {
		return out.atChoking(in, asked, most)
	}
	e := ChokedError{Length: out.lengthToChoking(in, model), MassFlow: most}
	e.error = calc.Error{Kind: calc.ErrChoked, Quantity: "flow", Value: asked, Max: most, Detail: fmt.Sprintf(
		"the gas reaches its limiting velocity after %.6g m of %.6g m; this segment passes at most %.10g kg/s from this state, asked are %.6g kg/s; "+
			"ask for less, take a larger section, or set answer_at_choking to be answered at that flow",
		e.Length, in.Length, most, asked)}
	return &e
}

// ChokedError is a gas that reaches its limiting velocity before the outlet.
type ChokedError struct {
	Length   float64 // at which the asked flow chokes [m]
	MassFlow float64 // the largest that passes the whole segment [kg/s]
	error    calc.Error
}

func (e *ChokedError) Error() string { return e.error.Error() }

// Unwrap gives the error with its kind and words.
func (e *ChokedError) Unwrap() error { return &e.error }

// atChoking answers at the largest flow that passes.
func (out *Result) atChoking(in *Input, asked, most float64) error {
	at := *in
	at.AnswerAtChoking, at.Flow = false, flow.Rate{By: flow.ByMass, Value: most}
	if err := at.pressureDrop(out); err != nil {
		return err
	}
	out.Conditions.Choked = true
	out.Gas.ChokingMassFlow, out.Gas.AskedMassFlow = calc.Some(most), calc.Some(asked)
	return nil
}

// bisections halve an interval down to neighbouring numbers.
const bisections = 60

// mostFlow is the largest mass flow [kg/s] that passes, below one that does not; 0
// where none does. Its error is what keeps a smaller flow from being calculated at all.
func (in *Input) mostFlow(asked float64, model GasModel) (float64, error) {
	passes := 0.0
	trial := *in
	var out Result
	for range bisections {
		middle := passes + (asked-passes)/2
		if middle == passes || middle == asked {
			break
		}
		trial.Flow = flow.Rate{By: flow.ByMass, Value: middle}
		ok, err := trial.passes(&out, model)
		switch {
		case err != nil:
			return 0, err
		case ok:
			passes = middle
		default:
			asked = middle
		}
	}
	return passes, nil
}

// passes reports whether the gas gets through; that it chokes is no error.
func (in *Input) passes(out *Result, model GasModel) (bool, error) {
	if err := in.friction(out); err != nil {
		return false, err
	}
	loss, err := in.lossOf(out)
	if err != nil {
		return false, err
	}
	out.losses(in, &loss)
	if err := out.endVelocities(in); err != nil {
		return false, err
	}
	_, err = out.gasBranches(in, model)
	var limit *gas.ChokedError
	if errors.As(err, &limit) {
		return false, nil
	}
	return err == nil, err
}

// lengthToChoking is the developed length [m] at which the asked flow reaches its
// limiting velocity; 0 where it does at the end that is known.
func (out *Result) lengthToChoking(in *Input, model GasModel) float64 {
	d := out.duct(in, out.Friction.Darcy.Value, model)
	first, err := d.across(d.start(), d.line.MassFlux)
	if err != nil {
		return 0
	}
	reaches, stops := 0.0, 1.0
	for range bisections {
		middle := (reaches + stops) / 2
		if _, err := integrate(d.line.Part(middle), first.State, d.known.AtOutlet, d.adiabatic); err == nil {
			reaches = middle
		} else {
			stops = middle
		}
	}
	return reaches * in.Length
}
