package openapi_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/getkin/kin-openapi/openapi3"
	"go.yaml.in/yaml/v3"

	"borewright/openapi"
)

// node is one mapping of the document.
type node = map[string]any

func parsed(t *testing.T) node {
	t.Helper()
	var tree node
	if err := yaml.Unmarshal(openapi.YAML(), &tree); err != nil {
		t.Fatal(err)
	}
	return tree
}

// at walks down by keys; a key that is not there gives nil.
func at(tree any, keys ...string) node {
	for _, k := range keys {
		m, ok := tree.(node)
		if !ok {
			return nil
		}
		tree = m[k]
	}
	m, _ := tree.(node)
	return m
}

// place is a schema of the document and where it stands.
type place struct {
	path   string
	schema node
	named  bool // directly under components/schemas
}

// schemas lists every schema that is written out; references are not followed,
// since what they name is listed by its own name.
func schemas(tree node) []place {
	var list []place
	for name, s := range at(tree, "components", "schemas") {
		list = within(list, "components/schemas/"+name, s, true)
	}
	for _, part := range []string{"paths", "components"} {
		list = carried(list, part, tree[part])
	}
	slices.SortFunc(list, func(a, b place) int { return strings.Compare(a.path, b.path) })
	return list
}

// carried finds the schemas of parameters, headers and media types.
func carried(list []place, path string, v any) []place {
	switch v := v.(type) {
	case node:
		for key, child := range v {
			switch {
			case key == "schema":
				list = within(list, path+"/schema", child, false)
			case key != "example" && key != "examples" && path+"/"+key != "components/schemas":
				list = carried(list, path+"/"+key, child)
			}
		}
	case []any:
		for i, child := range v {
			list = carried(list, fmt.Sprintf("%s/%d", path, i), child)
		}
	}
	return list
}

func within(list []place, path string, v any, named bool) []place {
	s, ok := v.(node)
	if !ok || s["$ref"] != nil {
		return list
	}
	list = append(list, place{path, s, named})
	for name, p := range at(s, "properties") {
		list = within(list, path+"/properties/"+name, p, false)
	}
	for _, key := range []string{"items", "additionalProperties", "not"} {
		list = within(list, path+"/"+key, s[key], false)
	}
	for _, key := range []string{"oneOf", "anyOf", "allOf"} {
		branches, _ := s[key].([]any)
		for i, b := range branches {
			list = within(list, fmt.Sprintf("%s/%s/%d", path, key, i), b, false)
		}
	}
	return list
}

func isNumeric(s node) bool { return s["type"] == "number" || s["type"] == "integer" }
func isObject(s node) bool  { return s["type"] == "object" || s["properties"] != nil }
func text(v any) string     { s, _ := v.(string); return strings.TrimSpace(s) }

// each makes a rule about the whole document of a rule about one schema.
func each(fault func(place) string) func(node) []string {
	return func(tree node) []string {
		var faults []string
		for _, p := range schemas(tree) {
			if f := fault(p); f != "" {
				faults = append(faults, p.path+": "+f)
			}
		}
		return faults
	}
}

// rule is one convention, and a deliberate fault that it must see.
type rule struct {
	name   string
	faults func(node) []string
	spoil  func(node) // one fault
	says   string     // part of what is said about it
}

func schemaOf(tree node, name string) node { return at(tree, "components", "schemas", name) }

