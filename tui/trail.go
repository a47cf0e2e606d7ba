package tui

import "example.org/twokf/model"

// trail remembers the chains of a session for undo and redo.
type trail struct {
	past, future []model.Chain
}

// mostTrail bounds the trail's memory.
const mostTrail = 1000

// push remembers a chain that is about to be changed.
func (t *trail) push(c model.Chain) {
	t.future = nil
	if n := len(t.past); n > 0 && t.past[n-1] == c {
		return
	}
	if len(t.past) == mostTrail {
		t.past = append(t.past[:0], t.past[1:]...)
	}
	t.past = append(t.past, c)
}

// undo exchanges the present chain for the one before it.
func (t *trail) undo(present model.Chain) (model.Chain, bool) {
	return exchange(&t.past, &t.future, present)
}

// redo is the inverse of undo.
func (t *trail) redo(present model.Chain) (model.Chain, bool) {
	return exchange(&t.future, &t.past, present)
}

func exchange(from, to *[]model.Chain, present model.Chain) (model.Chain, bool) {
	n := len(*from)
	if n == 0 {
		return present, false
	}
	*to = append(*to, present)
	c := (*from)[n-1]
	*from = (*from)[:n-1]
	return c, true
}
