package tui_test

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"reflect"
	"regexp"
	"runtime"
	"strings"
	"syscall"
	"testing"
	"time"
	"unicode/utf8"

	"example.org/twokf/model"
	"example.org/twokf/presets"
)

// The program as a person or a script meets it: built once, then run.

var program string

func TestMain(m *testing.M) {
	os.Exit(buildAndRun(m))
}

func buildAndRun(m *testing.M) int {
	dir, err := os.MkdirTemp("", "twokf-test-")
	if err != nil {
		fmt.Fprintln(os.Stderr, err)
		return 1
	}
	defer os.RemoveAll(dir)
	program = filepath.Join(dir, "twokf")
	build := exec.Command("go", "build", "-o", program, "example.org/twokf")
	build.Env = append(os.Environ(), "CGO_ENABLED=0")
	if out, err := build.CombinedOutput(); err != nil {
		fmt.Fprintf(os.Stderr, "%v\n%s", err, out)
		return 1
	}
	return m.Run()
}

// run is one run of the program: how, and what came of it.
type run struct {
	args  []string
	stdin string
	dir   string
	env   []string // instead of a UTF-8 locale

	code      int
	out, errs string
}

// patience is how long any run may take before it counts as hung.
const patience = time.Minute

func (r run) now(t *testing.T) run {
	t.Helper()
	ctx, cancel := context.WithTimeout(context.Background(), patience)
	defer cancel()
	cmd := exec.CommandContext(ctx, program, r.args...)
	cmd.Dir, cmd.Env = r.dir, r.environment(t)
	cmd.Stdin = strings.NewReader(r.stdin)
	var out, errs bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &errs
	err := cmd.Run()
	var failed *exec.ExitError
	if err != nil && !errors.As(err, &failed) {
		t.Fatal(err)
	}
	if ctx.Err() != nil {
		t.Fatalf("%q hangs", r.args)
	}
	r.code, r.out, r.errs = cmd.ProcessState.ExitCode(), out.String(), errs.String()
	return r
}

// environment keeps away from the settings and the drafts of whoever runs the test.
func (r run) environment(t *testing.T) []string {
	env := []string{"PATH=" + filepath.Dir(program) + string(os.PathListSeparator) + os.Getenv("PATH"), "HOME=" + t.TempDir(), "TERM=xterm-256color"}
	if r.env == nil {
		return append(env, "LC_ALL=C.UTF-8")
	}
	return append(env, r.env...)
}

// answers runs the program and returns what must be a success without a word on
// standard error.
func answers(t *testing.T, args ...string) string {
	t.Helper()
	r := run{args: args}.now(t)
	if r.code != 0 || r.errs != "" {
		t.Errorf("%q: exit code %d, %q on standard error", args, r.code, r.errs)
	}
	return r.out
}

// complaint holds a failed run against the manners of all failures: nothing on
// standard output, one line on standard error that says whose it is.
func (r run) complaint(t *testing.T, code int, want string) {
	t.Helper()
	if r.code != code {
		t.Errorf("%q: exit code %d, expected %d", r.args, r.code, code)
	}
	if r.out != "" {
		t.Errorf("%q: %q on standard output", r.args, r.out)
	}
	if !strings.HasPrefix(r.errs, "twokf: ") || strings.Count(r.errs, "\n") != 1 || !strings.HasSuffix(r.errs, "\n") {
		t.Errorf("%q: expected one line, got %q", r.args, r.errs)
	}
	if !strings.Contains(r.errs, want) {
		t.Errorf("%q: %q does not say %q", r.args, r.errs, want)
	}
}

