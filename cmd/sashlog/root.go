package main

import (
	"fmt"
	"runtime/debug"

	"github.com/spf13/cobra"
)

// version is the released version; the commit is added from the build.
const version = "0.1.0"

func versionWords() string {
	words := version
	if info, ok := debug.ReadBuildInfo(); ok {
		for _, s := range info.Settings {
			if s.Key == "vcs.revision" && len(s.Value) >= 12 {
				words += " (" + s.Value[:12] + ")"
			}
		}
	}
	return words
}

func newRoot(p process) *cobra.Command {
	root := &cobra.Command{
		Use:   "sashlog",
		Short: "does a mixed-mode building really run in open mode?",
		Long: `sashlog reads the sensor logs of a mixed-mode building (openable windows plus
air-conditioning) and says whether it really runs in open mode: the hours it
ran open against the hours the weather suited, the hours missed and why,
whether people were comfortable and the air was fresh, and what to change first.

Begin with: sashlog demo
Then, for a building of your own: sashlog audit SITE.yaml`,
		Version:       versionWords(),
		SilenceUsage:  true,
		SilenceErrors: true,
		RunE: func(c *cobra.Command, args []string) error {
			if len(args) > 0 {
				return fail(exitUsage, fmt.Errorf("there is no command %q; hint: sashlog --help lists the commands", args[0]))
			}
			return c.Help()
		},
		Args: cobra.ArbitraryArgs,
	}
	root.PersistentFlags().Bool("quiet", false, "say nothing but errors; results' paths still go to standard output")
	root.SetFlagErrorFunc(func(c *cobra.Command, err error) error {
		return fail(exitUsage, fmt.Errorf("%w; hint: %s --help shows what it takes", err, c.CommandPath()))
	})
	root.AddCommand(newDemo(p), newScan(p), newAudit(p), newCompare(p), newTrial(p), newLoad(p), newMethods(p), newManual(p))
	return root
}

// oneSite asks for exactly one site file.
func oneSite(c *cobra.Command, args []string) error {
	if len(args) == 1 {
		return nil
	}
	return fail(exitUsage, fmt.Errorf("%s takes one site file, %d given; hint: sashlog %s building/site.yaml", c.Name(), len(args), c.Name()))
}

func noArguments(c *cobra.Command, args []string) error {
	if len(args) == 0 {
		return nil
	}
	return fail(exitUsage, fmt.Errorf("%s takes no arguments, got %q; hint: %s --help shows what it takes", c.Name(), args[0], c.CommandPath()))
}
