// Command driploop checks install plans for cellular antennas, signal boosters
// and routers, and takes off what they need.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"time"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"driploop/catalog/source"
	"driploop/cmd/driploop/show"
)

// Command is one call of the program with everything it touches.
type Command struct {
	Stdin          io.Reader
	Stdout, Stderr io.Writer
	Now            func() time.Time
	Env            func(string) string
	Limit          func(int64) int64 // sets the memory limit of the process and gives back the last, as debug.SetMemoryLimit; nil leaves it alone

	shared shared
	meter  *meter // while a terminal is told how far long work has come
	held   bool   // a hold stands
	bare   bool   // rules that need the shelf are left out
}

// shared are the flags that all commands have.
type shared struct {
	root, as, out, at string
	limitsFrom        string
	stockFrom         string
	today, color      string
	quiet             bool
}

// The exit statuses.
const (
	statusClear  = 0 // nothing holds work up
	statusHeld   = 1 // a hold stands
	statusCall   = 2 // the call or an input can't be used
	statusFailed = 3 // the tool failed; also a failed write
)

// failure is an error of the tool itself, not of the call or its input.
type failure struct{ error }

func (f failure) Unwrap() error { return f.error }

// Main runs the program and returns its exit status.
func (c *Command) Main(args []string) int {
	root := c.tree()
	root.SetArgs(args)
	root.SetIn(c.Stdin)
	out := &watched{to: c.Stdout}
	root.SetOut(out)
	root.SetErr(c.Stderr)
	err := root.ExecuteContext(context.Background())
	c.settled()
	if out.err != nil {
		err = failure{fmt.Errorf("writing the result: %w", out.err)}
	}
	switch {
	case err == nil && c.held:
		return statusHeld
	case err == nil:
		return statusClear
	}
	c.say("%s", err)
	if errors.As(err, new(failure)) {
		return statusFailed
	}
	return statusCall
}

// watched remembers that a write failed, for what is written without a look at that:
// help and completion.
type watched struct {
	to  io.Writer
	err error
}

func (w *watched) Write(b []byte) (int, error) {
	n, err := w.to.Write(b)
	if err != nil {
		w.err = err
	}
	return n, err
}

// say writes a message of the tool to standard error.
func (c *Command) say(format string, args ...any) {
	c.settled()
	fmt.Fprintf(c.Stderr, "driploop: %s\n", show.Clean(fmt.Sprintf(format, args...)))
}

// tree is all commands.
func (c *Command) tree() *cobra.Command {
	root := &cobra.Command{
		Use:   "driploop COMMAND [PLAN…]",
		Short: "checks install plans for cellular antennas, boosters and routers",
		Long: `Checks install plans for cellular antennas, signal boosters and routers, kept as
text files in git, and takes off what they need. PLAN is a job's ID or a file.
Status 0: nothing holds work up. 1: a hold stands. 2: the call or an input cannot
be used. 3: the tool failed.`,
		Example:       "  driploop inspect quay-lane",
		SilenceErrors: true,
		SilenceUsage:  true,
		Version:       version,
		Args:          cobra.ArbitraryArgs, // so that RunE says what is wrong with them
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return unknownCommand(cmd.Root(), args[0])
			}
			return cmd.Help()
		},
	}
	root.SetVersionTemplate("driploop {{.Version}}\n")
	f := root.PersistentFlags()
	f.StringVar(&c.shared.root, "root", ".", "`DIR` of the workspace")
	f.StringVar(&c.shared.as, "as", "", "`FORM` of the output")
	f.StringVar(&c.shared.out, "out", "", "write to `FILE`, whole or not at all")
	f.StringVar(&c.shared.at, "at", "", "read the workspace from the git revision `REV`, or :index for what is staged")
	f.StringVar(&c.shared.limitsFrom, "limits-from", "", "take profiles, codes, house figures and weights from the git revision `REV`")
	f.StringVar(&c.shared.stockFrom, "stock-from", "", "take stock sheets and orders from the git revision `REV`")
	f.StringVar(&c.shared.today, "today", "", "`DAY` to go by, like 2026-12-01 (default: today, UTC)")
	f.StringVar(&c.shared.color, "color", "auto", "`WHEN` to colour: auto, always or never")
	f.BoolVar(&c.shared.quiet, "quiet", false, "no messages, and of findings only holds")
	root.AddCommand(
		c.start(), c.inspect(), c.budget(), c.takeoff(),
		c.cuts(), c.purchase(), c.pick(), c.stock(), c.redline(),
		c.basis(), c.parts(),
		c.dress(), c.hook(),
		c.completion(),
	)
	root.SetHelpCommand(c.help())
	root.InitDefaultHelpCmd()
	set(root)
	c.completes(root)
	return root
}

func unknownCommand(root *cobra.Command, word string) error {
	var names []string
	for _, sub := range root.Commands() {
		names = append(names, sub.Name())
	}
	if near := source.Nearest(word, names); near != "" {
		return fmt.Errorf("there is no command %s; did you mean %s?", source.Quote(word), near)
	}
	return fmt.Errorf("there is no command %s; help lists them", source.Quote(word))
}

// form is the form asked for, or the first of those that the command has.
func (c *Command) form(forms ...string) (string, error) {
	if c.shared.as == "" {
		return forms[0], nil
	}
	for _, f := range forms {
		if f == c.shared.as {
			return f, nil
		}
	}
	return "", fmt.Errorf("--as %s: this command has %s", c.shared.as, joinWords(forms))
}

// layout is the form asked for and the page it is laid out on.
func (c *Command) layout(forms ...string) (form string, page show.Page, err error) {
	if form, err = c.form(forms...); err == nil {
		page, err = c.page()
	}
	return form, page, err
}

func joinWords(words []string) string {
	out := ""
	for i, w := range words {
		switch {
		case i == 0:
		case i == len(words)-1:
			out += " and "
		default:
			out += ", "
		}
		out += w
	}
	return out
}

// page is how wide text may be and whether it has colour.
func (c *Command) page() (show.Page, error) {
	p := show.Page{Width: 80}
	f, ok := c.Stdout.(*os.File)
	terminal := ok && c.shared.out == "" && term.IsTerminal(int(f.Fd()))
	if terminal {
		if w, _, err := term.GetSize(int(f.Fd())); err == nil && w > 0 {
			p.Width = min(max(w, 32), 100)
		}
	}
	switch c.shared.color {
	case "auto":
		p.Color = terminal && c.Env("NO_COLOR") == "" && c.Env("TERM") != "dumb"
	case "always":
		p.Color = true
	case "never":
	default:
		return p, fmt.Errorf("--color %s: it is auto, always or never", c.shared.color)
	}
	return p, nil
}
