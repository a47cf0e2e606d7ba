package tui_test

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

const goodFile = "energy = \"t\"\n[chain]\nsites = 10\n[electrons]\nhopping = 1\nfilling = 1\n"

// What is typed wrong on the command line ends with 2, what turns out wrong with
// 1; each mistake has a message of its own that says what would be right.
func TestMistakesOnTheCommandLine(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "good.toml"), []byte(goodFile), 0o600); err != nil {
		t.Fatal(err)
	}
	const usage, failure = 2, 1
	seen := map[string]string{}
	for _, x := range []struct {
		args  string // separated by |
		stdin string
		code  int
		want  string
	}{
		// flags and commands
		{args: "--nosuch", code: usage, want: "unknown flag: --nosuch"},
		{args: "solve|--nope", code: usage, want: "unknown flag: --nope"},
		{args: "-x", code: usage, want: "'x' in -x"},
		{args: "--json", code: usage, want: "unknown flag: --json"},
		{args: "presets|--csv=d", code: usage, want: "unknown flag: --csv"},
		{args: "version|--set|a=b", code: usage, want: "unknown flag: --set"},
		{args: "solve|--set", code: usage, want: "needs an argument: --set"},
		{args: "solve|--csv", code: usage, want: "needs an argument: --csv"},
		{args: "--jobs", code: usage, want: "needs an argument: --jobs"},
		{args: "solve|--jobs|0", code: usage, want: "--jobs 0: at least 1 core"},
		{args: "--jobs|-3", code: usage, want: "--jobs -3: at least 1 core"},
		{args: "solve|--jobs|many", code: usage, want: `"many" for "--jobs"`},
		{args: "solve|--jobs|1.5", code: usage, want: `"1.5" for "--jobs"`},
		{args: "solve|--jobs|99999999999999999999", code: usage, want: "out of range"},
		{args: "solve|--json=perhaps", code: usage, want: `"perhaps" for "--json"`},
		{args: "solve|half|--json|--csv|d", code: usage, want: "--json and --csv exclude each other"},
		{args: "solve|--csv=|half", code: usage, want: "--csv needs the name of a folder"},
		{args: "help|frobnicate", code: usage, want: `no command "frobnicate"; the commands are solve, presets and version`},
		{args: "help|solve|again", code: usage, want: `no command "solve again"`},
		{args: "completion", code: usage, want: "bash, fish, powershell or zsh"},
		{args: "completion|tcl", code: usage, want: `"tcl"`},
		{args: "version|please", code: usage, want: `"please"`},
		// which chain
		{args: "solve|half|quarter", code: usage, want: `one chain at a time: "half" and "quarter"`},
		{args: "half|trimer|mixed", code: usage, want: `one chain at a time: "half" and "trimer"`},
		{args: "presets|half|weak", code: usage, want: `one chain at a time: "half" and "weak"`},
		{args: "polyen", code: usage, want: `no preset "polyen"; the nearest is polyene`},
		{args: "solve|Halve", code: usage, want: `no preset "Halve"; the nearest is half`},
		{args: "solve|solve", code: usage, want: "there is no file of that name"},
		{args: "solve|", code: usage, want: `no preset ""`},
		{args: "presets|tetramere", code: usage, want: "the nearest is tetramer"},
		{args: "presets|-", code: usage, want: `no preset "-"`},
		// --set: the assignment
		{args: "solve|--set|temperature", code: usage, want: `"temperature" is not an assignment; write key=value`},
		{args: "solve|--set|=3", code: usage, want: `no parameter ""`},
		{args: "solve|--set|temprature=1", code: usage, want: "the nearest is conditions.temperature"},
		{args: "solve|--set|bond_phonon.mass=1", code: usage, want: `no parameter "bond_phonon.mass"; the nearest is`},
		{args: "solve|--set|frequency=1", code: usage, want: "may mean bond_phonon.frequency or site_phonon.frequency"},
		{args: "solve|half|--set|temperature=0.1|--set|colour=red", code: usage, want: `no parameter "colour"`},
		{args: "solve|--set|bond_phonon=perhaps", code: usage, want: `bond_phonon must be "on" or "off", not "perhaps"`},
		{args: "solve|--set|filling=1|--set|electrons=4", code: usage, want: "exclude each other"},
		// --set: numbers
		{args: "solve|--set|temperature=", code: usage, want: "there is no number"},
		{args: "solve|--set|temperature=warm", code: usage, want: `"warm" is not a number`},
		{args: "solve|--set|temperature=0,1", code: usage, want: "decimals are written with a point"},
		{args: "solve|--set|temperature=1/0", code: usage, want: "divided by zero"},
		{args: "solve|--set|temperature=2*3", code: usage, want: "only pi may follow a *"},
		{args: "solve|--set|temperature=NaN", code: usage, want: "only finite numbers"},
		{args: "solve|--set|temperature=1e999", code: usage, want: "too large"},
		{args: "solve|--set|temperature=1e-999", code: usage, want: "too small to be told from zero"},
		{args: "solve|--set|sites=10.5", code: usage, want: "chain.sites must be a whole number from 1 to"},
		{args: "solve|--set|sites=ten", code: usage, want: `"ten" is not a number`},
		// --set: units
		{args: "solve|--set|temperature=300 F", code: usage, want: "in eV, meV, t, K, THz or cm-1"},
		{args: "solve|--set|temperature=300 k", code: usage, want: "small and capital letters differ, write K"},
		{args: "solve|--set|hopping=1 t", code: usage, want: "t is this very number"},
		{args: "solve|--set|filling=1 K", code: usage, want: "this number has no unit"},
		{args: "solve|--set|spacing=1 nm", code: usage, want: "a number in Å"},
		{args: "solve|spinless|--set|temperature=300 K", code: usage, want: "laboratory units need a chain in eV, and this one counts energies in t"},
		{args: "solve|spinless|--set|hopping=1 eV", code: usage, want: "must be a number in t"},
		// --set: ranges
		{args: "solve|--set|temperature=-1", code: usage, want: "temperatures start at absolute zero"},
		{args: "solve|--set|hopping=-1", code: usage, want: "its sign only shifts every wave vector by π"},
		{args: "solve|--set|hopping=1e10", code: usage, want: "1e-12 to 1e9 eV"},
		{args: "solve|--set|bond_phonon.stiffness=0", code: usage, want: "bond_phonon.stiffness must be a number from"},
		{args: "solve|--set|bond_phonon.coupling=-4.1", code: usage, want: "what is called a positive displacement"},
		{args: "solve|--set|sites=0", code: usage, want: "from 1 to 2097152, not 0"},
		{args: "solve|--set|sites=2097153", code: usage, want: "not 2097153"},
		{args: "solve|--set|spin=3", code: usage, want: "electrons.spin must be 1 or 2"},
		{args: "solve|--set|filling=2.5", code: usage, want: "from 0 to 2, not 2.5"},
		{args: "solve|--set|electrons=405", code: usage, want: "from 0 to 404, not 405"},
		{args: "solve|--set|boundary=loop", code: usage, want: `chain.boundary must be "ring" or "open", not "loop"`},
		{args: "solve|--set|energy=J", code: usage, want: `energy must be "t" or "eV", not "J"`},
		{args: "solve|--set|title=" + strings.Repeat("long ", 1000), code: usage, want: "at most 4096 bytes"},
		// files
		{args: "missing.toml", code: failure, want: "missing.toml: no such file or directory"},
		{args: "solve|./none", code: failure, want: "./none: no such file or directory"},
		{args: "solve|good.toml/below", code: failure, want: "good.toml/below: not a directory"},
		{args: "solve|.", code: failure, want: "is a directory"},
		{args: "solve|-", code: failure, want: "standard input: there is nothing in it; a chain file needs at least energy, chain.sites, electrons.hopping and electrons.filling"},
		{args: "-", stdin: "hello\n", code: failure, want: `standard input:1:6: after a key comes "="`},
		{args: "solve|-", stdin: strings.Repeat("#", 1<<16+1), code: failure, want: "standard input: this is longer than 65536 bytes"},
		{args: "solve|good.toml|--csv|good.toml", code: failure, want: "good.toml: not a directory"},
		{args: "solve|good.toml|--set|temperature=300 K", code: usage, want: "laboratory units need a chain in eV"},
	} {
		r := run{args: strings.Split(x.args, "|"), stdin: x.stdin, dir: dir}.now(t)
		r.complaint(t, x.code, x.want)
		if other, twice := seen[r.errs]; twice && !(strings.Contains(x.args, "300 K") && strings.Contains(other, "300 K")) {
			t.Errorf("%q and %q end with the same words: %q", x.args, other, r.errs)
		}
		seen[r.errs] = x.args
	}
	if data, err := os.ReadFile(filepath.Join(dir, "good.toml")); err != nil || string(data) != goodFile {
		t.Errorf("the chain file has changed: %v", err)
	}
}

