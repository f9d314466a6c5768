package main

import (
	"fmt"
	"io"
	"sync"
	"sync/atomic"
	"time"

	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"
)

// patience is how long work may last before a progress bar appears.
const patience = 2 * time.Second

// progress shows how far a piece of work has come: a bar on a terminal once the
// work has lasted a while, otherwise nothing.
type progress struct {
	mu      sync.Mutex
	out     io.Writer
	observe func(done, total int, what string)
	timer   *time.Timer
	bars    *mpb.Progress
	bar     *mpb.Bar
	done    int
	total   int
	label   atomic.Pointer[string] // read while the bar is drawn, so not under mu
}

// progress begins a piece of work; stop ends it.
func (p *program) progress() *progress {
	g := &progress{out: p.stderr, observe: p.observe}
	working := "working"
	g.label.Store(&working)
	if p.terminal {
		g.timer = time.AfterFunc(p.patience, g.appear)
	}
	return g
}

// update tells how far the work has come.
func (g *progress) update(done, total int, what string) {
	label := fmt.Sprintf("%s %d/%d", what, done, total)
	g.label.Store(&label)
	g.mu.Lock()
	g.done, g.total = done, total
	g.draw()
	g.mu.Unlock()
	if g.observe != nil {
		g.observe(done, total, what)
	}
}

// draw hands the state to the bar. The caller holds mu.
func (g *progress) draw() {
	if g.bar != nil {
		g.bar.SetTotal(int64(g.total), false)
		g.bar.SetCurrent(int64(g.done))
	}
}

// appear shows the bar.
func (g *progress) appear() {
	g.mu.Lock()
	defer g.mu.Unlock()
	g.bars = mpb.New(mpb.WithOutput(g.out), mpb.WithWidth(64), mpb.WithAutoRefresh())
	// a bar of total 0 never completes by itself, so its total may change
	g.bar = g.bars.AddBar(0, mpb.PrependDecorators(decor.Any(func(decor.Statistics) string { return *g.label.Load() })),
		mpb.AppendDecorators(decor.Elapsed(decor.ET_STYLE_GO)))
	g.draw()
}

// stop ends the work and removes the bar.
func (g *progress) stop() {
	if g.timer == nil {
		return
	}
	g.timer.Stop()
	g.mu.Lock()
	bar, bars := g.bar, g.bars
	g.bar = nil
	g.mu.Unlock()
	if bar != nil {
		bar.Abort(true)
		bars.Wait()
	}
}
