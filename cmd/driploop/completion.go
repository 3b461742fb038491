package main

import (
	"fmt"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/cmd/driploop/repo"
	"driploop/cmd/driploop/show"
	"driploop/cmd/driploop/starter"
)

// shells are those that completion writes a script for.
var shells = []string{"bash", "zsh", "fish", "powershell"}

func (c *Command) completion() *cobra.Command {
	return &cobra.Command{
		Use:   "completion SHELL",
		Short: "a script that completes commands in a shell",
		Long: `Prints a script for bash, zsh, fish or powershell. Once the shell has read it, the
tab key completes commands, flags, forms, jobs of the workspace, parts, rules and
formats. For bash, put a line like this into ~/.bashrc:

  source <(driploop completion bash)

For zsh write it to a file _driploop in a folder of $fpath, for fish to
~/.config/fish/completions/driploop.fish.`,
		Example:   `  driploop completion bash`,
		ValidArgs: shells,
		Args:      cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			root, out := cmd.Root(), cmd.OutOrStdout()
			switch args[0] {
			case "bash":
				return root.GenBashCompletionV2(out, true)
			case "zsh":
				return root.GenZshCompletion(out)
			case "fish":
				return root.GenFishCompletion(out, true)
			case "powershell":
				return root.GenPowerShellCompletionWithDesc(out)
			}
			return fmt.Errorf("there is no script for %s; there is one for %s", source.Quote(args[0]), joinWords(shells))
		},
	}
}

// complete is what the shell offers.
type complete = func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective)

// forms are the forms that --as has, by command; a test holds them against the commands.
var forms = map[string][]string{
	"basis":    {"text", "json", "markdown"},
	"budget":   {"text", "json", "csv", "markdown"},
	"cuts":     {"text", "json", "csv"},
	"dress":    {"text"},
	"hook":     {"text"},
	"inspect":  {"text", "json", "sarif", "markdown", "annotations", "junit"},
	"parts":    {"text", "json", "toml"},
	"pick":     {"text", "json", "xlsx", "html"},
	"purchase": {"text", "json", "csv", "xlsx"},
	"redline":  {"text", "json", "markdown"},
	"stock":    {"text", "json", "csv", "xlsx"},
	"takeoff":  {"text", "json", "csv", "markdown", "xlsx"},
}

// completes tells each command what the shell may offer for its arguments and flags.
func (c *Command) completes(root *cobra.Command) {
	words := map[string]complete{
		"budget": c.once(c.jobs), "pick": c.once(c.jobs),
		"basis": c.once(c.topics), "parts": c.partIDs, "start": c.once(c.folders),
		"help": c.once(func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return commandNames(root), cobra.ShellCompDirectiveNoFileComp
		}),
		"completion": c.once(func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return shells, cobra.ShellCompDirectiveNoFileComp
		}),
		"hook": nothing,
	}
	for _, cmd := range root.Commands() {
		offer := words[cmd.Name()]
		if offer == nil {
			offer = c.jobs // the usual argument of a command
		}
		cmd.ValidArgs, cmd.ValidArgsFunction = nil, begun(offer)
	}
	for name, offer := range map[string]complete{
		"as": func(cmd *cobra.Command, _ []string, _ string) ([]string, cobra.ShellCompDirective) {
			return forms[cmd.Name()], cobra.ShellCompDirectiveNoFileComp
		},
		"color": fixed("auto", "always", "never"),
		"at":    fixed(repo.Index, "HEAD"), "limits-from": fixed("HEAD"), "stock-from": fixed("HEAD"),
		"today": nothing,
		"root": func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return nil, cobra.ShellCompDirectiveFilterDirs
		},
	} {
		if err := root.RegisterFlagCompletionFunc(name, begun(offer)); err != nil {
			panic(err) // no such flag: a mistake of the program
		}
	}
	for _, cmd := range root.Commands() {
		if cmd.Flags().Lookup("like") != nil {
			if err := cmd.RegisterFlagCompletionFunc("like", begun(fixed(starter.Likes()...))); err != nil {
				panic(err)
			}
		}
	}
}

func fixed(words ...string) complete {
	return func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
		return words, cobra.ShellCompDirectiveNoFileComp
	}
}

func nothing(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
	return nil, cobra.ShellCompDirectiveNoFileComp
}

// begun leaves of what is offered that which begins as the word does.
func begun(offer complete) complete {
	return func(cmd *cobra.Command, args []string, word string) ([]string, cobra.ShellCompDirective) {
		all, how := offer(cmd, args, word)
		return slices.DeleteFunc(slices.Clone(all), func(s string) bool { return !strings.HasPrefix(s, word) }), how
	}
}

// once offers words for the first argument only.
func (c *Command) once(offer complete) complete {
	return func(cmd *cobra.Command, args []string, word string) ([]string, cobra.ShellCompDirective) {
		if len(args) > 0 {
			return nil, cobra.ShellCompDirectiveNoFileComp
		}
		return offer(cmd, args, word)
	}
}

// jobs offers the jobs of the workspace that are not named yet. Behind -- stand files,
// and a file stands for a plan everywhere.
func (c *Command) jobs(cmd *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
	if cmd.ArgsLenAtDash() < len(args) { // the library puts a -- of its own behind the arguments
		return nil, cobra.ShellCompDirectiveDefault
	}
	firm, done, err := c.workspace(cmd.Context())
	if err != nil {
		return nil, cobra.ShellCompDirectiveDefault
	}
	defer done()
	var out []string
	for _, e := range firm.PlanFiles {
		if job := bom.JobOf(e.Path); source.ValidID(job) && !slices.Contains(args, job) {
			out = append(out, job)
		}
	}
	return out, cobra.ShellCompDirectiveDefault
}

// partIDs offers the parts of the workspace and the generic ones.
func (c *Command) partIDs(cmd *cobra.Command, _ []string, _ string) ([]string, cobra.ShellCompDirective) {
	firm, done, err := c.workspaceIfAny(cmd.Context(), cmd.Flags().Changed("root"))
	if err != nil {
		return nil, cobra.ShellCompDirectiveNoFileComp
	}
	defer done()
	parts := catalog.New(nil)
	if firm != nil {
		parts = firm.Catalog
	}
	var out []string
	for _, p := range parts.All() {
		out = append(out, p.ID)
	}
	return out, cobra.ShellCompDirectiveNoFileComp
}

// topics offers what basis explains, or of what it has a schema.
func (c *Command) topics(cmd *cobra.Command, _ []string, _ string) ([]string, cobra.ShellCompDirective) {
	if cmd.Flags().Changed("schema") {
		return show.SchemaNames(), cobra.ShellCompDirectiveNoFileComp
	}
	firm, done, err := c.workspaceIfAny(cmd.Context(), cmd.Flags().Changed("root"))
	if err != nil {
		return nil, cobra.ShellCompDirectiveNoFileComp
	}
	defer done()
	return basisOf(firm).Words(), cobra.ShellCompDirectiveNoFileComp
}

// folders offers folders for a new workspace; a new plan has a name that nobody knows.
func (c *Command) folders(cmd *cobra.Command, _ []string, _ string) ([]string, cobra.ShellCompDirective) {
	if c.begins() == nil || cmd.Flags().Changed("root") {
		return nil, cobra.ShellCompDirectiveNoFileComp
	}
	return nil, cobra.ShellCompDirectiveFilterDirs
}
