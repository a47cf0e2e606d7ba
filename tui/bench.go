// Package tui is the terminal program: the bench with its four live plots, the
// knobs that turn the chain's parameters, the readout and the doubts.
//
// Data walk one way: a key makes an edited copy of the chain, a study of it is
// asked for, its parts come back as they finish, and views draw from those
// parts alone. Computation never blocks a key, and the newest change wins.
package tui

import (
	"context"
	"fmt"
	"io"
	"math"
	"os"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/muesli/termenv"

	"example.org/twokf/model"
)

// Settings says what the bench opens with.
type Settings struct {
	Chain  model.Chain
	From   string // where the chain came from, in words
	File   string // the file that it is saved to; "" if there is none yet
	Edited bool   // Chain differs from what From holds

	ASCII   bool
	Jobs    int
	Profile *termenv.Profile // colours; nil: what the environment says
	State   string           // folder for unsaved work; "" for the usual place, "-" for none
	Input   io.Reader
	Output  io.Writer
}

// Run opens the bench and returns when it is left.
func Run(ctx context.Context, set Settings) error {
	b := newBench(ctx, set)
	program := tea.NewProgram(b, tea.WithContext(ctx), tea.WithInput(set.Input), tea.WithOutput(set.Output),
		tea.WithAltScreen(), tea.WithMouseCellMotion(), tea.WithFPS(30))
	_, err := program.Run()
	b.stop()
	if kept := b.drafts.keep(b.chain, b.edited()); kept != "" {
		fmt.Fprintf(os.Stderr, "twokf: the chain was not saved; D on the bench picks it up next time (it is kept in %s)\n", kept)
	}
	return err
}

// Bench is the state of the program. It implements tea.Model.
type Bench struct {
	ctx      context.Context
	settings Settings
	w, h     int
	keys     []action

	chain model.Chain
	saved model.Chain // as it was opened or saved last
	from  string
	file  string
	trail trail
	knob  int // index into knobs

	inquiry inquiry
	drafts  drafts

	ascii     bool
	look      look
	large     int // index of the view that has the whole screen, −1 for none
	reading   reading
	sites     struct{ from, to int } // shown by the chain view; 0, 0: all
	staggered staggering

	page    page // what covers the bench, nil for nothing
	prompt  *prompt
	message string // one line for the user, until the next key
	isError bool

	screen screen
}

// reading is where a plot is read.
type reading struct {
	on   bool
	view int
	x    float64
}

// staggering says how the lattice pattern is shown.
type staggering int

const (
	staggerAuto staggering = iota // the period-2 amplitude close to half filling
	staggerOff
	staggerOn
)

func newBench(ctx context.Context, set Settings) *Bench {
	b := &Bench{ctx: ctx, settings: set, chain: set.Chain, saved: set.Chain, from: set.From, file: set.File,
		ascii: set.ASCII, large: -1, keys: keyTable(), drafts: openDrafts(set.State)}
	if set.Edited {
		b.saved = model.Chain{}
	}
	profile := termenv.Ascii
	if set.Profile != nil {
		profile = *set.Profile
	} else if set.Output != nil {
		profile = termenv.NewOutput(set.Output).EnvColorProfile()
	}
	b.look = newLook(profile)
	for i, p := range knobs {
		if p.Key == "conditions.temperature" {
			b.knob = i
		}
	}
	b.say("? lists the keys; arrows choose a knob and turn it, Enter types its value")
	if d := b.drafts.newest(); d != nil {
		b.say(fmt.Sprintf("an unsaved chain from %s is kept: D picks it up", d.when.Format("2 Jan 15:04")))
	}
	return b
}

// Init asks for the first study.
func (b *Bench) Init() tea.Cmd { return b.inquiry.ask() }

// Update routes a message to what it is for.
func (b *Bench) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	b.screen.dirty = true
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		b.w, b.h = msg.Width, msg.Height
	case tea.KeyMsg:
		return b, b.onKey(msg)
	case tea.MouseMsg:
		return b, b.onMouse(msg)
	case startMsg:
		if msg.gen == b.inquiry.gen {
			return b, b.inquiry.start(b.ctx, b.chain, b.settings.Jobs)
		}
	case updateMsg:
		b.inquiry.onUpdate(msg)
		return b, listen(msg.gen, msg.from)
	case answeredMsg:
		if b.inquiry.onAnswer(msg) && msg.err != nil && b.ctx.Err() == nil {
			b.complain(msg.err)
		}
	case slowMsg:
		if msg.gen == b.inquiry.gen && b.inquiry.busy {
			b.inquiry.slow = true
		}
	case draftMsg:
		return b, b.drafts.write(b.chain, b.edited(), msg)
	case savedMsg:
		b.onSaved(msg)
	}
	return b, nil
}

func (b *Bench) onKey(msg tea.KeyMsg) tea.Cmd {
	var cmds []tea.Cmd
	for _, k := range split(msg) {
		cmds = append(cmds, b.onOneKey(k))
	}
	return tea.Batch(cmds...)
}

func (b *Bench) onOneKey(k tea.KeyMsg) tea.Cmd {
	switch k.String() {
	case "ctrl+c":
		return b.quit()
	case "ctrl+z":
		return tea.Suspend
	}
	switch {
	case b.prompt != nil:
		return b.prompt.key(b, k)
	case b.page != nil:
		b.message = ""
		return b.page.key(b, k)
	}
	b.message = ""
	return b.press(k)
}

// say shows one line until the next key.
func (b *Bench) say(s string) { b.message, b.isError = s, false }

// complain shows what went wrong until the next key.
func (b *Bench) complain(err error) { b.message, b.isError = err.Error(), true }