// The list of presets has them all; the file of each is printed as it was
// written and has the same answers as its name.
func TestPresetsRoundTrip(t *testing.T) {
	list := strings.Split(strings.TrimSuffix(answers(t, "presets"), "\n"), "\n")
	all := presets.List()
	if len(list) != len(all) {
		t.Fatalf("%d presets are listed, %d exist", len(list), len(all))
	}
	for i, p := range all {
		if f := strings.Fields(list[i]); f[0] != p.Name || strings.Join(f[1:], " ") != p.Title {
			t.Errorf("line %d is %q", i+1, list[i])
		}
		file := answers(t, "presets", p.Name)
		if raw, err := presets.Raw(p.Name); err != nil || file != string(raw) {
			t.Errorf("%s is not printed as it was written: %v", p.Name, err)
		}
		piped := run{args: []string{"solve", "-", "--json", "--jobs", "1"}, stdin: file}.now(t)
		named := answers(t, "solve", p.Name, "--json", "--jobs", "1")
		if piped.code != 0 || !reflect.DeepEqual(answersOf(t, piped.out), answersOf(t, named)) {
			t.Errorf("%s: exit code %d, %q, or other answers from its file", p.Name, piped.code, piped.errs)
		}
	}
}

// answersOf reads a JSON report, all but the time it took.
func answersOf(t *testing.T, text string) map[string]any {
	t.Helper()
	var report map[string]any
	if err := json.Unmarshal([]byte(text), &report); err != nil {
		t.Fatalf("%v: %.200s", err, text)
	}
	delete(report["solver"].(map[string]any), "seconds")
	return report
}

// valueOf returns one answer of a JSON report.
func valueOf(t *testing.T, report map[string]any, name string) (float64, string) {
	t.Helper()
	a, ok := report["answers"].(map[string]any)[name].(map[string]any)
	if !ok {
		t.Fatalf("no answer %s", name)
	}
	return a["value"].(float64), a["unit"].(string)
}

// A chain file in the folder is read by its name, and a preset needs no file.
// What "-" reads is the same.
func TestChainFromAFile(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "mine.toml"), []byte(goodFile), 0o600); err != nil {
		t.Fatal(err)
	}
	file := run{args: []string{"solve", "mine.toml", "--json"}, dir: dir}.now(t)
	piped := run{args: []string{"solve", "-", "--json"}, stdin: goodFile}.now(t)
	if file.code != 0 || file.errs != "" || !reflect.DeepEqual(answersOf(t, file.out), answersOf(t, piped.out)) {
		t.Errorf("exit code %d, %q, or other answers from standard input", file.code, file.errs)
	}
	if err := os.WriteFile(filepath.Join(dir, "bare"), []byte(goodFile), 0o600); err != nil {
		t.Fatal(err)
	}
	if bare := (run{args: []string{"solve", "bare", "--json"}, dir: dir}.now(t)); bare.code != 0 {
		t.Errorf("a file without an extension: %q", bare.errs)
	}
}

// The default chain is the first preset.
func TestWithoutAName(t *testing.T) {
	if !reflect.DeepEqual(answersOf(t, answers(t, "solve", "--json")), answersOf(t, answers(t, "solve", presets.List()[0].Name, "--json"))) {
		t.Error("not the first preset")
	}
}

// --set changes the chain, with units; the order and the short keys do not matter.
// 300 K is 0.0258520 eV (CODATA 2018, k_B exact).
func TestSet(t *testing.T) {
	of := func(args ...string) map[string]any {
		t.Helper()
		return answersOf(t, answers(t, append([]string{"solve", "half", "--json", "--jobs", "1"}, args...)...))
	}
	base := of("--set", "temperature=300 K")
	conditions := base["chain"].(map[string]any)["conditions"].(map[string]any)
	if T := conditions["temperature"].(float64); T < 0.02585199 || T > 0.02585200 {
		t.Errorf("300 K is %v eV", T)
	}
	for _, same := range [][]string{
		{"--set=conditions.temperature=300K"},
		{"--set", "temperature = 300 K"},
		{"--set", "temperature=77 K", "--set", "temperature=300 K"},
		{"--set", "energy=t", "--set", "energy=eV", "--set", "temperature=300 K"},
	} {
		if !reflect.DeepEqual(base, of(same...)) {
			t.Errorf("%q has other answers", same)
		}
	}
	for assignment, want := range map[string]float64{"temperature=25 meV": 0.025, "temperature=0.1 t": 0.025, "temperature=pi/100": 0.031415926535897934, "temperature=0.02": 0.02} {
		got := of("--set", assignment)["chain"].(map[string]any)["conditions"].(map[string]any)["temperature"].(float64)
		if d := got - want; d > 1e-16 || d < -1e-16 {
			t.Errorf("%s is %v", assignment, got)
		}
	}
	if _, there := of("--set", "site_phonon=off")["answers"].(map[string]any)["transition_temperature"]; there {
		t.Error("no phonon, but a transition temperature")
	}
	together := of("--set", "sites=24", "--set", "electrons=24", "--set", "title=a = b, \"c\"")
	if chain := together["chain"].(map[string]any); chain["title"] != `a = b, "c"` || chain["chain"].(map[string]any)["sites"] != 24.0 {
		t.Errorf("%v", chain)
	}
}

