package service_test

import (
	"testing"

	"borewright/service"
	"borewright/service/document"
)

// typical is the first line of the invented plant, as a person writes it.
const typical = `{"id": "CHW-101", "title": "Invented: chilled water, energy centre to bottling hall",
 "section": {"shape": "pipe", "standard": "ASME B36.10M", "size": "DN 150", "schedule": 40},
 "fluid": {"density": "999.9 kg/m3", "dynamic_viscosity": "1.47 mPa.s", "vapour_pressure": "9.35 mbara"},
 "flow": {"volume_flow": "120 m3/h"}, "roughness": "0.045 mm", "length": "84 m", "rise": "3.2 m",
 "fittings": [{"loss_coefficient": 0.24, "count": 6}, {"loss_coefficient": 0.15, "count": 2}, {"rated_drop": "18 kPa", "rated_flow": "150 m3/h"}],
 "inlet_pressure": "4.2 barg"}`

// BenchmarkAnswerJSON is one request from bytes to bytes, without HTTP.
func BenchmarkAnswerJSON(b *testing.B) {
	s := service.New()
	body := []byte(typical)
	var out []byte
	b.ReportAllocs()
	for b.Loop() {
		var err error
		if out, err = s.AnswerJSON(out[:0], body, document.SegmentDoor); err != nil {
			b.Fatal(err)
		}
	}
	b.SetBytes(int64(len(out)))
}
