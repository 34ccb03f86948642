package units

// System is a set of units that a report is written in, one for each kind.
type System uint8

// The systems of units. Plant writes kPa, m3/h, mm, degC and mPa.s, and keeps
// Pa/m for gradients; US writes psi, gal_us/min, ft (lengths, diameters and
// roughnesses alike, so that one kind has one unit), degF, cP and psi/100ft.
const (
	SI System = iota
	Plant
	US
	systems
)

var systemNames = [systems]string{"si", "plant", "us"}

// SystemByName finds a system by its name in the contract.
func SystemByName(name string) (System, bool) {
	for i, n := range systemNames {
		if n == name {
			return System(i), true
		}
	}
	return 0, false
}

// String is the name of the system in the contract.
func (s System) String() string { return systemNames[min(s, systems-1)] }

// Unit is the unit of the kind in this system. [Parse] reads its spelling back,
// but for the Pa of a state pressure in SI: the field is absolute by contract,
// while a typed Pa must say so.
func (s System) Unit(kind Kind) Unit {
	if kind >= kinds {
		return Unit{text: "1", factor: one}
	}
	return tables().systems[min(s, systems-1)][kind]
}

func (t *table) loadSystems() {
	for k := Dimensionless; k < kinds; k++ {
		row := &kindTable[k]
		for s, text := range [systems]string{row.si, row.plant, row.us} {
			u, bad := t.readUnit(text, true)
			if k == StatePressure && System(s) == SI {
				u.basis = Absolute
			}
			if bad != nil || t.fits(&u, k) != nil {
				t.fault("is no unit of "+row.name, text)
			}
			t.systems[s][k] = u
		}
	}
}
