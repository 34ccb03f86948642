package segment

import "borewright/calc"

// EndError tells at which end an error belongs.
type EndError struct {
	End string // "inlet" or "outlet"
	Err error
}

func (e *EndError) Error() string { return e.End + ": " + e.Err.Error() }

// Unwrap gives the error of the end.
func (e *EndError) Unwrap() error { return e.Err }

// checkEnds refuses an end that is none, and a jet where the flow comes in.
func (in *Input) checkEnds() error {
	if in.Inlet.Kind > Reservoir {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "inlet", Value: float64(in.Inlet.Kind), Detail: "an inlet is a section or a reservoir"}
	}
	if in.Outlet.Kind > FreeDischarge {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "outlet", Value: float64(in.Outlet.Kind), Detail: "an outlet is a section, a reservoir or a free_discharge"}
	}
	return nil
}

func (out *Result) endVelocities(in *Input) error {
	var err error
	if out.Pressure.InletVelocity, err = out.endVelocity(&in.Inlet); err != nil {
		return &EndError{"inlet", err}
	}
	if out.Pressure.OutletVelocity, err = out.endVelocity(&in.Outlet); err != nil {
		return &EndError{"outlet", err}
	}
	return nil
}

// endVelocity is the velocity at one end: on the true flow area of the section
// there, full or partly full; 0 in a reservoir; a jet keeps the segment's own.
func (out *Result) endVelocity(e *End) (float64, error) {
	switch e.Kind {
	case Reservoir:
		return 0, nil
	case OtherSection:
		s, err := e.Section.Of()
		if err != nil {
			return 0, err
		}
		return out.Flow.VolumeFlow / s.FlowArea, nil
	}
	return out.Flow.Velocity, nil
}
