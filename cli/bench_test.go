package cli

import (
	"context"
	"io"
	"strings"
	"testing"
)

// BenchmarkPlan plans the embedded example from its text to its workbook. It
// is to stay under 3 s on two processors.
func BenchmarkPlan(b *testing.B) {
	folder := b.TempDir()
	for b.Loop() {
		if code := run(context.Background(), []string{"plan", "--out", folder}, strings.NewReader(""), io.Discard, io.Discard); code > exitMissed {
			b.Fatalf("exit code %d", code)
		}
	}
}