var rules = []rule{
	{"objects are closed, or say why not", each(openObject),
		func(d node) { delete(schemaOf(d, "Circle"), "additionalProperties") }, "Circle: an object"},
	{"an open object gives its reason", each(openObject),
		func(d node) { delete(schemaOf(d, "OpenapiDocument"), "x-open") }, "OpenapiDocument: an object"},
	{"numbers have format double", each(func(p place) string {
		if p.schema["type"] == "number" && p.schema["format"] != "double" {
			return "a number without format double; generators make a float32 of it"
		}
		return ""
	}), func(d node) { schemaOf(d, "LengthInputNumber")["format"] = "float" }, "LengthInputNumber: a number without format"},
	{"numbers are bounded, or say why not", each(func(p place) string {
		bounded := p.schema["minimum"] != nil && p.schema["maximum"] != nil
		if isNumeric(p.schema) && !bounded && text(p.schema["x-unbounded"]) == "" {
			return "a number without minimum and maximum, and no x-unbounded with the reason"
		}
		return ""
	}), func(d node) { delete(schemaOf(d, "GravityInputNumber"), "maximum") }, "GravityInputNumber: a number without"},
	{"exclusive bounds stand with their bound", each(func(p place) string {
		for exclusive, bound := range map[string]string{"exclusiveMinimum": "minimum", "exclusiveMaximum": "maximum"} {
			if _, ok := p.schema[exclusive].(bool); p.schema[exclusive] != nil && (!ok || p.schema[bound] == nil) {
				return exclusive + " is true or false beside " + bound + " in OpenAPI 3.0"
			}
		}
		return ""
	}), func(d node) { schemaOf(d, "RatedFlowInputNumber")["exclusiveMinimum"] = 0 }, "exclusiveMinimum is true"},
	{"numbers name their unit", each(func(p place) string {
		if (isNumeric(p.schema) || p.schema["x-input"] != nil) && text(p.schema["x-unit"]) == "" {
			return `a number without x-unit; a ratio says "1"`
		}
		return ""
	}), func(d node) {
		delete(at(d, "components", "schemas", "AnsweredFlow", "properties", "velocity"), "x-unit")
	}, "velocity: a number without x-unit"},
	{"objects are named", each(func(p place) string {
		if isObject(p.schema) && !p.named {
			return "an object without a name; generators invent one for it"
		}
		return ""
	}), func(d node) {
		at(d, "components", "schemas", "SegmentRequest", "properties")["site"] = node{"type": "object", "additionalProperties": false}
	}, "site: an object without a name"},
	{"bodies are named", unnamedBodies,
		func(d node) {
			at(d, "paths", "/livez", "get", "responses", "200", "content", "application/json")["schema"] = node{"type": "string"}
		}, "application/json: a body without a named schema"},
	{"named schemas have a description", each(func(p place) string {
		if p.named && text(p.schema["description"]) == "" {
			return "a named schema without description"
		}
		return ""
	}), func(d node) { schemaOf(d, "Engine")["description"] = " " }, "Engine: a named schema without description"},
	{"named schemas have an example", each(func(p place) string {
		if p.named && p.schema["example"] == nil {
			return "a named schema without example"
		}
		return ""
	}), func(d node) { delete(schemaOf(d, "Vertex"), "example") }, "Vertex: a named schema without example"},
	{"examples keep their own schema", untrueExamples,
		func(d node) { schemaOf(d, "Rectangle")["example"] = node{"shape": "rectangle", "width": "5 m"} }, "Rectangle: its example"},
	{"operations are told in full", untoldOperations,
		func(d node) { delete(at(d, "paths", "/v1/convert", "get"), "summary") }, "/v1/convert get: no summary"},
	{"operations have names of their own", untoldOperations,
		func(d node) { at(d, "paths", "/livez", "get")["operationId"] = "readyz" }, "operationId readyz stands twice"},
	{"errors are problem documents", untoldOperations,
		func(d node) {
			at(d, "components", "responses", "BodyTooLarge")["content"] = node{"application/json": node{"example": node{}}}
		}, "413: an error that is no application/problem+json"},
	{"bodies have an example", untoldOperations,
		func(d node) {
			delete(at(d, "paths", "/v1/section", "post", "requestBody", "content", "application/json"), "example")
		}, "/v1/section post: request body without example"},
	{"the document is OpenAPI 3.0.3 and valid", invalid,
		func(d node) { d["openapi"] = "3.1.0" }, "3.1.0"},
	{"references lead somewhere", invalid,
		func(d node) { delete(at(d, "components", "schemas"), "Fingerprint") }, "Fingerprint"},
}

func openObject(p place) string {
	if isObject(p.schema) && p.schema["additionalProperties"] != false && text(p.schema["x-open"]) == "" {
		if _, ok := p.schema["additionalProperties"].(node); !ok {
			return "an object that is open, and no x-open with the reason"
		}
		return "an object whose members have free names, and no x-open with the reason"
	}
	return ""
}

