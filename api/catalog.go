package api

import (
	"encoding/json"
	"strings"

	"github.com/labstack/echo/v4"

	"borewright/service"
)

// catalog lists what a request can name: the kinds, or the entries of one.
func (a *API) catalog(c echo.Context) error {
	if _, err := readQuery(c.Request().URL.RawQuery); err != nil {
		return err
	}
	list, ok := a.service.Catalog(c.Param("kind"))
	if !ok {
		var kinds []string
		for _, k := range service.CatalogKinds() {
			kinds = append(kinds, k.Name)
		}
		return &refusal{kind: notFound, detail: "the catalogue has " + strings.Join(kinds, ", ")}
	}
	body, err := json.Marshal(struct {
		Entries []service.CatalogEntry `json:"entries"`
	}{list})
	if err != nil {
		return err
	}
	return sendAs(c, "application/json", body)
}
