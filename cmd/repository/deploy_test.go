package repository

import (
	"io/fs"
	"strings"
	"testing"

	"go.yaml.in/yaml/v3"
)

// The compose file and the image are what the README of deploy says: read-only, no
// rights, one machine, and a place for the spool.
func TestDeployment(t *testing.T) {
	data, err := fs.ReadFile(house, "deploy/compose.yaml")
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Services map[string]struct {
			Build       string
			ReadOnly    bool     `yaml:"read_only"`
			CapDrop     []string `yaml:"cap_drop"`
			SecurityOpt []string `yaml:"security_opt"`
			Tmpfs       []string
			Ports       []string
			Environment map[string]string
			Command     []string
			Grace       string `yaml:"stop_grace_period"`
			Restart     string
		}
	}
	decoder := yaml.NewDecoder(strings.NewReader(string(data)))
	decoder.KnownFields(true)
	if err := decoder.Decode(&file); err != nil {
		t.Fatal(err)
	}
	s := file.Services["borewright"]
	if !s.ReadOnly || len(s.CapDrop) != 1 || s.CapDrop[0] != "ALL" || len(s.Tmpfs) != 1 || !strings.HasPrefix(s.Tmpfs[0], "/tmp:") || len(s.Ports) != 1 || !strings.HasPrefix(s.Ports[0], "127.0.0.1:") {
		t.Errorf("%+v", s)
	}
	for name := range s.Environment {
		if !strings.HasPrefix(name, "BOREWRIGHT_") {
			t.Errorf("%s is no setting", name)
		}
	}
	image, err := fs.ReadFile(house, "Dockerfile")
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"FROM scratch", "USER 65532:65532", "CGO_ENABLED=0", `HEALTHCHECK`, `"/borewright", "healthcheck"`, "--auth=off"} {
		if !strings.Contains(string(image), want) {
			t.Errorf("the Dockerfile has no %s", want)
		}
	}
}
