package service

// ConditionCodes lists the notes that a condition of calc triggers.
func ConditionCodes() (codes []string) {
	for i := range conditionNotes {
		codes = append(codes, conditionNotes[i].code)
	}
	return codes
}
