// Command twokf relaxes one-dimensional electron–phonon chains and shows their
// bands, density, susceptibility and soft phonon, live in a terminal or as
// text, JSON and CSV.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"path/filepath"
	"runtime"
	"runtime/debug"
	"strings"
	"syscall"
	"time"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"example.org/twokf/model"
	"example.org/twokf/model/report"
	"example.org/twokf/model/study"
	"example.org/twokf/presets"
	"example.org/twokf/tui"
	_ "example.org/twokf/tui/background"
)

// Exit codes: 2 for what was typed on the command line, 1 for everything else
// that went wrong, 130 for an interrupt.
const (
	exitFailure     = 1
	exitUsage       = 2
	exitInterrupted = 130
)

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM, syscall.SIGHUP)
	code := run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr)
	stop()
	os.Exit(code)
}

// usageError marks an error in what was typed on the command line.
type usageError struct{ error }

func (e usageError) Unwrap() error { return e.error }

func run(ctx context.Context, args []string, in io.Reader, out, errs io.Writer) int {
	root := rootCommand(in, out, errs)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	if err == nil {
		return 0
	}
	if ctx.Err() != nil || errors.Is(err, context.Canceled) {
		fmt.Fprintln(errs, "twokf: interrupted")
		return exitInterrupted
	}
	fmt.Fprintf(errs, "twokf: %s\n", err)
	var usage usageError
	if errors.As(err, &usage) || strings.HasPrefix(err.Error(), "unknown command") {
		return exitUsage
	}
	return exitFailure
}

// options are what the commands share.
type options struct {
	set   []string
	ascii bool
	jobs  int
}

func (o *options) register(cmd *cobra.Command) {
	cmd.Flags().StringArrayVar(&o.set, "set", nil, "change a `key=value` of the chain, with a unit if you like; can be repeated")
	cmd.Flags().BoolVar(&o.ascii, "ascii", false, "no signs beyond ASCII (also chosen where the locale is not UTF-8)")
	cmd.Flags().IntVar(&o.jobs, "jobs", runtime.NumCPU(), "how many cores to use")
	_ = cmd.RegisterFlagCompletionFunc("set", completeKeys)
}

func (o *options) check() error {
	if o.jobs < 1 {
		return usageError{fmt.Errorf("--jobs %d: at least 1 core is needed", o.jobs)}
	}
	o.ascii = o.ascii || !utf8Locale()
	return nil
}

func rootCommand(in io.Reader, out, errs io.Writer) *cobra.Command {
	var o options
	root := &cobra.Command{
		Use:   "twokf [NAME|FILE]",
		Short: "One-dimensional electron–phonon chains: bands, density, χ(q) and the soft phonon, live",
		Long: `twokf relaxes a finite one-dimensional electron–phonon chain and shows its bands,
density, susceptibility and the phonon that softens at 2kF.

Without a command it opens the bench on a ready-made chain (see "twokf presets"),
on a chain file, or on "-" for a chain on standard input.`,
		Example: `  twokf                                  open the bench
  twokf doped.toml --set temperature=40meV
  twokf solve polyene --json`,
		Args:              oneChain,
		ValidArgsFunction: completePresets,
		SilenceErrors:     true,
		SilenceUsage:      true,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := o.check(); err != nil {
				return err
			}
			chain, from, err := openChain(cmd.Context(), args, o.set, in)
			if err != nil {
				return err
			}
			screen, ok := out.(*os.File)
			if !ok || !term.IsTerminal(int(screen.Fd())) || os.Getenv("TERM") == "dumb" || os.Getenv("TERM") == "" {
				fmt.Fprintln(errs, "twokf: standard output is no terminal for the bench; this is what \"twokf solve\" prints")
				return solve(cmd.Context(), chain, solveOptions{options: o}, out, errs)
			}
			return tui.Run(cmd.Context(), tui.Settings{
				Chain: chain, From: from.name, File: from.file, Edited: len(o.set) > 0,
				ASCII: o.ascii, Jobs: o.jobs, Input: in, Output: screen,
			})
		},
	}
	o.register(root)
	root.SetIn(in)
	root.SetOut(out)
	root.SetErr(errs)
	root.SetFlagErrorFunc(func(_ *cobra.Command, err error) error { return usageError{err} })
	root.SetHelpCommand(helpCommand())
	root.AddCommand(solveCommand(in, out, errs), presetsCommand(out), versionCommand(out))
	root.CompletionOptions.HiddenDefaultCmd = true
	root.InitDefaultCompletionCmd()
	if completion, _, err := root.Find([]string{"completion"}); err == nil {
		completion.Example = "  source <(twokf completion bash)"
		completion.RunE = func(*cobra.Command, []string) error {
			return usageError{errors.New("for which shell? bash, fish, powershell or zsh")}
		}
	}
	return root
}

