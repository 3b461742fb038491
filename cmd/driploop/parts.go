package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) parts() *cobra.Command {
	return &cobra.Command{
		Use:   "parts [WORD…]",
		Short: "look in the catalog",
		Long: `Looks in the workspace's catalog and in the generic one. A part is listed where every
WORD fits: in its ID, name or kind, as a connector ("N female"), or as a band (B12).
With --as toml and the ID of one part it prints a block to paste into a plan. It
works in any folder; what is on hand is only known inside a workspace.`,
		Example: "  driploop parts N female B12\n  driploop parts GEN-CX-10 --as toml",
		RunE: func(cmd *cobra.Command, args []string) error {
			form, page, err := c.layout("text", "json", "toml")
			if err != nil {
				return err
			}
			firm, done, err := c.workspaceIfAny(cmd.Context(), cmd.Flags().Changed("root"))
			if err != nil {
				return err
			}
			defer done()
			parts := catalog.New(nil)
			if firm != nil {
				parts = firm.Catalog
			}
			if form == "toml" {
				return c.paste(parts, args)
			}
			b, err := partsAs(found(parts, firm, args), form, page)
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
}

func partsAs(p *show.Parts, form string, page show.Page) ([]byte, error) {
	if form == "json" {
		return p.JSON()
	}
	return p.Text(page), nil
}

// found lists the parts that fit, with what of them is on hand.
func found(parts *catalog.Catalog, firm *rules.Firm, words []string) *show.Parts {
	out := &show.Parts{Words: strings.Join(words, " "), Counted: firm != nil}
	query := queryOf(words)
	for _, p := range parts.All() {
		if !query.fits(p) {
			continue
		}
		row := show.PartRow{Part: p}
		if firm != nil {
			row.OnHand, _ = firm.Stock.OnHand(p.ID)
		}
		out.Rows = append(out.Rows, row)
	}
	if len(out.Rows) == 0 {
		out.Near = parts.Nearest(out.Words)
	}
	return out
}

// paste prints a block for one part, named by its ID.
func (c *Command) paste(parts *catalog.Catalog, words []string) error {
	if len(words) != 1 {
		return fmt.Errorf("--as toml prints a block for one part: give its ID")
	}
	if p := parts.Look(words[0]); p != nil {
		return c.emit(show.PartTOML(p, parts.Connectors(p.ID)))
	}
	says := fmt.Sprintf("--as toml prints a block for one part, and no part has the ID %s", source.Quote(words[0]))
	if near := parts.Nearest(words[0]); near != "" {
		return fmt.Errorf("%s; did you mean %s?", says, near)
	}
	if n := len(found(parts, nil, words).Rows); n > 0 {
		return fmt.Errorf("%s; the word fits %d: see parts %s", says, n, words[0])
	}
	return fmt.Errorf("%s", says)
}