// edited reports whether there is work that is not in a file.
func (b *Bench) edited() bool { return b.chain != b.saved }

// change makes c the chain on the bench and asks for its study.
func (b *Bench) change(c model.Chain) tea.Cmd {
	if c == b.chain {
		return nil
	}
	b.trail.push(b.chain)
	return b.show(c)
}

// show is change without a trace on the trail.
func (b *Bench) show(c model.Chain) tea.Cmd {
	if c.Sites != b.chain.Sites {
		b.sites.from, b.sites.to = 0, 0
	}
	b.chain = c
	return tea.Batch(b.inquiry.ask(), b.drafts.soon())
}

func (b *Bench) choose(by int) tea.Cmd {
	b.knob = (b.knob + by + len(knobs)) % len(knobs)
	return nil
}

func (b *Bench) turn(turns int, fine bool) tea.Cmd {
	p := knobs[b.knob]
	if !p.Given(b.chain) && p.Get(b.chain) == 0 && branchOf(p) != "" {
		b.say(fmt.Sprintf("this chain has no %s; Enter gives it one", branchOf(p)))
		return nil
	}
	next := p.Step(b.chain, turns, fine)
	if next == b.chain {
		b.say(fmt.Sprintf("%s stays at %s: it must be %s", b.symbol(p), p.Format(b.chain), p.Range(b.chain)))
	}
	return b.change(next)
}

func (b *Bench) dropBranch() tea.Cmd {
	branch := branchOf(knobs[b.knob])
	c := b.chain
	switch branch {
	case "bond phonon":
		c.Bond = model.Phonon{}
	case "site phonon":
		c.Site = model.Phonon{}
	default:
		b.say("choose a phonon's knob first")
		return nil
	}
	return b.change(c)
}

func (b *Bench) undo() tea.Cmd {
	c, ok := b.trail.undo(b.chain)
	if !ok {
		b.say("nothing to undo")
		return nil
	}
	return b.show(c)
}

func (b *Bench) redo() tea.Cmd {
	c, ok := b.trail.redo(b.chain)
	if !ok {
		b.say("nothing to redo")
		return nil
	}
	return b.show(c)
}

func (b *Bench) enlarge(view int) tea.Cmd {
	if b.large == view {
		view = -1
	}
	b.large = view
	return nil
}

func (b *Bench) back() tea.Cmd {
	if b.reading.on {
		b.reading.on = false
	} else {
		b.large = -1
	}
	return nil
}

func (b *Bench) toggleASCII() tea.Cmd {
	b.ascii = !b.ascii
	return tea.ClearScreen
}

func (b *Bench) stagger() tea.Cmd {
	if b.isStaggered() {
		b.staggered = staggerOff
	} else {
		b.staggered = staggerOn
	}
	return nil
}

// nearHalf is how far a band filling may be from 1/2 for its pattern to be read
// best as a slowly varying period-2 amplitude.
const nearHalf = 0.08

func (b *Bench) isStaggered() bool {
	if b.staggered == staggerAuto {
		n, _ := b.chain.Count()
		return math.Abs(float64(n)/float64(b.chain.Spin*b.chain.Sites)-0.5) < nearHalf
	}
	return b.staggered == staggerOn
}

// fewestSites is the narrowest window onto the chain.
const fewestSites = 8

func (b *Bench) zoom(factor float64) tea.Cmd {
	n := b.chain.Sites
	from, to := b.sites.from, b.sites.to
	if to <= from {
		from, to = 0, n
	}
	width := int(math.Round(float64(to-from) * factor))
	width = min(max(width, min(fewestSites, n)), n)
	middle := (from + to) / 2
	if b.reading.on && b.reading.view == 1 {
		middle = int(b.reading.x)
	}
	b.setSites(middle-width/2, width)
	return nil
}

func (b *Bench) pan(direction int) tea.Cmd {
	width := b.sites.to - b.sites.from
	if width <= 0 {
		b.say("w shows fewer sites first")
		return nil
	}
	b.setSites(b.sites.from+direction*max(1, width/4), width)
	return nil
}

func (b *Bench) setSites(from, width int) {
	n := b.chain.Sites
	from = min(max(from, 0), n-width)
	b.sites.from, b.sites.to = from, from+width
	if width >= n {
		b.sites.from, b.sites.to = 0, 0
	}
}

func (b *Bench) readNext() tea.Cmd {
	view := b.large
	if view < 0 {
		if view = 0; b.reading.on {
			view = b.reading.view + 1
		}
		if view == len(views) {
			b.reading.on = false
			return nil
		}
	} else if b.reading.on {
		b.reading.on = false
		return nil
	}
	x := views[view].abscissae(b.scene(view))
	if len(x) == 0 {
		return nil
	}
	at := len(x) / 2
	if p := b.inquiry.picture(); p.Band != nil && view != 1 {
		at = nearest(x, map[bool]float64{true: p.Band.KF, false: p.Band.Ordering}[view == 0])
	}
	b.reading = reading{on: true, view: view, x: x[at]}
	return nil
}

func (b *Bench) readMove(by int) tea.Cmd {
	if !b.reading.on {
		return b.readNext()
	}
	x := views[b.reading.view].abscissae(b.scene(b.reading.view))
	if len(x) > 0 {
		b.reading.x = x[min(max(nearest(x, b.reading.x)+by, 0), len(x)-1)]
	}
	return nil
}

func (b *Bench) quit() tea.Cmd {
	b.stop()
	return tea.Quit
}

// stop cancels the study under way.
func (b *Bench) stop() {
	if b.inquiry.cancel != nil {
		b.inquiry.cancel()
	}
}
