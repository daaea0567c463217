//go:build cgo

package assess

import (
	"context"
	"testing"

	"ridgehop/profile"
)

// A whole warm assessment with radio, availability and choice, without storage.
func BenchmarkJudgeRadio(b *testing.B) {
	service := NewService(rollingTerrain(b)).WithEquipment(equipped(b))
	request := rollingLink(300)
	request.FrequencyGHz = 18.7
	terminal := TerminalRequest{RadioName: "demo-backhaul-18ghz", AntennaName: "dish-0.6m-18ghz"}
	request.Radio = &RadioRequest{
		A: terminal, B: terminal, Choose: true,
		Target:  Target{CapacityMbps: 100, MarginDB: 10, AvailabilityPercent: 99.99},
		Climate: ClimateRequest{DN1: new(-200.0), RainRateMMH: new(30.0)},
	}
	var a Assessment
	var ws profile.Workspace
	b.ReportAllocs()
	for b.Loop() {
		if err := service.judge(context.Background(), request, &a, &ws, whole); err != nil {
			b.Fatal(err)
		}
	}
	if a.Radio == nil || !a.Radio.Report.Meets {
		b.Fatalf("the link does not work: %+v", a.Judgement.Reasons)
	}
}
