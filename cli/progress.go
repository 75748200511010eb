package cli

import (
	"os"
	"sync"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"
)

// progress shows how far long work has come, on a terminal only: anywhere else
// it shows nothing. It may be told from several goroutines.
type progress struct {
	program *program
	mutex   sync.Mutex
	bar     *progressbar.ProgressBar
	far     int
}

// newProgress is the progress of one command.
func (p *program) newProgress() *progress {
	return &progress{program: p}
}

// terminal says whether someone watches standard error.
func (p *program) terminal() bool {
	f, ok := p.stderr.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}

// start begins a new stretch of work of unknown length.
func (g *progress) start(what string) {
	g.mutex.Lock()
	defer g.mutex.Unlock()
	if !g.program.terminal() {
		return
	}
	g.clear()
	g.bar = progressbar.NewOptions(-1,
		progressbar.OptionSetWriter(g.program.stderr), progressbar.OptionSetDescription(what),
		progressbar.OptionClearOnFinish(), progressbar.OptionSetWidth(30), progressbar.OptionThrottle(100_000_000))
	g.far = 0
}

// at says that done of total is done. Calls may come out of order.
func (g *progress) at(done, total int) {
	g.mutex.Lock()
	defer g.mutex.Unlock()
	if g.bar == nil || done <= g.far {
		return
	}
	if g.far == 0 {
		g.bar.ChangeMax(total)
	}
	g.far = done
	_ = g.bar.Set(done) // a bar that cannot be drawn stops nothing
}

// say changes what is being done.
func (g *progress) say(what string) {
	g.mutex.Lock()
	defer g.mutex.Unlock()
	if g.bar != nil {
		g.bar.Describe(what)
	}
}

// stop wipes the bar.
func (g *progress) stop() {
	g.mutex.Lock()
	defer g.mutex.Unlock()
	g.clear()
}

func (g *progress) clear() {
	if g.bar != nil {
		_ = g.bar.Finish()
		_ = g.bar.Clear()
	}
	g.bar = nil
}
