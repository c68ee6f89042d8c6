//go:build peers

package read_test

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"testing"
	"time"

	"lobewright/gcode/read"
)

// long is a program of so many blocks of a polygon, as a cam cut in lines has them.
func long(blocks int) []byte {
	var b bytes.Buffer
	b.WriteString("%\nO1\nN10 G21 G17 G90 G40 G49 G80 G94 G54\nN20 G0 X60.000 Y0.000 Z5.000\nN30 G1 Z-1.000 F300.000\n")
	for i := range blocks {
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / 1000)
		fmt.Fprintf(&b, "N%d G1 X%.3f Y%.3f\n", 40+10*(i%9000), 60*cos, 60*sin)
	}
	b.WriteString("M30\n%\n")
	return b.Bytes()
}

// BenchmarkPeerReading reads a program of 100 000 blocks, and lets the RS274/NGC interpreter do so in the same run, its start with an empty
// program taken off. It prints how many times as long that takes; that interpreter also prints what it reads, to nowhere.
func BenchmarkPeerReading(b *testing.B) {
	data := long(100_000)
	dir := b.TempDir()
	interpret := func(data []byte) time.Duration {
		file := filepath.Join(dir, "long.ngc")
		if err := os.WriteFile(file, data, 0o644); err != nil {
			b.Fatal(err)
		}
		cmd := exec.Command("rs274", "-g", file)
		cmd.Env = append(os.Environ(), "HOME="+dir)
		start := time.Now()
		if err := cmd.Run(); err != nil {
			b.Fatal(err)
		}
		return time.Since(start)
	}
	var ours, theirs time.Duration
	for b.Loop() {
		start := time.Now()
		p, err := read.Parse(data)
		ours += time.Since(start)
		if err != nil || len(p.Moves) != 100_002 {
			b.Fatal(err)
		}
		theirs += interpret(data) - interpret(long(0))
	}
	b.ReportMetric(theirs.Seconds()/ours.Seconds(), "rs274/ours")
	b.ReportMetric(ours.Seconds()/float64(b.N)*1e3, "ms-ours")
}
