package api

import (
	"embed"
	"net/http"
	"path"

	"github.com/labstack/echo/v4"
)

// docs is the browsable form of the document: Swagger UI (Apache-2.0, its licence
// beside it) and a page of our own around it. It needs no internet.
//
//go:embed docs
var docs embed.FS

// docsPolicy lets the page load from this server alone.
const docsPolicy = "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self' data:; connect-src 'self'; font-src 'self'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'"

var docsTypes = map[string]string{".html": "text/html; charset=utf-8", ".js": "text/javascript; charset=utf-8", ".css": "text/css; charset=utf-8"}

// docsFiles are what the page is made of, by the path that asks for them.
var docsFiles = map[string]string{
	"/docs": "docs/index.html", "/docs/init.js": "docs/init.js", "/docs/page.css": "docs/page.css",
	"/docs/swagger-ui-bundle.js": "docs/swagger-ui-bundle.js", "/docs/swagger-ui.css": "docs/swagger-ui.css",
}

func (a *API) docsRoutes() error {
	for route, file := range docsFiles {
		body, err := docs.ReadFile(file)
		if err != nil {
			return err
		}
		a.get(route, page(docsTypes[path.Ext(file)], body))
	}
	return nil
}

// page answers a part of the page, under its policy.
func page(contentType string, body []byte) echo.HandlerFunc {
	return func(c echo.Context) error {
		if _, err := readQuery(c.Request().URL.RawQuery); err != nil {
			return err
		}
		h := c.Response().Header()
		h.Set("Content-Type", contentType)
		h.Set("Content-Security-Policy", docsPolicy)
		h.Set("Referrer-Policy", "no-referrer")
		h.Set("Cache-Control", "no-cache")
		return send(c, http.StatusOK, body)
	}
}
