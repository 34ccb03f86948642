// The document is shown from this server; nothing is asked of anyone else.
window.addEventListener("load", () => {
  SwaggerUIBundle({
    url: "/openapi.json",
    dom_id: "#contract",
    deepLinking: true,
    docExpansion: "list",
    defaultModelsExpandDepth: 0,
    tryItOutEnabled: true,
    validatorUrl: null,
  });
});
