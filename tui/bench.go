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
	"os"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/muesli/termenv"
	"golang.org/x/term"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
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
	Input   io.Reader        // keys; a file that is no terminal is passed over for the terminal itself
	Output  io.Writer
}

// Run opens the bench and returns when it is left.
func Run(ctx context.Context, set Settings) error {
	b := newBench(ctx, set)
	input := tea.WithInput(set.Input)
	if f, ok := set.Input.(*os.File); ok && !term.IsTerminal(int(f.Fd())) {
		input = tea.WithInputTTY() // the chain came in there
	}
	program := tea.NewProgram(b, tea.WithContext(ctx), input, tea.WithOutput(set.Output),
		tea.WithAltScreen(), tea.WithMouseCellMotion(), tea.WithFPS(30))
	_, err := program.Run()
	b.stop()
	if kept := b.drafts.keep(b.work); kept != "" {
		fmt.Fprintf(os.Stderr, "twokf: the chain was not saved; D on the bench picks it up next time (it is kept in %s)\n", kept)
	}
	return err
}

// Bench is the state of the program. It implements tea.Model.
type Bench struct {
	ctx      context.Context
	settings Settings
	w, h     int // of the window; 0, 0 until it is known
	keys     []action

	work
	trail trail
	knob  int // index into knobs, always one that is shown

	inquiry inquiry
	drafts  drafts
	saving  int  // saves under way
	leaving bool // quit once they are done

	ascii     bool
	look      look
	large     int // index of the view that has the whole screen, −1 for none
	reading   reading
	sites     window
	staggered staggering

	page    page // what covers the bench, nil for nothing
	prompt  *prompt
	message string // one line for the user, until the next key or click
	isError bool

	screen screen
}

func newBench(ctx context.Context, set Settings) *Bench {
	b := &Bench{ctx: ctx, settings: set, ascii: set.ASCII, large: -1, keys: keyTable(), drafts: openDrafts(set.State)}
	b.work = work{set.Chain, &origin{set.From, set.File, set.Chain, b.drafts.file()}}
	if set.Edited {
		b.origin.saved = model.Chain{}
	}
	b.inquiry.run = study.Run
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
	b.say("? lists keys; arrows choose and turn a knob, Enter types it")
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
		b.w, b.h = max(msg.Width, 0), max(msg.Height, 0)
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
		b.inquiry.onSlow(msg)
	case draftMsg:
		return b, b.drafts.write(b.work, msg)
	case savedMsg:
		return b, b.onSaved(msg)
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
	switch name := k.String(); {
	case name == "ctrl+c", b.tooSmall() && name == "q":
		return b.quit()
	case name == "ctrl+z":
		return tea.Suspend
	case b.tooSmall():
		return nil // nothing is done unseen
	case b.prompt != nil:
		return b.prompt.key(b, k)
	}
	b.message = ""
	if b.page != nil {
		return b.page.key(b, k)
	}
	return b.press(k)
}

// say shows one line until the next key.
func (b *Bench) say(s string) { b.message, b.isError = s, false }

// complain shows what went wrong until the next key.
func (b *Bench) complain(err error) { b.message, b.isError = err.Error(), true }

// quit leaves the bench; asked once while a file is being written, it waits
// for the end of that.
func (b *Bench) quit() tea.Cmd {
	if b.saving > 0 && !b.leaving {
		b.leaving = true
		b.say("leaving as soon as the chain is saved; again leaves at once")
		return nil
	}
	b.stop()
	return tea.Quit
}

// stop cancels the study under way.
func (b *Bench) stop() {
	if b.inquiry.cancel != nil {
		b.inquiry.cancel()
	}
}
