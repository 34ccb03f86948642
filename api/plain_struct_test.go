package api_test

import (
	"encoding/json"
	"reflect"
	"strconv"
	"strings"
	"testing"
)

// plainStruct makes a value of a plain struct type, with float64, string and
// nested struct fields in the order of the document, that encoding/json writes
// as the same document. Written out by hand it would drift from the answer, and
// the baseline with it.
func plainStruct(t testing.TB, document string) any {
	t.Helper()
	dec := json.NewDecoder(strings.NewReader(document))
	dec.UseNumber()
	root := readNode(t, dec)
	value := reflect.New(root.plainType(t))
	root.fill(value.Elem())
	return value.Interface()
}

// node is one JSON value with the order of its names.
type node struct {
	scalar any // string, json.Number, bool or nil
	list   bool
	names  []string // of an object
	items  []node   // of an object or a list
}

func readNode(t testing.TB, dec *json.Decoder) node {
	t.Helper()
	token, err := dec.Token()
	if err != nil {
		t.Fatal(err)
	}
	open, ok := token.(json.Delim)
	if !ok {
		return node{scalar: token}
	}
	n := node{list: open == '[', items: []node{}}
	for dec.More() {
		if !n.list {
			name, err := dec.Token()
			if err != nil {
				t.Fatal(err)
			}
			n.names = append(n.names, name.(string))
		}
		n.items = append(n.items, readNode(t, dec))
	}
	if _, err := dec.Token(); err != nil {
		t.Fatal(err)
	}
	return n
}

func (n node) plainType(t testing.TB) reflect.Type {
	t.Helper()
	switch {
	case n.list:
		return reflect.SliceOf(n.elementType(t))
	case n.items != nil:
		return structType(t, n.names, n.items, nil)
	}
	switch n.scalar.(type) {
	case string:
		return reflect.TypeFor[string]()
	case json.Number:
		return reflect.TypeFor[float64]()
	case bool:
		return reflect.TypeFor[bool]()
	}
	return reflect.TypeFor[*float64]() // null
}

// elementType is the type of a list's elements. Objects that lack some of the
// names of others share one type, with the missing ones left out when empty.
func (n node) elementType(t testing.TB) reflect.Type {
	t.Helper()
	if len(n.items) == 0 {
		return reflect.TypeFor[string]()
	}
	if n.items[0].items == nil || n.items[0].list {
		return n.items[0].plainType(t)
	}
	var names []string
	var items []node
	count := map[string]int{}
	for _, element := range n.items {
		for i, name := range element.names {
			if count[name]++; count[name] == 1 {
				names, items = append(names, name), append(items, element.items[i])
			}
		}
	}
	return structType(t, names, items, func(name string) bool { return count[name] < len(n.items) })
}

func structType(t testing.TB, names []string, items []node, optional func(string) bool) reflect.Type {
	t.Helper()
	fields := make([]reflect.StructField, len(names))
	for i, name := range names {
		tag := name
		if optional != nil && optional(name) {
			tag += ",omitempty"
		}
		fields[i] = reflect.StructField{Name: "F" + strconv.Itoa(i), Type: items[i].plainType(t), Tag: reflect.StructTag(`json:"` + tag + `"`)}
	}
	return reflect.StructOf(fields)
}

func (n node) fill(v reflect.Value) {
	switch {
	case n.list:
		v.Set(reflect.MakeSlice(v.Type(), len(n.items), len(n.items)))
		for i, item := range n.items {
			item.fill(v.Index(i))
		}
	case n.items != nil:
		for i, name := range n.names {
			n.items[i].fill(fieldTagged(v, name))
		}
	default:
		switch s := n.scalar.(type) {
		case string:
			v.SetString(s)
		case bool:
			v.SetBool(s)
		case json.Number:
			f, _ := s.Float64() // a JSON number that an answer holds fits
			v.SetFloat(f)
		}
	}
}

func fieldTagged(v reflect.Value, name string) reflect.Value {
	for i := range v.NumField() {
		if tag, _, _ := strings.Cut(v.Type().Field(i).Tag.Get("json"), ","); tag == name {
			return v.Field(i)
		}
	}
	panic("no field for " + name)
}

func TestPlainStructWritesTheSameDocument(t *testing.T) {
	for _, document := range []string{
		`{"b":{"x":0.15,"y":null,"z":-3e-12},"a":["turbulent"],"ok":true,"none":[],"units":{"x":"m","q":"m3/s"}}`,
		`{"notes":[{"code":"a","level":"info"},{"code":"b","level":"caution","pointer":"#/length"}],"id":"CHW-101"}`,
	} {
		if got := encode(t, plainStruct(t, document)); got != document {
			t.Errorf("%s becomes %s", document, got)
		}
	}
}
