package model

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"
)

// ParamError says that a parameter has a value that it cannot have, or has none.
type ParamError struct {
	Key   string // full key
	Value string // as it was given, text in quotes; "" if it is missing
	Want  string // what would be accepted, a phrase that fits behind "must be"
	Why   string // the reason, where there is more to say; else ""
}

func (e *ParamError) Error() string {
	s := fmt.Sprintf("%s must be %s, not %s", e.Key, e.Want, e.Value)
	if e.Value == "" {
		s = fmt.Sprintf("%s is missing and must be %s", e.Key, e.Want)
	}
	if e.Why != "" {
		s += ": " + e.Why
	}
	return s
}

// KeyError says that there is no parameter of that name, or more than one.
type KeyError struct {
	Key        string
	Nearest    string   // the valid key that looks most like it, if Candidates is empty
	Candidates []string // the full keys that it might mean
}

func (e *KeyError) Error() string {
	if len(e.Candidates) > 0 {
		return fmt.Sprintf("%s may mean %s; write which", quote(e.Key), strings.Join(e.Candidates, " or "))
	}
	return fmt.Sprintf("there is no parameter %s; the nearest is %s", quote(e.Key), e.Nearest)
}

// unknownKey returns the error for a key that does not name exactly one parameter.
func unknownKey(key string, candidates []Param) *KeyError {
	e := &KeyError{Key: key}
	for _, p := range candidates {
		e.Candidates = append(e.Candidates, p.Key)
	}
	if len(candidates) == 0 {
		e.Nearest = nearestKey(key)
	}
	return e
}

// nearestKey returns the full key that looks most like key, which may be a full
// key or a last part.
func nearestKey(key string) string {
	var spellings []string
	full := map[string]string{}
	for _, p := range params {
		for _, s := range []string{p.Key, p.name()} {
			if _, taken := full[s]; !taken {
				full[s] = p.Key
				spellings = append(spellings, s)
			}
		}
	}
	return full[Nearest(key, spellings)]
}

// FileError puts the place in a chain file before what is wrong there.
type FileError struct {
	Name         string // of the file
	Line, Column int    // from 1, Column in characters; 0 where there is no one place
	Err          error
}

func (e *FileError) Error() string {
	if e.Line == 0 {
		return fmt.Sprintf("%s: %v", e.Name, e.Err)
	}
	return fmt.Sprintf("%s:%d:%d: %v", e.Name, e.Line, e.Column, e.Err)
}

// Unwrap returns what is wrong.
func (e *FileError) Unwrap() error { return e.Err }

// quote writes what somebody typed so that it fits into a sentence.
func quote(s string) string {
	const most = 40
	if utf8.RuneCountInString(s) > most {
		s = string([]rune(s)[:most]) + "…"
	}
	return strconv.Quote(s)
}
