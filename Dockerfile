# A static binary in an empty image: no shell, no libraries, no user but a number.
FROM golang:1.26 AS build
WORKDIR /src
COPY go.mod go.sum ./
RUN go mod download
COPY . .
RUN CGO_ENABLED=0 go build -trimpath -ldflags '-s -w' -o /borewright ./cmd/borewright

FROM scratch
COPY --from=build /borewright /borewright
USER 65532:65532
EXPOSE 8080
# 0.0.0.0 and --auth=off together mean: whoever reaches the published port may use
# the service, without a key and without being counted. Publish it to a trusted
# network only (docker run -p 127.0.0.1:8080:8080 keeps it on this machine), or
# put a proxy in front that asks who is there.
HEALTHCHECK --interval=10s --timeout=5s --start-period=2s CMD ["/borewright", "healthcheck", "--listen", "127.0.0.1:8080"]
ENTRYPOINT ["/borewright"]
CMD ["serve", "--listen", "0.0.0.0:8080", "--auth=off"]
