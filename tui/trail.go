package tui

import "example.org/twokf/model"

// origin is where a chain came from and where it is saved to.
type origin struct {
	from  string      // in words, for a person
	file  string      // path; "" if there is none yet
	saved model.Chain // as it was opened or saved last; zero if it never was
	draft *draftFile  // where unsaved work on it is kept; nil if nowhere
}

// work is a chain on the bench with its origin. Changes of a chain share the
// origin; opening another chain brings a new one.
type work struct {
	chain  model.Chain
	origin *origin
}

// edited reports whether there is work that is not in a file.
func (w work) edited() bool { return w.chain != w.origin.saved }

// trail remembers the work of a session for undo and redo.
type trail struct {
	past, future []work
}

// mostTrail bounds the trail's memory.
const mostTrail = 1000

// push remembers work that is about to be changed.
func (t *trail) push(w work) {
	t.future = nil
	if len(t.past) == mostTrail {
		t.past = append(t.past[:0], t.past[1:]...)
	}
	t.past = append(t.past, w)
}

// undo exchanges the present work for the one before it.
func (t *trail) undo(present work) (work, bool) {
	return exchange(&t.past, &t.future, present)
}

// redo is the inverse of undo.
func (t *trail) redo(present work) (work, bool) {
	return exchange(&t.future, &t.past, present)
}

func exchange(from, to *[]work, present work) (work, bool) {
	n := len(*from)
	if n == 0 {
		return present, false
	}
	*to = append(*to, present)
	w := (*from)[n-1]
	*from = (*from)[:n-1]
	return w, true
}
