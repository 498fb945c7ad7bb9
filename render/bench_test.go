package render

import (
	"context"
	"syscall"
	"testing"
	"time"
)

// cpuTime is the processor time of this process so far.
func cpuTime() time.Duration {
	var u syscall.Rusage
	if syscall.Getrusage(syscall.RUSAGE_SELF, &u) != nil {
		return 0
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}

// benchmarkScene times frames that go round the turntable.
func benchmarkScene(b *testing.B, name string, look Look) {
	s, camera := benchScene(b, name)
	dst := newImage(1920, 1080)
	var r Renderer
	draw := func(step int) {
		if err := r.Draw(context.Background(), dst, s, camera(step%36), look, Quality{Samples: 4}, Band{}); err != nil {
			b.Fatal(err)
		}
	}
	for step := range 36 {
		draw(step)
	}
	b.ReportAllocs()
	b.ResetTimer()
	start := cpuTime()
	for i := 0; b.Loop(); i++ {
		draw(i)
	}
	b.ReportMetric(float64(cpuTime()-start)/1e6/float64(b.N), "cpu-ms/op")
}

var white = Color{255, 255, 255}

func BenchmarkS1(b *testing.B) { benchmarkScene(b, "S1", PlainLook(white)) }
func BenchmarkS2(b *testing.B) { benchmarkScene(b, "S2", PlainLook(white)) }
func BenchmarkS3(b *testing.B) { benchmarkScene(b, "S3", PlainLook(white)) }

func BenchmarkS1Lit(b *testing.B) { benchmarkScene(b, "S1", LitLook(white)) }
func BenchmarkS2Lit(b *testing.B) { benchmarkScene(b, "S2", LitLook(white)) }
func BenchmarkS3Lit(b *testing.B) { benchmarkScene(b, "S3", LitLook(white)) }

func BenchmarkS1Ink(b *testing.B) { benchmarkScene(b, "S1", InkLook(white, Color{})) }
func BenchmarkS2Ink(b *testing.B) { benchmarkScene(b, "S2", InkLook(white, Color{})) }
func BenchmarkS3Ink(b *testing.B) { benchmarkScene(b, "S3", InkLook(white, Color{})) }