func helpCommand() *cobra.Command {
	return &cobra.Command{
		Use:     "help [COMMAND]",
		Short:   "Say how a command is used",
		Example: "  twokf help solve",
		RunE: func(cmd *cobra.Command, args []string) error {
			about, unknown, err := cmd.Root().Find(args)
			if err != nil || len(unknown) > 0 {
				return usageError{fmt.Errorf("there is no command %q; the commands are solve, presets and version", strings.Join(args, " "))}
			}
			about.InitDefaultHelpFlag() // to be listed
			return about.Help()
		},
	}
}

func oneChain(_ *cobra.Command, args []string) error {
	if len(args) > 1 {
		return usageError{fmt.Errorf("one chain at a time: %q and %q were given (a preset name, a chain file, or -)", args[0], args[1])}
	}
	return nil
}

func presetsCommand(out io.Writer) *cobra.Command {
	return &cobra.Command{
		Use:               "presets [NAME]",
		Short:             "List the ready-made chains, or print one as a chain file",
		Example:           "  twokf presets\n  twokf presets polyene > mine.toml",
		Args:              oneChain,
		ValidArgsFunction: completePresets,
		RunE: func(_ *cobra.Command, args []string) error {
			if len(args) == 1 {
				text, err := presets.Raw(args[0])
				if err != nil {
					return usageError{err}
				}
				_, err = out.Write(text)
				return err
			}
			var lines strings.Builder
			width := 0
			for _, p := range presets.List() {
				width = max(width, len(p.Name))
			}
			for _, p := range presets.List() {
				fmt.Fprintf(&lines, "%-*s  %s\n", width, p.Name, p.Title)
			}
			return say(out, lines.String(), !utf8Locale())
		},
	}
}

// solveOptions are what solve adds.
type solveOptions struct {
	options
	json bool
	csv  string
}

func solveCommand(in io.Reader, out, errs io.Writer) *cobra.Command {
	var o solveOptions
	cmd := &cobra.Command{
		Use:   "solve [NAME|FILE]",
		Short: "The same answers without a screen: text, JSON or CSV",
		Long: `solve relaxes the chain and prints its answers and doubts on standard output.

The chain is a ready-made one, a chain file, or "-" for a file on standard input.
A number after --set may carry a unit: 300 K, 25 meV, 0.3 t, 12 THz, 40 cm-1, pi/2.`,
		Example: `  twokf solve polyene
  twokf solve mine.toml --set temperature='300 K' --set chain.sites=400 --json
  twokf presets polyene | twokf solve - --csv answers`,
		Args:              oneChain,
		ValidArgsFunction: completePresets,
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := o.check(); err != nil {
				return err
			}
			switch toFolder := cmd.Flags().Changed("csv"); {
			case toFolder && o.csv == "":
				return usageError{errors.New("--csv needs the name of a folder")}
			case toFolder && o.json:
				return usageError{errors.New("--json and --csv exclude each other; give one of them")}
			}
			chain, _, err := openChain(cmd.Context(), args, o.set, in)
			if err != nil {
				return err
			}
			return solve(cmd.Context(), chain, o, out, errs)
		},
	}
	o.register(cmd)
	cmd.Flags().BoolVar(&o.json, "json", false, "print one JSON object")
	cmd.Flags().StringVar(&o.csv, "csv", "", "write CSV files into the folder `DIR`")
	_ = cmd.MarkFlagDirname("csv")
	return cmd
}

func solve(ctx context.Context, chain model.Chain, o solveOptions, out, errs io.Writer) error {
	set := study.Settings{Jobs: o.jobs}
	progress := newProgressLine(errs)
	set.Progress = progress.show
	p, err := study.Run(ctx, chain, set)
	progress.clear()
	if err != nil {
		return err
	}
	switch {
	case o.json:
		err = report.JSON(out, p)
	case o.csv != "":
		var files []string
		if files, err = report.CSV(o.csv, p); err == nil {
			_, err = fmt.Fprintln(out, strings.Join(files, "\n"))
		}
	default:
		var text strings.Builder
		if err = report.Text(&text, p); err == nil {
			err = say(out, text.String(), o.ascii)
		}
	}
	return err
}

// progressLine shows how far a long study is on standard error, if that is a
// terminal.
type progressLine struct {
	out   io.Writer
	last  time.Time
	shown bool
}

func newProgressLine(errs io.Writer) *progressLine {
	if f, ok := errs.(*os.File); !ok || !term.IsTerminal(int(f.Fd())) {
		return &progressLine{}
	}
	return &progressLine{out: errs}
}

