package api

import (
	"encoding/json"
	"net/http"

	"github.com/labstack/echo/v4"

	"borewright/service/document"
)

// convert answers one quantity in another unit, as a document or, for a cell of
// a spreadsheet, as one bare number.
func (a *API) convert(c echo.Context) error {
	q, err := readQuery(c.Request().URL.RawQuery, "quantity", "to", "pick")
	if err != nil {
		return err
	}
	quantity, to, pick := q[0], q[1], q[2]
	if wrong := convertViolations(quantity, to, pick); wrong != nil {
		return &document.Refusal{Violations: wrong}
	}
	got, err := a.service.Convert(quantity, to)
	if err != nil {
		return err
	}
	// A cell takes the number as JSON writes it: a decimal point in every locale,
	// all digits, no newline.
	var answer any = conversion{got.Value, got.Unit, got.Kind}
	contentType := "application/json"
	if pick == "value" {
		answer, contentType = got.Value, "text/plain; charset=utf-8"
	}
	body, err := json.Marshal(answer)
	if err != nil {
		return err
	}
	c.Response().Header().Set("Content-Type", contentType)
	return send(c, http.StatusOK, body)
}

type conversion struct {
	Value        float64 `json:"value"`
	Unit         string  `json:"unit"`
	QuantityKind string  `json:"quantity_kind"`
}

func convertViolations(quantity, to, pick string) []document.Violation {
	var wrong []document.Violation
	if quantity == "" {
		wrong = append(wrong, document.Violation{Parameter: "quantity", Code: "missing", Detail: "say what to convert, a number with its unit: quantity=120 gal_us/min"})
	}
	if to == "" {
		wrong = append(wrong, document.Violation{Parameter: "to", Code: "missing", Detail: "say the unit to convert to: to=m3/h"})
	}
	if pick != "" && pick != "value" {
		wrong = append(wrong, document.Violation{Parameter: "pick", Code: "unknown_value", Detail: "only pick=value can be picked here"})
	}
	return wrong
}