// What is wrong in a chain file ends with 1 and is told with the file, the place
// and what would be accepted.
func TestMistakesInAFile(t *testing.T) {
	const (
		head      = "energy = \"eV\"\n[chain]\nsites = 100\n"
		electrons = head + "[electrons]\nhopping = 2.5\nfilling = 1\n"
	)
	dir := t.TempDir()
	for i, x := range []struct{ file, want string }{
		{"", `: there is nothing in it; a chain file needs at least energy, chain.sites, electrons.hopping and electrons.filling`},
		{"\x00\x01", `:1:1: the byte 0x00 is not UTF-8 text`},
		{"{\"energy\": \"eV\"}\n", `:1:1: a key is made of letters, digits and underscores`},
		{"energy: \"eV\"\n", `:1:7: after a key comes "=" and then its value`},
		{"energy = eV\n", `:1:10: a value is a number, or text in double quotes`},
		{"energy = \"eV\n", `:1:13: the text that begins on this line lacks its closing quote`},
		{"energy = \"J\"\n", `:1:1: energy must be "t" or "eV", not "J"`},
		{"[chain]\nsites = 10\n", `: energy is missing and must be "t" or "eV"`},
		{"energy = \"eV\"\n[chain\n", `:2:7: `},
		{head, `electrons.hopping is missing and must be 0 or a number from`},
		{head + "[electron]\nhopping = 1\n", `:4:`},
		{electrons + "spn = 2\n", `:7:1: there is no parameter "electrons.spn"; the nearest is electrons.spin`},
		{electrons + "electrons = 3\n", `:7:1: electrons.filling and electrons.electrons exclude each other`},
		{electrons + "filling = 1\n", `:7:1: `},
		{electrons + "spin = 3\n", `:7:1: electrons.spin must be 1 or 2, not 3`},
		{electrons + "next_hopping = \"0,1\"\n", `:7:1: electrons.next_hopping must be a number in eV, meV, t, K, THz or cm-1, not "0,1": decimals are written with a point`},
		{electrons + "next_hopping = true\n", `:7:1: electrons.next_hopping must be`},
		{electrons + "next_hopping = nan\n", `:7:1: electrons.next_hopping must be`},
		{electrons + "[bond_phonon]\ncoupling = 4.1\n", `:7:2: bond_phonon.stiffness is missing`},
		{electrons + "[bond_phonon]\ncoupling = -4.1\nstiffness = 21\n", `:8:1: bond_phonon.coupling must be 0 or a number from`},
		{electrons + "[bond_phonon]\ncoupling = 4.1\nstiffness = 0\n", `:9:1: bond_phonon.stiffness must be a number from 1e-12 to 1e9 eV/Å²`},
		{electrons + "[conditions]\ntemperature = \"300 F\"\n", `:8:1: conditions.temperature must be a number in eV, meV, t, K, THz or cm-1, not "300 F"`},
		{electrons + "[conditions]\ntemperature = -1\n", `:8:1: conditions.temperature must be`},
		{strings.Replace(electrons, "100", "0", 1), `:3:1: chain.sites must be a whole number from 1 to 2097152, not 0`},
		{strings.Replace(electrons, "100", "1e2", 1) + "boundary = \"loop\"\n", `electrons.boundary`},
		{strings.Replace(electrons, "eV", "t", 1) + "[conditions]\ntemperature = \"300 K\"\n", `:8:1: conditions.temperature must be a number in t, not "300 K": laboratory units need a chain in eV`},
		{strings.Replace(electrons, "filling = 1", "filling = 3", 1), `:6:1: electrons.filling must be a number from 0 to 2, not 3`},
	} {
		name := fmt.Sprintf("bad-%d.toml", i)
		if err := os.WriteFile(filepath.Join(dir, name), []byte(x.file), 0o600); err != nil {
			t.Fatal(err)
		}
		r := run{args: []string{"solve", name}, dir: dir}.now(t)
		r.complaint(t, 1, x.want)
		if !strings.HasPrefix(r.errs, "twokf: "+name+":") {
			t.Errorf("%q does not begin with the file's name", r.errs)
		}
		if piped := (run{args: []string{"solve", "-"}, stdin: x.file}.now(t)); piped.code != 1 || strings.ReplaceAll(r.errs, name, "standard input") != piped.errs {
			t.Errorf("standard input is told otherwise: %q, %q", piped.errs, r.errs)
		}
	}
}

