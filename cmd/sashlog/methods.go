package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"sashlog/analyze"
	"sashlog/configs/criteria"
)

func newMethods(p process) *cobra.Command {
	var preset string
	cmd := &cobra.Command{
		Use:   "methods",
		Short: "print every criterion in use with its numbers, limits and source",
		Args:  noArguments,
		RunE: func(c *cobra.Command, _ []string) error {
			settings, err := criteria.Preset(preset)
			if err != nil {
				return fail(exitUsage, err)
			}
			printMethods(p.stdout, settings)
			return nil
		},
	}
	cmd.Flags().StringVar(&preset, "preset", criteria.Default, "the preset whose numbers are printed: "+strings.Join(criteria.Presets(), ", "))
	return cmd
}

func printMethods(w io.Writer, settings criteria.Settings) {
	fmt.Fprintf(w, "Numbers of preset %s\n(standards are known here from public texts; figures support a judgement, they certify nothing)\n\n", settings.Preset)
	for _, key := range criteria.Keys() {
		n := settings.Notes[key]
		fmt.Fprintf(w, "%s = %s %s\n  %s\n  %s: %s\n", key, n.Value, n.Unit, n.Words, n.Standing, n.Source)
	}
	fmt.Fprint(w, "\nMethods\n")
	for _, m := range analyze.Methods() {
		fmt.Fprintf(w, "\n%s\n  %s\n  formula: %s\n", m.Title, m.Question, m.Formula)
		for _, l := range m.Limits {
			fmt.Fprintf(w, "  limit: %s\n", l)
		}
		for _, s := range m.Sources {
			fmt.Fprintf(w, "  source: %s\n", s)
		}
		fmt.Fprintf(w, "  standing: %s\n", m.Standing)
	}
}