// Published polyacetylene through the command line: T_P and λ by an independent
// mpmath computation from the values of W. P. Su, J. R. Schrieffer, A. J. Heeger,
// Phys. Rev. B 22, 2099 (1980).
func TestAnswersThroughTheProgram(t *testing.T) {
	report := answersOf(t, answers(t, "solve", "polyene", "--json"))
	for name, want := range map[string]float64{"transition_temperature": 0.360459483445, "coupling": 0.407679176133} {
		if got, unit := valueOf(t, report, name); got < want*(1-1e-11) || got > want*(1+1e-11) || (unit != "eV" && unit != "") {
			t.Errorf("%s is %.12g %s, expected %.12g", name, got, unit, want)
		}
	}
}

// The number of cores changes no answer.
func TestJobs(t *testing.T) {
	one, three := answersOf(t, answers(t, "solve", "mixed", "--json", "--jobs", "1")), answersOf(t, answers(t, "solve", "mixed", "--json", "--jobs=3"))
	if !reflect.DeepEqual(one, three) {
		t.Error("the answers differ")
	}
}

// --csv writes the files that it names on standard output.
func TestCSVFiles(t *testing.T) {
	dir := t.TempDir()
	r := run{args: []string{"solve", "spinless", "--csv", "new/answers"}, dir: dir}.now(t)
	if r.code != 0 || r.errs != "" {
		t.Fatalf("exit code %d, %q", r.code, r.errs)
	}
	files := strings.Fields(r.out)
	if len(files) != 8 || files[0] != filepath.Join("new", "answers", "answers.csv") {
		t.Errorf("%q", files)
	}
	for _, f := range files {
		if data, err := os.ReadFile(filepath.Join(dir, f)); err != nil || len(data) == 0 {
			t.Errorf("%s: %v", f, err)
		}
	}
}

// Where there is no terminal the bench gives its answers as text and says so.
func TestBenchWithoutATerminal(t *testing.T) {
	text := withoutTime(answers(t, "solve", "spinless"))
	for name, env := range map[string][]string{
		"pipe":        {"LC_ALL=C.UTF-8"},
		"dumb":        {"LC_ALL=C.UTF-8", "TERM=dumb"},
		"no terminal": {"LC_ALL=C.UTF-8", "TERM="},
		"no colour":   {"LC_ALL=C.UTF-8", "NO_COLOR=1"},
	} {
		r := run{args: []string{"spinless"}, env: env}.now(t)
		if r.code != 0 || withoutTime(r.out) != text {
			t.Errorf("%s: exit code %d, other text:\n%s", name, r.code, r.out)
		}
		if !strings.Contains(r.errs, "no terminal for the bench") || strings.Count(r.errs, "\n") != 1 {
			t.Errorf("%s: %q on standard error", name, r.errs)
		}
		if strings.Contains(r.out+r.errs, "\x1b") {
			t.Errorf("%s: escape sequences in a pipe", name)
		}
	}
	if set := (run{args: []string{"spinless", "--set", "sites=42"}}.now(t)); !strings.Contains(set.out, "42 sites, ring") {
		t.Errorf("--set is lost: %s", set.out)
	}
}

var took = regexp.MustCompile(`\d+\.\d+ s\n`)