// A file that may not be read is a failure, not a preset.
func TestUnreadableFile(t *testing.T) {
	if os.Getuid() == 0 || runtime.GOOS == "windows" {
		t.Skip("nothing is unreadable here")
	}
	file := filepath.Join(t.TempDir(), "secret.toml")
	if err := os.WriteFile(file, []byte(goodFile), 0); err != nil {
		t.Fatal(err)
	}
	run{args: []string{"solve", file}}.now(t).complaint(t, 1, "permission denied")
}

// Where standard output cannot take the results, that is a failure.
func TestFullDisk(t *testing.T) {
	full, err := os.OpenFile("/dev/full", os.O_WRONLY, 0)
	if err != nil {
		t.Skip("no full device here")
	}
	defer full.Close()
	for _, args := range [][]string{{"solve", "spinless"}, {"solve", "spinless", "--json"}, {"presets"}, {"presets", "half"}, {"version"}} {
		cmd := exec.Command(program, args...)
		var errs bytes.Buffer
		cmd.Stdout, cmd.Stderr, cmd.Env = full, &errs, run{}.environment(t)
		if err := cmd.Run(); err == nil || cmd.ProcessState.ExitCode() != 1 || !strings.Contains(errs.String(), "no space left") {
			t.Errorf("%q: %v, %q", args, err, errs.String())
		}
	}
}
