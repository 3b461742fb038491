package main

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"time"

	"github.com/spf13/cobra"
	"github.com/spf13/cobra/doc"

	"driploop/catalog/source"
)

// pageWidth is how wide help is set.
const pageWidth = 80

// help explains commands, and writes their manual pages.
func (c *Command) help() *cobra.Command {
	man := ""
	cmd := &cobra.Command{
		Use:   "help [COMMAND]",
		Short: "help for a command, or manual pages for all",
		Long: `Explains a command. --man writes a page for each command into a folder, in the
format of man: driploop.1, driploop-inspect.1 and so on; the folder is made if it
is not there. Their date is that of --today or SOURCE_DATE_EPOCH, so that the same
program writes the same bytes. Read one with man -l FILE.`,
		Example: `  driploop help inspect
  driploop help --man man1`,
		RunE: func(cmd *cobra.Command, args []string) error {
			if cmd.Flags().Changed("man") {
				return c.manual(cmd.Root(), man, args)
			}
			about, rest, err := cmd.Root().Find(args)
			if err != nil || len(rest) > 0 {
				return unknownCommand(cmd.Root(), args[0])
			}
			return about.Help()
		},
	}
	cmd.Flags().StringVar(&man, "man", "", "write manual pages into this folder")
	return cmd
}

// manual writes the manual pages of all commands.
func (c *Command) manual(root *cobra.Command, dir string, args []string) error {
	if err := c.writesItself("help --man"); err != nil {
		return err
	}
	if len(args) > 0 || dir == "" {
		return fmt.Errorf("help --man writes the pages of all commands, into the folder that it is given")
	}
	day, err := c.manualDay()
	if err != nil {
		return err
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return failure{fmt.Errorf("making the folder: %w", err)}
	}
	for _, cmd := range append([]*cobra.Command{root}, root.Commands()...) {
		if cmd.Hidden {
			continue
		}
		page, err := manualPage(cmd, day)
		if err != nil {
			return failure{err}
		}
		file := filepath.Join(dir, strings.ReplaceAll(cmd.CommandPath(), " ", "-")+".1")
		if err := writeWhole(file, page); err != nil {
			return failure{fmt.Errorf("writing %s: %w", file, cause(err))}
		}
	}
	return nil
}

// manualDay is the date that manual pages carry.
func (c *Command) manualDay() (time.Time, error) {
	if epoch := c.Env("SOURCE_DATE_EPOCH"); c.shared.today == "" && epoch != "" {
		sec, err := strconv.ParseInt(epoch, 10, 64)
		if err != nil {
			return time.Time{}, fmt.Errorf("SOURCE_DATE_EPOCH is %s; it is a number of seconds", source.Quote(epoch))
		}
		return time.Unix(sec, 0).UTC(), nil
	}
	d, err := c.today()
	return time.Date(d.Year, time.Month(d.Month), d.Day, 0, 0, 0, 0, time.UTC), err
}

func manualPage(cmd *cobra.Command, day time.Time) ([]byte, error) {
	cmd.InitDefaultHelpFlag()
	cmd.DisableAutoGenTag = true
	var page bytes.Buffer
	head := &doc.GenManHeader{Title: strings.ToUpper(strings.ReplaceAll(cmd.CommandPath(), " ", "-")),
		Section: "1", Date: &day, Source: "driploop " + version, Manual: "driploop"}
	if err := doc.GenMan(cmd, head, &page); err != nil {
		return nil, fmt.Errorf("setting the page of %s: %w", cmd.Name(), err)
	}
	return page.Bytes(), nil
}

// inColumns lets help templates print flags for the page. The library keeps such
// functions for all commands together, and calls may be side by side.
var inColumns = sync.OnceFunc(func() {
	cobra.AddTemplateFunc("inColumns", func(flags interface{ FlagUsagesWrapped(int) string }) string {
		return strings.TrimRight(flags.FlagUsagesWrapped(pageWidth), " \n")
	})
})

// set lays out the help of all commands for a page of 80 columns.
func set(root *cobra.Command) {
	inColumns()
	usage := root.UsageTemplate()
	for _, flags := range []string{".LocalFlags", ".InheritedFlags"} {
		usage = strings.ReplaceAll(usage, flags+".FlagUsages | trimTrailingWhitespaces", flags+" | inColumns")
	}
	usage = strings.ReplaceAll(usage, "\n  {{.CommandPath}} [command]", "") // the first line says so
	root.SetUsageTemplate(usage)
	root.Long = reflow(root.Long)
	for _, cmd := range root.Commands() {
		if has := forms[cmd.Name()]; len(has) > 1 {
			cmd.Long += "\n\nForms of --as: " + strings.Join(has, ", ") + "."
		}
		cmd.Long = reflow(cmd.Long)
	}
}

// reflow sets paragraphs anew within the page; what is indented stays as it is.
func reflow(text string) string {
	var out []string
	for _, paragraph := range strings.Split(text, "\n\n") {
		if strings.HasPrefix(paragraph, " ") {
			out = append(out, paragraph)
			continue
		}
		var lines []string
		line := ""
		for _, word := range strings.Fields(paragraph) {
			if line != "" && len([]rune(line+" "+word)) > pageWidth-1 {
				lines, line = append(lines, line), ""
			}
			line = strings.TrimPrefix(line+" "+word, " ")
		}
		out = append(out, strings.Join(append(lines, line), "\n"))
	}
	return strings.Join(out, "\n\n")
}

func commandNames(root *cobra.Command) []string {
	var out []string
	for _, cmd := range root.Commands() {
		if !cmd.Hidden {
			out = append(out, cmd.Name())
		}
	}
	return out
}