func withoutTime(s string) string { return took.ReplaceAllString(s, "s\n") }

// The locale decides on signs beyond ASCII, LC_ALL before LC_CTYPE before LANG
// (POSIX), and --ascii overrules it; what ASCII spells is never cut in two.
func TestASCIIOnly(t *testing.T) {
	for _, x := range []struct {
		env   []string
		args  []string
		ascii bool
	}{
		{[]string{"LC_ALL=C.UTF-8"}, nil, false},
		{[]string{"LANG=de_DE.utf8"}, nil, false},
		{[]string{"LC_ALL=C.UTF-8"}, []string{"--ascii"}, true},
		{[]string{"LC_ALL=C", "LANG=en_US.UTF-8"}, nil, true},
		{[]string{"LC_CTYPE=C", "LANG=en_US.UTF-8"}, nil, true},
		{[]string{"LC_ALL=", "LANG=en_US.UTF-8"}, nil, false},
		{[]string{"LANG=en_US.ISO-8859-1"}, nil, true},
		{[]string{"X=Y"}, nil, true},
	} {
		out := run{args: append([]string{"solve", "spinless", "--set", "title=" + strings.Repeat("λ", 2000)}, x.args...), env: x.env}.now(t).out
		if ascii := strings.IndexFunc(out, func(r rune) bool { return r > '~' }) < 0; ascii != x.ascii || !utf8.ValidString(out) {
			t.Errorf("%q, %q: just ASCII: %v", x.env, x.args, ascii)
		}
		title, _, _ := strings.Cut(out, "\n")
		if want := strings.Repeat(map[bool]string{true: "lambda", false: "λ"}[x.ascii], 2000); title != want {
			t.Errorf("%q, %q: the title has become %.60q…", x.env, x.args, title)
		}
	}
}

// Every command says how it is used, with an example that works.
func TestHelp(t *testing.T) {
	dir := t.TempDir()
	for name, preset := range map[string]string{"mine.toml": "half", "doped.toml": "doped"} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(answers(t, "presets", preset)), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	tried := map[string]bool{}
	for _, command := range []string{"", "solve", "presets", "version", "help", "completion"} {
		about := strings.Fields(command)
		text := answers(t, append(about, "--help")...)
		if short := answers(t, append(about, "-h")...); short != text {
			t.Errorf("%q: -h says something else", command)
		}
		if long := answers(t, append([]string{"help"}, about...)...); long != text {
			t.Errorf("%q: help says something else", command)
		}
		_, examples, found := strings.Cut(text, "\nExamples:\n")
		if !found {
			t.Errorf("%q: no example in\n%s", command, text)
			continue
		}
		examples, _, _ = strings.Cut(examples, "\n\n")
		for _, example := range strings.Split(examples, "\n") {
			if example = strings.TrimSpace(example); strings.HasPrefix(example, "twokf ") && !tried[example] {
				tried[example] = true
				example, _, _ = strings.Cut(example, "   ") // what follows is an explanation
				cmd := exec.Command("sh", "-c", "set -e; "+example)
				cmd.Dir, cmd.Env = dir, run{}.environment(t)
				if out, err := cmd.CombinedOutput(); err != nil || len(out) == 0 && !strings.Contains(example, ">") {
					t.Errorf("%s: %v\n%s", example, err, out)
				}
			}
		}
	}
	if len(tried) < 8 {
		t.Errorf("just %d examples were tried: %v", len(tried), tried)
	}
}

func TestVersion(t *testing.T) {
	if v := answers(t, "version"); !regexp.MustCompile(`^twokf \S.* go1\.\S+ \w+/\w+\n$`).MatchString(v) {
		t.Errorf("%q", v)
	}
}

