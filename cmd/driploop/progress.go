package main

import (
	"fmt"
	"io"
	"os"
	"strconv"
	"strings"
	"sync/atomic"
	"time"

	"golang.org/x/term"

	"driploop/rules"
)

// Work that takes longer than patience says how far it has come, again and again.
const (
	patience = time.Second
	again    = 100 * time.Millisecond
)

// meter is one line of a terminal that says how far long work has come. The line is
// written over itself and wiped before anything else is written.
type meter struct {
	to    io.Writer
	start time.Time
	room  int // columns of the terminal; 0 where it does not say
	at    atomic.Pointer[stand]
	last  string        // what the line says; "" where there is none
	stop  chan struct{} // closed when the work is done
	over  chan struct{} // closed when the line is wiped
}

// stand is how far the work has come; total is 0 where nobody can count it.
type stand struct {
	what        string
	done, total int
}

func (s *stand) String() string {
	if s.total == 0 {
		return s.what
	}
	return fmt.Sprintf("%s %s of %s", s.what, grouped(s.done), grouped(s.total))
}

// grouped prints a number with its thousands apart: 1,234.
func grouped(n int) string {
	s := strconv.Itoa(n)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + "," + s[i:]
	}
	return s
}

// progress is what the firm is to tell of its work, or nil where nobody watches: with
// --quiet, and where standard error is no terminal.
func (c *Command) progress() rules.Progress {
	f, ok := c.Stderr.(*os.File)
	if !ok || c.shared.quiet || c.Env("TERM") == "dumb" || !term.IsTerminal(int(f.Fd())) {
		return nil
	}
	if c.meter == nil {
		room, _, err := term.GetSize(int(f.Fd()))
		if err != nil {
			room = 0
		}
		c.meter = &meter{to: f, start: c.Now(), room: room, stop: make(chan struct{}), over: make(chan struct{})}
		go c.meter.run(c.Now)
	}
	return c.meter.tell
}

// told is progress for work that a command does itself.
func (c *Command) told(what string, done, total int) {
	if c.meter != nil {
		c.meter.tell(what, done, total)
	}
}

func (m *meter) tell(what string, done, total int) { m.at.Store(&stand{what, done, total}) }

// run shows the line until the work is done.
func (m *meter) run(now func() time.Time) {
	defer close(m.over)
	tick := time.NewTicker(again)
	defer tick.Stop()
	for {
		select {
		case <-m.stop:
			m.wipe()
			return
		case <-tick.C:
			m.show(now())
		}
	}
}

// show writes the line where the work has taken long and the line would be another.
func (m *meter) show(now time.Time) {
	at := m.at.Load()
	if at == nil || now.Sub(m.start) < patience {
		return
	}
	line := at.String()
	if line == m.last || m.room > 0 && len(line) >= m.room {
		return
	}
	rest := max(0, len(m.last)-len(line)) // of the line before
	fmt.Fprintf(m.to, "\r%s%s%s", line, strings.Repeat(" ", rest), strings.Repeat("\b", rest))
	m.last = line
}

// wipe leaves the line as it was before.
func (m *meter) wipe() {
	if m.last != "" {
		fmt.Fprintf(m.to, "\r%s\r", strings.Repeat(" ", len(m.last)))
		m.last = ""
	}
}

// settled ends the meter: what is written from now on is the result, or a message.
func (c *Command) settled() {
	if c.meter != nil {
		close(c.meter.stop)
		<-c.meter.over
		c.meter = nil
	}
}
