package flat

import (
	"strings"

	"borewright/service/document"
	"borewright/service/jsontext"
)

// appendFittings appends the fittings as a person writes them: entries parted by
// ";", each a loss_coefficient or a rated_drop with its rated_flow, and "*4" behind
// an entry for four of them:
//
//	loss_coefficient=1.5*2; rated_drop=5 kPa, rated_flow=20 m3/h
func appendFittings(dst []byte, text string, wrong *[]document.Violation) []byte {
	dst = append(dst, '[')
	start := len(dst)
	rest, more := text, true
	for more {
		var one string
		one, rest, more = strings.Cut(rest, ";")
		if one = strings.TrimSpace(one); one == "" && !more {
			break // a ";" may end the list
		}
		dst = appendFitting(comma(dst, start), one, wrong)
	}
	return append(dst, ']')
}

const fittingForms = "loss_coefficient=1.5*2 or rated_drop=5 kPa, rated_flow=20 m3/h, entries parted by ;"

func appendFitting(dst []byte, text string, wrong *[]document.Violation) []byte {
	refuse := func(code, detail string) {
		*wrong = append(*wrong, document.Violation{Parameter: "fittings", Code: code, Detail: detail})
	}
	dst = append(dst, '{')
	start := len(dst)
	members, count := cutCount(text)
	for one := range strings.SplitSeq(members, ",") {
		name, value, given := strings.Cut(one, "=")
		name, value = strings.TrimSpace(name), strings.TrimSpace(value)
		switch {
		case name == "" && !given:
			refuse(CodeBlank, "an entry of the fittings is blank; write "+fittingForms)
		case !given:
			refuse("not_known_yet", quoted(name)+" is no fitting known here: fittings by name are not offered yet; write "+fittingForms)
		case value == "":
			refuse(CodeBlank, "a value is missing for "+name+"; write "+fittingForms)
		default:
			dst = append(jsontext.AppendString(comma(dst, start), name), ':')
			dst = jsontext.AppendString(dst, value)
		}
	}
	if count != "" {
		dst = append(comma(dst, start), `"count":"`...)
		dst = append(append(dst, count...), '"')
	}
	return append(dst, '}')
}

func quoted(name string) string { return `"` + name + `"` }

// cutCount cuts "*4" from the end of an entry.
func cutCount(text string) (entry, count string) {
	i := strings.LastIndexByte(text, '*')
	if i < 0 {
		return text, ""
	}
	count = strings.TrimSpace(text[i+1:])
	if count == "" || strings.Trim(count, "0123456789") != "" {
		return text, ""
	}
	return text[:i], count
}