// Completion scripts exist for the usual shells, and what they ask the program
// is answered: presets, keys, commands.
func TestCompletion(t *testing.T) {
	for _, shell := range []string{"bash", "zsh", "fish", "powershell"} {
		if script := answers(t, "completion", shell); len(script) < 1000 || !strings.Contains(script, "__complete") {
			t.Errorf("%s: %.200q", shell, script)
		}
	}
	for _, x := range []struct{ args, want string }{
		{"solve|", "polyene\tPolyacetylene, half filled\n"},
		{"presets|tr", "trimer\t"},
		{"|", "half\t"},
		{"so", "solve\t"},
		{"solve|--set|", "conditions.temperature=\n"},
		{"solve|--js", "--json\t"},
	} {
		r := run{args: append([]string{"__complete"}, strings.Split(strings.TrimSuffix(x.args, "|")+map[bool]string{true: "|"}[strings.HasSuffix(x.args, "|") && x.args != "|"], "|")...)}.now(t)
		if r.code != 0 || !strings.Contains("\n"+r.out, "\n"+x.want) {
			t.Errorf("%q: %q is not offered:\n%s", x.args, x.want, r.out)
		}
	}
	keys := run{args: []string{"__complete", "solve", "--set", ""}}.now(t).out
	for _, p := range model.Params() {
		if !strings.Contains(keys, p.Key+"=") {
			t.Errorf("%s is not offered", p.Key)
		}
	}
}

// An interrupt ends a long study, and the wait for a chain that never comes, with
// 130 and a word.
func TestInterrupt(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("no signals between processes here")
	}
	long, err := os.ReadFile("../presets/mixed.toml")
	if err != nil {
		t.Fatal(err)
	}
	for _, x := range []struct {
		name  string
		args  []string
		input string // "" leaves standard input open
		after time.Duration
	}{
		{"the susceptibility of a huge ring", []string{"solve", "-", "--set", "sites=2000000", "--json"}, string(long), 200 * time.Millisecond},
		{"a long relaxation", []string{"solve", "-", "--set", "sites=200000", "--jobs", "1"}, string(long), 1500 * time.Millisecond},
		{"a million sites", []string{"solve", "polyene", "--set", "sites=1000000", "--jobs", "1"}, " ", 500 * time.Millisecond},
		{"the wait for standard input", []string{"solve", "-"}, "", 200 * time.Millisecond},
		{"the wait for standard input before the bench", []string{"-"}, "", 200 * time.Millisecond},
	} {
		for _, signal := range []os.Signal{os.Interrupt, syscall.SIGTERM} {
			t.Run(fmt.Sprint(x.name, ", ", signal), func(t *testing.T) {
				t.Parallel()
				for wait := x.after; ; wait *= 2 {
					code, out, errs := interrupted(t, x.args, x.input, signal, wait)
					if code < 0 && wait < 10*time.Second {
						continue // it had not yet begun to listen
					}
					if code != 130 || out != "" || errs != "twokf: interrupted\n" {
						t.Errorf("exit code %d, %q, %q on standard error", code, out, errs)
					}
					return
				}
			})
		}
	}
}

// prompt is how soon a run must end after a signal: a twentieth of a second is
// usual.
const prompt = 5 * time.Second

// interrupted runs the program, sends it a signal after a while and waits for its
// end; the exit code is -1 if the signal killed it.
func interrupted(t *testing.T, args []string, input string, signal os.Signal, wait time.Duration) (code int, out, errs string) {
	t.Helper()
	cmd := exec.Command(program, args...)
	cmd.Env = run{}.environment(t)
	stdin, err := cmd.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	var outs, says bytes.Buffer
	cmd.Stdout, cmd.Stderr = &outs, &says
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	if input != "" {
		if _, err := stdin.Write([]byte(input)); err != nil {
			t.Fatal(err)
		}
		stdin.Close()
	}
	time.Sleep(wait)
	if err := cmd.Process.Signal(signal); err != nil {
		t.Fatal(err)
	}
	end := make(chan struct{})
	go func() {
		defer close(end)
		_ = cmd.Wait() // the exit code says it all
	}()
	select {
	case <-end:
	case <-time.After(prompt):
		_ = cmd.Process.Kill()
		<-end
		t.Fatalf("%q goes on after the signal", args)
	}
	return cmd.ProcessState.ExitCode(), outs.String(), says.String()
}