// firstProgress is how long a study may take before its progress is shown.
const firstProgress = 300 * time.Millisecond

func (l *progressLine) show(p study.Progress) {
	if l.out == nil || p.Elapsed < firstProgress || time.Since(l.last) < 100*time.Millisecond {
		return
	}
	l.last, l.shown = time.Now(), true
	left := ""
	if p.Left >= 2*time.Second {
		left = fmt.Sprintf(", about %v left", p.Left.Round(time.Second))
	}
	fmt.Fprintf(l.out, "\r%s %3.0f %%, %s%s\x1b[K", p.Stage, 100*p.Done, report.ASCII(p.Detail), left)
}

func (l *progressLine) clear() {
	if l.shown {
		fmt.Fprint(l.out, "\r\x1b[K")
	}
}

// origin is where a chain came from.
type origin struct {
	name string // preset or file name, for a person
	file string // path to save to; "" for a preset or standard input
}

// openChain reads the chain that the arguments name and applies --set. It gives
// up when ctx ends, even while a pipe keeps it waiting.
func openChain(ctx context.Context, args, set []string, in io.Reader) (model.Chain, origin, error) {
	name := presets.List()[0].Name
	if len(args) > 0 {
		name = args[0]
	}
	var (
		chain model.Chain
		from  origin
		err   error
	)
	read := make(chan struct{})
	go func() {
		defer close(read)
		chain, from, err = readChain(name, in)
	}()
	select {
	case <-read:
	case <-ctx.Done():
		return model.Chain{}, origin{}, ctx.Err()
	}
	if err != nil {
		return model.Chain{}, origin{}, err
	}
	if chain, err = model.SetAll(chain, set); err != nil {
		return model.Chain{}, origin{}, usageError{err}
	}
	return chain, from, nil
}

// readChain takes "-" for standard input, the name of a preset for that preset,
// and anything else for a file.
func readChain(name string, in io.Reader) (model.Chain, origin, error) {
	if name == "-" {
		c, err := model.Read(in, "standard input")
		return c, origin{name: "standard input"}, err
	}
	c, presetErr := presets.Get(name)
	if presetErr == nil {
		return c, origin{name: name}, nil
	}
	f, err := os.Open(name)
	if err != nil {
		if errors.Is(err, os.ErrNotExist) && !strings.ContainsAny(name, "/.") {
			return model.Chain{}, origin{}, usageError{fmt.Errorf("%w, and there is no file of that name", presetErr)}
		}
		return model.Chain{}, origin{}, err
	}
	defer f.Close()
	c, err = model.Read(f, name)
	return c, origin{name: filepath.Base(name), file: name}, err
}

// say writes a text, in ASCII where that is wanted.
func say(out io.Writer, text string, ascii bool) error {
	if ascii {
		text = report.ASCII(text)
	}
	_, err := io.WriteString(out, text)
	return err
}

func versionCommand(out io.Writer) *cobra.Command {
	return &cobra.Command{
		Use:     "version",
		Short:   "Say which version this is",
		Example: "  twokf version",
		Args:    cobra.NoArgs,
		RunE: func(*cobra.Command, []string) error {
			_, err := fmt.Fprintln(out, "twokf", version())
			return err
		},
	}
}

// version is what the build recorded: the module's version and the revision.
func version() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "unknown"
	}
	v := info.Main.Version
	if v == "" || v == "(devel)" {
		v = "development"
	}
	for _, s := range info.Settings {
		if s.Key == "vcs.revision" && !strings.Contains(v, s.Value[:min(12, len(s.Value))]) {
			v += " " + s.Value[:min(12, len(s.Value))]
		}
	}
	return v + " " + runtime.Version() + " " + runtime.GOOS + "/" + runtime.GOARCH
}

// utf8Locale reports whether the locale's characters are UTF-8: the first of
// LC_ALL, LC_CTYPE and LANG that is set decides (POSIX).
func utf8Locale() bool {
	for _, key := range []string{"LC_ALL", "LC_CTYPE", "LANG"} {
		if v := os.Getenv(key); v != "" {
			v = strings.ToLower(v)
			return strings.Contains(v, "utf-8") || strings.Contains(v, "utf8")
		}
	}
	return false
}

func completePresets(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
	var names []string
	for _, p := range presets.List() {
		names = append(names, p.Name+"\t"+p.Title)
	}
	return names, cobra.ShellCompDirectiveDefault // files are welcome too
}

func completeKeys(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
	var keys []string
	for _, p := range model.Params() {
		keys = append(keys, p.Key+"=")
	}
	return keys, cobra.ShellCompDirectiveNoSpace | cobra.ShellCompDirectiveNoFileComp
}
