package document

import "fmt"

// StructureAccepts tells whether the body can be read as one document without
// duplicate names and overflowing numbers, and whether the reader then finds all
// that the OpenAPI document states formally. What only the meaning of the values
// forbids (an unknown unit) is not asked here.
func StructureAccepts(body []byte, door Door) (readable, accepted bool) {
	var req Request
	err := Read(body, door, &req)
	refusal, refused := err.(*Refusal)
	if refused && refusal.Malformed || len(req.decoder.duplicates) > 0 {
		return false, false
	}
	for i := range req.decoder.nodes {
		if req.decoder.nodes[i].kind == numberNode {
			if _, ok := req.decoder.float(int32(i)); !ok {
				return false, false
			}
		}
	}
	return true, req.decoder.structural == 0
}

// Scans tells whether the body is one JSON document, and what is wrong if not.
func Scans(body []byte) (bool, string) {
	var t tree
	if err := t.scan(body); err != nil {
		return false, err.text
	}
	return true, ""
}

// Strings gives the text of every string of a document, names included.
func Strings(body []byte) (list []string) {
	var t tree
	if t.scan(body) != nil {
		return nil
	}
	for i := range t.nodes {
		if n := &t.nodes[i]; n.kind == stringNode {
			list = append(list, t.string(int32(i)))
		}
	}
	return list
}

// Shown prints what a request holds, without the memory of its decoder.
func Shown(req *Request) string {
	r := *req
	r.decoder = decoder{}
	return fmt.Sprintf("%+v", r)
}
