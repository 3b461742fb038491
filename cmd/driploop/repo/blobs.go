package repo

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os/exec"
	"slices"
	"strconv"
	"strings"
	"sync"

	"driploop/catalog/source"
)

const (
	// window is how many ids are written to git ahead of their answers. That many
	// must fit into a pipe (4096 bytes at the least, 65 an id), as nothing reads
	// the answers while ids are written.
	window = 32
	// discardable is the largest blob, in bytes, that is read to be thrown away.
	// Starting git anew is quicker for a larger one: a few megabytes in a
	// repository can unpack to any size.
	discardable = 8 << 20
)

// blobs reads blobs through one long-lived git cat-file, which answers in the
// order of the ids it is given. Besides the id that is wanted now it is given
// those that are likely wanted next, and works on them while the caller is busy
// with the first.
//
// git dies of an object that it cannot read. Only that object is lost: the next
// read starts a new one.
type blobs struct {
	ctx context.Context // ends git; of Open
	git git

	mu     sync.Mutex
	closed bool
	proc   *catFile // nil before the first read and after git has died
	asked  []string // ids git was given and has not answered, oldest first
	held   []answer // answers that nobody has collected, oldest first
}

// catFile is a running git.
type catFile struct {
	cmd       *exec.Cmd
	in        io.WriteCloser
	out       *bufio.Reader
	complaint firstBytes
}

// answer is what git has about one id. blob is nil where size is above source.MaxFile.
type answer struct {
	id   string
	blob []byte
	size int64
	err  error
}

func newBlobs(ctx context.Context, g git) *blobs { return &blobs{ctx: ctx, git: g} }

// read returns the answer about id and has git begin on the ids ahead.
func (b *blobs) read(id string, ahead []string) answer {
	b.mu.Lock()
	defer b.mu.Unlock()
	for {
		if a, ok := b.collect(id); ok {
			return a
		}
		if err := b.ask(id, ahead); err != nil {
			return answer{id: id, err: err}
		}
		b.held = append(b.held, b.receive())
	}
}

// collect takes the answer about id out of those held. Answers that were asked
// for in vain make room for new ones.
func (b *blobs) collect(id string) (answer, bool) {
	i := slices.IndexFunc(b.held, func(a answer) bool { return a.id == id })
	if i < 0 {
		b.held = b.held[max(0, len(b.held)-window):]
		return answer{}, false
	}
	a := b.held[i]
	b.held = slices.Delete(b.held, i, i+1)
	return a, true
}

// ask gives git the id, and ids from ahead once half the window has been answered.
func (b *blobs) ask(id string, ahead []string) error {
	if err := b.begin(); err != nil {
		return err
	}
	var ids []string
	if !slices.Contains(b.asked, id) {
		ids = append(ids, id)
	}
	if len(b.asked) < window/2 {
		for _, next := range ahead[:min(len(ahead), window-len(b.asked))] {
			known := slices.ContainsFunc(b.held, func(a answer) bool { return a.id == next })
			if !known && next != id && !slices.Contains(b.asked, next) {
				ids = append(ids, next)
			}
		}
	}
	if len(ids) == 0 {
		return nil
	}
	b.asked = append(b.asked, ids...)
	// Where git has died the write fails, and so does receive, which says why.
	_, _ = io.WriteString(b.proc.in, strings.Join(ids, "\n")+"\n")
	return nil
}

// begin starts git where it does not run.
func (b *blobs) begin() error {
	if b.closed {
		return errors.New("the repository is closed")
	}
	if b.proc != nil {
		return nil
	}
	// The threshold has git stream a larger blob instead of unpacking it in
	// memory (400 MB of zeros in a pack: 14 MB of memory instead of 414).
	cmd := b.git.command(b.ctx, "-c", "core.bigFileThreshold=1m", "cat-file", "--batch")
	p := &catFile{cmd: cmd}
	cmd.Stderr = &p.complaint
	in, err := cmd.StdinPipe()
	if err != nil {
		return err
	}
	out, err := cmd.StdoutPipe()
	if err != nil {
		return err
	}
	if err := cmd.Start(); err != nil {
		return explain(b.ctx, "start git", err, p.complaint)
	}
	p.in, p.out = in, bufio.NewReader(out)
	b.proc = p
	return nil
}

// receive reads the answer about the oldest id asked.
func (b *blobs) receive() answer {
	a := answer{id: b.asked[0]}
	b.asked = b.asked[1:]
	a.blob, a.size, a.err = b.proc.next(a.id)
	switch {
	case a.err != nil:
		a.err = b.git.adviseObjects(b.ctx, b.died(a))
	case a.size > discardable:
		b.end()
	}
	return a
}

// errMissing is git's answer about an object that it does not find or cannot begin to read.
var errMissing = errors.New("it is missing from the repository or damaged")

// next reads one answer: "ID blob SIZE", the bytes, a newline; or "ID missing".
func (p *catFile) next(id string) (blob []byte, size int64, err error) {
	line, err := p.out.ReadString('\n')
	if err != nil {
		return nil, 0, err
	}
	head := strings.Fields(line)
	if len(head) == 2 && head[1] == "missing" {
		return nil, 0, errMissing
	}
	if len(head) != 3 || head[0] != id || head[1] != "blob" {
		return nil, 0, fmt.Errorf("git answered %q for a blob", clean(strings.TrimSpace(line)))
	}
	size, err = strconv.ParseInt(head[2], 10, 64)
	switch {
	case err != nil:
		return nil, 0, err
	case size > discardable:
		return nil, size, nil
	case size > source.MaxFile:
		_, err = io.CopyN(io.Discard, p.out, size)
	default:
		blob = make([]byte, size)
		_, err = io.ReadFull(p.out, blob)
	}
	if err == nil {
		_, err = p.out.Discard(1)
	}
	return blob, size, err
}

// died ends git after a failed answer and says what was the matter. It is ended
// also where it could go on, so that the first complaint of a git is always about
// the object that failed.
func (b *blobs) died(a answer) error {
	doing := "read blob " + a.id
	p := b.proc
	b.proc, b.asked = nil, nil
	_ = p.in.Close()
	ended := errors.Is(a.err, io.EOF) || errors.Is(a.err, io.ErrUnexpectedEOF)
	if !ended {
		_ = p.cmd.Process.Kill()
	}
	err := p.cmd.Wait()
	switch {
	case ended && err != nil:
		return explain(b.ctx, doing, err, p.complaint)
	case errors.Is(a.err, errMissing) && len(p.complaint.kept) > 0:
		return &Refusal{Doing: doing, Says: a.err.Error() + ": git: " + p.complaint.first(nil)}
	case errors.Is(a.err, errMissing):
		return &Refusal{Doing: doing, Says: a.err.Error()}
	}
	return fmt.Errorf("%s: %w", doing, a.err)
}

// end stops git and forgets what it was asked: who still wants it asks again.
func (b *blobs) end() {
	p := b.proc
	b.proc, b.asked = nil, nil
	_ = p.in.Close()
	_ = p.cmd.Process.Kill()
	_ = p.cmd.Wait() // only to let go of it
}

func (b *blobs) close() {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.closed, b.held = true, nil
	if b.proc != nil {
		b.end()
	}
}
