package tui

import (
	"fmt"

	tea "github.com/charmbracelet/bubbletea"

	"example.org/twokf/model"
)

// change makes c the chain on the bench and asks for its study.
func (b *Bench) change(c model.Chain) tea.Cmd { return b.replace(work{c, b.origin}) }

// take puts another chain on the bench; the work before can be undone to.
func (b *Bench) take(c model.Chain, from origin) tea.Cmd {
	b.say("opened " + from.from)
	from.draft = b.drafts.file()
	return b.replace(work{c, &from})
}

func (b *Bench) replace(w work) tea.Cmd {
	if w == b.work {
		return nil
	}
	b.trail.push(b.work)
	return b.show(w)
}

// show is replace without a trace on the trail.
func (b *Bench) show(w work) tea.Cmd {
	before := b.work
	if w.origin != before.origin {
		b.drafts.keep(before) // a later change will be of the other chain
	}
	b.work = w
	switch {
	case w.origin != before.origin:
		b.sites = window{}
	case w.chain.Sites != before.chain.Sites && b.sites.width() > 0:
		b.setWindow(b.sites.from, b.sites.width())
	}
	b.choose(0)
	if w.chain == before.chain {
		return b.drafts.soon()
	}
	return tea.Batch(b.inquiry.ask(), b.drafts.soon())
}

func (b *Bench) undo() tea.Cmd {
	w, ok := b.trail.undo(b.work)
	if !ok {
		b.say("nothing to undo")
		return nil
	}
	return b.show(w)
}

func (b *Bench) redo() tea.Cmd {
	w, ok := b.trail.redo(b.work)
	if !ok {
		b.say("nothing to redo")
		return nil
	}
	return b.show(w)
}

// turn turns the chosen knob.
func (b *Bench) turn(turns int, fine bool) tea.Cmd {
	p := knobs[b.knob]
	if absent(p, b.chain) {
		b.say(fmt.Sprintf("this chain has no %s; Enter gives it one", branchOf(p)))
		return nil
	}
	next := p.Step(b.chain, turns, fine)
	if next == b.chain {
		b.say(fmt.Sprintf("%s stays at %s: it must be %s", b.symbol(p), p.Format(b.chain), p.Range(b.chain)))
	}
	return b.change(next)
}

// typeValue asks for the chosen knob's value.
func (b *Bench) typeValue() tea.Cmd {
	p := knobs[b.knob]
	label := p.Key
	if u := p.Unit(b.chain); u != "" {
		label += " (" + u + ")"
	}
	b.prompt = newPrompt(label+" = ", p.Format(b.chain), "Enter takes it, Esc leaves it; "+p.Doc)
	b.prompt.enter = func(b *Bench, text string) (tea.Cmd, error) {
		base, err := b.chain, error(nil)
		brings := absent(p, base)
		if brings {
			if base, err = model.Set(base, tableOf(p)+"=on"); err != nil {
				return nil, err
			}
		}
		c, err := p.Parse(base, text)
		if err != nil {
			return nil, err
		}
		if brings {
			b.say("the chain has a " + branchOf(p) + " now, of stiffness 1 and without a frequency")
		}
		return b.change(c), nil
	}
	return nil
}

// dropBranch takes the phonon of the chosen knob away.
func (b *Bench) dropBranch() tea.Cmd {
	p := knobs[b.knob]
	switch branch := branchOf(p); {
	case branch == "":
		b.say("choose a phonon's knob first")
		return nil
	case absent(p, b.chain):
		b.say("this chain has no " + branch)
		return nil
	}
	c, err := model.Set(b.chain, tableOf(p)+"=off")
	if err != nil {
		b.complain(err)
		return nil
	}
	return b.change(c)
}
