package main

import (
	"io"
	"strings"

	"github.com/spf13/cobra"

	"quoin/calc/exhibit"
)

// app is one run of the program.
type app struct {
	stdout, stderr io.Writer
	code           int
	flags          flags
	cache          *diskCache // nil: none
}

// flags is what the commands share.
type flags struct {
	out, root    string
	set          []string
	units        string
	strict, json bool
	noCache      bool
	overrides    []exhibit.Override // from set
}

// commands is the tree of commands. A command returns an error only for wrong
// usage; what it comes to is in app.code.
func (a *app) commands() *cobra.Command {
	root := &cobra.Command{Use: "quoin", Short: rootShort, Long: rootLong, Version: version,
		Args: cobra.NoArgs, RunE: func(c *cobra.Command, _ []string) error { return c.Help() },
		SilenceErrors: true, SilenceUsage: true, DisableAutoGenTag: true}
	root.SetVersionTemplate(versionLine() + "\n")

	build := &cobra.Command{Use: buildUse, Short: buildShort, Long: buildLong, Example: buildExample, Args: a.arguments,
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, a.build) }}
	build.Flags().StringVarP(&a.flags.out, "out", "o", "", flagOut)
	check := &cobra.Command{Use: checkUse, Short: checkShort, Long: checkLong, Example: checkExample, Args: a.arguments,
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, a.check) }}
	print := &cobra.Command{Use: printUse, Short: printShort, Long: printLong, Example: printExample, Args: a.arguments,
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, a.print) }}
	print.Flags().StringVarP(&a.flags.out, "out", "o", "", flagPDF)
	for _, c := range []*cobra.Command{build, check, print} {
		c.Flags().StringVar(&a.flags.root, "root", "", flagRoot)
		c.Flags().StringArrayVar(&a.flags.set, "set", nil, flagSet)
		c.Flags().BoolVar(&a.flags.strict, "strict", false, flagStrict)
		c.Flags().BoolVar(&a.flags.noCache, "no-cache", false, flagCache)
		c.Flags().BoolVar(&a.flags.json, "json", false, flagJSON)
		root.AddCommand(c)
	}
	blocks := &cobra.Command{Use: blocksUse, Short: blocksShort, Long: blocksLong, Example: blocksExample, Args: cobra.ArbitraryArgs, RunE: a.blocks}
	blocks.Flags().BoolVar(&a.flags.json, "json", false, flagAsData)
	start := &cobra.Command{Use: newUse, Short: newShort, Long: newLong, Example: newExample, Args: cobra.ArbitraryArgs, RunE: a.new}
	start.Flags().StringVar(&a.flags.units, "units", "SI", flagUnits)
	root.AddCommand(blocks, start)
	return root
}

// arguments reads what the flags hold and asks for a FILE.
func (a *app) arguments(_ *cobra.Command, files []string) error {
	if len(files) == 0 {
		return errNoFile
	}
	if a.flags.out != "" && len(files) > 1 {
		return errOneFile
	}
	for _, s := range a.flags.set {
		name, text, ok := strings.Cut(s, "=")
		name, text = strings.TrimSpace(name), strings.TrimSpace(text)
		if !ok || name == "" || text == "" {
			return errSet(s)
		}
		a.flags.overrides = append(a.flags.overrides, exhibit.Override{Name: name, Text: text})
	}
	return nil
}

// each runs a command on every FILE; errors weigh more than checks not met.
func (a *app) each(files []string, do func(file string) int) error {
	if !a.flags.noCache {
		a.cache = openCache()
		defer a.cache.Close()
	}
	for _, f := range files {
		switch code := do(f); {
		case code == exitErrors, a.code == exitBuilt:
			a.code = code
		}
	}
	return nil
}
