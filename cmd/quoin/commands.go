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
	trees          *workTrees // what git says, once for all files of a command; nil: asked each time
	tally          *tally     // of one of many files; nil: it is the only one
	many           bool       // packages of a folder: a line each
	trace          bool       // runs are to tell their steps
}

// flags is what the commands share.
type flags struct {
	out, root    string
	set, why     []string
	units        string
	strict, json bool
	noCache      bool
	port         int
	frozen, same bool
	tolerance    string
	overrides    []exhibit.Override // from set
}

// commands is the tree of commands. A command returns an error only for wrong
// usage; what it comes to is in app.code.
func (a *app) commands() *cobra.Command {
	root := &cobra.Command{Use: "quoin", Short: rootShort, Long: rootLong, Version: version,
		Args: cobra.NoArgs, RunE: func(c *cobra.Command, _ []string) error { return c.Help() },
		SilenceErrors: true, SilenceUsage: true, DisableAutoGenTag: true}
	root.SetVersionTemplate(versionLine() + "\n" + builtBy() + "\n")

	build := &cobra.Command{Use: buildUse, Short: buildShort, Long: buildLong, Example: buildExample, Args: a.arguments,
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, job{(*app).build, true, true}) }}
	build.Flags().StringVarP(&a.flags.out, "out", "o", "", flagOut)
	build.Flags().StringArrayVar(&a.flags.why, "why", nil, flagWhy)
	check := &cobra.Command{Use: checkUse, Short: checkShort, Long: checkLong, Example: checkExample, Args: a.arguments,
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, job{(*app).check, true, false}) }}
	print := &cobra.Command{Use: printUse, Short: printShort, Long: printLong, Example: printExample, Args: a.arguments,
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, job{(*app).print, false, false}) }}
	print.Flags().StringVarP(&a.flags.out, "out", "o", "", flagPDF)
	live := &cobra.Command{Use: watchUse, Short: watchShort, Long: watchLong, Example: watchExample, Args: a.oneFile,
		RunE: func(_ *cobra.Command, files []string) error { return a.each(files, job{(*app).watch, false, false}) }}
	live.Flags().IntVar(&a.flags.port, "port", 0, flagPort)
	live.Flags().StringVar(&a.flags.root, "root", "", flagRoot)
	live.Flags().StringArrayVar(&a.flags.set, "set", nil, flagSet)
	live.Flags().BoolVar(&a.flags.noCache, "no-cache", false, flagCache)
	for _, c := range []*cobra.Command{build, check, print} {
		c.Flags().StringVar(&a.flags.root, "root", "", flagRoot)
		c.Flags().StringArrayVar(&a.flags.set, "set", nil, flagSet)
		c.Flags().BoolVar(&a.flags.strict, "strict", false, flagStrict)
		c.Flags().BoolVar(&a.flags.frozen, "frozen", false, flagFrozen)
		c.Flags().BoolVar(&a.flags.noCache, "no-cache", false, flagCache)
		c.Flags().BoolVar(&a.flags.json, "json", false, flagJSON)
		root.AddCommand(c)
	}
	blocks := &cobra.Command{Use: blocksUse, Short: blocksShort, Long: blocksLong, Example: blocksExample, Args: cobra.ArbitraryArgs, RunE: a.blocks}
	blocks.Flags().BoolVar(&a.flags.json, "json", false, flagAsData)
	start := &cobra.Command{Use: newUse, Short: newShort, Long: newLong, Example: newExample, Args: cobra.ArbitraryArgs, RunE: a.new}
	start.Flags().StringVar(&a.flags.units, "units", "SI", flagUnits)
	verify := &cobra.Command{Use: verifyUse, Short: verifyShort, Long: verifyLong, Example: verifyExample, Args: cobra.ArbitraryArgs, RunE: a.verifyEach}
	verify.Flags().BoolVar(&a.flags.json, "json", false, flagVerdict)
	root.AddCommand(blocks, start, live, verify, a.freezeCommand(), a.compareCommand())
	return root
}

// arguments reads what the flags hold and asks for a FILE.
func (a *app) arguments(_ *cobra.Command, files []string) error {
	if len(files) == 0 {
		return errNoFile
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

// oneFile is arguments for a command of one FILE.
func (a *app) oneFile(c *cobra.Command, files []string) error {
	if len(files) > 1 {
		return errWatchOne
	}
	if a.flags.port < 0 || a.flags.port > 65535 {
		return errPort
	}
	return a.arguments(c, files)
}