func unnamedBodies(tree node) []string {
	var faults []string
	var walk func(path string, v any)
	walk = func(path string, v any) {
		m, _ := v.(node)
		for key, child := range m {
			for media := range at(m, "content") {
				if key == "content" && text(at(m, "content", media, "schema")["$ref"]) == "" {
					faults = append(faults, path+"/"+media+": a body without a named schema")
				}
			}
			walk(path+"/"+key, child)
		}
	}
	walk("paths", tree["paths"])
	walk("components/responses", at(tree, "components", "responses"))
	return faults
}

// loaded reads the tree as kin-openapi sees it.
func loaded(tree node) (*openapi3.T, error) {
	data, err := yaml.Marshal(tree)
	if err != nil {
		return nil, err
	}
	return openapi3.NewLoader().LoadFromData(data)
}

func invalid(tree node) []string {
	var faults []string
	if tree["openapi"] != "3.0.3" {
		faults = append(faults, fmt.Sprintf("openapi is %v; 3.1 breaks generators and costs the validator much", tree["openapi"]))
	}
	doc, err := loaded(tree)
	if err == nil {
		err = doc.Validate(openapi3.NewLoader().Context)
	}
	if err != nil {
		faults = append(faults, err.Error())
	}
	return faults
}

func untrueExamples(tree node) []string {
	doc, err := loaded(tree)
	if err != nil {
		return []string{err.Error()}
	}
	var faults []string
	for name, s := range doc.Components.Schemas {
		if s.Ref != "" {
			continue
		}
		if err := s.Value.VisitJSON(s.Value.Example, openapi3.MultiErrors()); err != nil {
			faults = append(faults, name+": its example: "+err.Error())
		}
	}
	return faults
}

func untoldOperations(tree node) []string {
	var faults []string
	seen := map[string]bool{}
	for path := range at(tree, "paths") {
		for method := range at(tree, "paths", path) {
			op := at(tree, "paths", path, method)
			where := path + " " + method + ": "
			for _, key := range []string{"operationId", "summary", "description"} {
				if text(op[key]) == "" {
					faults = append(faults, where+"no "+key)
				}
			}
			if tags, _ := op["tags"].([]any); len(tags) == 0 {
				faults = append(faults, where+"no tags")
			}
			if id := text(op["operationId"]); seen[id] {
				faults = append(faults, "operationId "+id+" stands twice")
			} else {
				seen[id] = true
			}
			faults = append(faults, untoldBodies(tree, op, where)...)
		}
	}
	return faults
}

func untoldBodies(tree, op node, where string) []string {
	var faults []string
	for media := range at(op, "requestBody", "content") {
		if at(op, "requestBody", "content", media)["example"] == nil {
			faults = append(faults, where+"request body without example")
		}
	}
	statuses := at(op, "responses")
	for _, wanted := range []string{"200", "422"} {
		if statuses[wanted] == nil {
			faults = append(faults, where+"status "+wanted+" is not documented")
		}
	}
	for status := range statuses {
		response := at(statuses, status)
		if ref := text(response["$ref"]); ref != "" {
			response = at(tree, strings.Split(strings.TrimPrefix(ref, "#/"), "/")...)
		}
		content := at(response, "content")
		if status >= "400" && (len(content) != 1 || content["application/problem+json"] == nil) {
			faults = append(faults, where+status+": an error that is no application/problem+json")
		}
		for media := range content {
			if at(content, media)["example"] == nil {
				faults = append(faults, where+status+": "+media+" without example")
			}
		}
	}
	return faults
}

func TestConventions(t *testing.T) {
	for _, r := range rules {
		t.Run(r.name, func(t *testing.T) {
			for _, f := range r.faults(parsed(t)) {
				t.Error(f)
			}
		})
	}
}

// TestConventionsSeeAFault shows every rule red once.
func TestConventionsSeeAFault(t *testing.T) {
	for _, r := range rules {
		t.Run(r.name, func(t *testing.T) {
			tree := parsed(t)
			r.spoil(tree)
			faults := strings.Join(r.faults(tree), "\n")
			if !strings.Contains(faults, r.says) {
				t.Errorf("a spoiled document gives %q, which does not say %q", faults, r.says)
			}
		})
	}
}
