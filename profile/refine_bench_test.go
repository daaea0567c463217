package profile

import (
	"math/rand/v2"
	"testing"
)

// bent is hilly with samples as far apart as where a path crosses the lines of a
// grid of 30 m, and bends as over a grid whose heights differ by a metre or two.
func bent(samples int, antennaM float64) scene {
	s := hilly(samples, antennaM)
	random := rand.New(rand.NewPCG(1, 2))
	lengthM := 22 * float64(samples-1)
	s.link.Path.LengthM = lengthM
	for i := range s.p.DistanceM {
		s.p.DistanceM[i] = 22 * float64(i)
		if i > 0 && i < samples-1 {
			s.p.DistanceM[i] += 20 * (random.Float64() - 0.5)
		}
	}
	s.p.DistanceM[samples-1] = lengthM
	s.p.GroundM[samples-1] = s.p.GroundM[0]
	s.p.BendPerM = make([]float64, samples)
	for i := range samples - 1 {
		s.p.BendPerM[i] = random.NormFloat64() * 1.5 / (30 * 30)
	}
	return s
}

func BenchmarkRefine(b *testing.B) {
	for _, c := range []struct {
		name     string
		antennaM float64
	}{{"clear", 400}, {"grazing", 130}, {"obstructed", 50}} {
		b.Run(c.name, func(b *testing.B) {
			s, ws := bent(450, c.antennaM), &Workspace{}
			from := s.clone()
			b.ReportAllocs()
			for b.Loop() {
				// As a terrain fills it anew.
				s.p.restore(&from.p)
				refine(&s.link, &s.p, ws, false)
			}
			b.ReportMetric(float64(len(s.p.DistanceM)-450), "inserted")
		})
		b.Run(c.name+" whole", func(b *testing.B) {
			s, ws := bent(450, c.antennaM), &Workspace{}
			from := s.clone()
			b.ReportAllocs()
			for b.Loop() {
				s.p.restore(&from.p)
				if _, err := Assess(&s.link, &s.p, ws); err != nil {
					b.Fatal(err)
				}
			}
		})
		b.Run(c.name+" straight", func(b *testing.B) {
			s, ws := bent(450, c.antennaM), &Workspace{}
			s.p.BendPerM = nil
			b.ReportAllocs()
			for b.Loop() {
				if _, err := Assess(&s.link, &s.p, ws); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// restore copies the samples of another profile into p's memory.
func (p *Profile) restore(from *Profile) {
	p.DistanceM = append(p.DistanceM[:0], from.DistanceM...)
	p.GroundM = append(p.GroundM[:0], from.GroundM...)
	p.CoverM = append(p.CoverM[:0], from.CoverM...)
	p.BendPerM = append(p.BendPerM[:0], from.BendPerM...)
	p.SourceIndex = append(p.SourceIndex[:0], from.SourceIndex...)
}
