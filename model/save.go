package model

import (
	"errors"
	"fmt"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
)

// Save writes a valid chain to path so that a reader, or a crash, finds either
// the old file or the whole new one: into a new file beside it, flushed to disk
// and then renamed. A symbolic link is followed, and an existing file keeps its
// permissions; one that may not be written, or that is not a regular file, is
// left alone. After an error nothing has changed.
func Save(path string, c Chain) error {
	if err := c.Validate(); err != nil {
		return err
	}
	target, err := followLinks(path)
	if err != nil {
		return err
	}
	mode, err := permissions(target)
	if err != nil {
		return err
	}
	f, err := createBeside(target)
	if err != nil {
		return err
	}
	if err := fill(f, Encode(c), mode); err != nil {
		return errors.Join(err, os.Remove(f.Name()))
	}
	if err := os.Rename(f.Name(), target); err != nil {
		return errors.Join(err, os.Remove(f.Name()))
	}
	syncDir(filepath.Dir(target))
	return nil
}

// followLinks returns the file that path means, which need not exist.
func followLinks(path string) (string, error) {
	const most = 40 // as many as Linux follows
	for range most {
		dir, name := filepath.Split(path)
		if dir == "" {
			dir = "."
		}
		dir, err := filepath.EvalSymlinks(dir)
		if err != nil {
			return "", err
		}
		path = filepath.Join(dir, name)
		link, err := os.Readlink(path)
		switch {
		case err != nil: // no link
			return path, nil
		case filepath.IsAbs(link):
			path = link
		default:
			path = dir + string(filepath.Separator) + link
		}
	}
	return "", &fs.PathError{Op: "save", Path: path, Err: errors.New("too many symbolic links")}
}

// permissions returns those of an existing file that may be replaced, or 0.
func permissions(path string) (fs.FileMode, error) {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return 0, nil
	case err != nil:
		return 0, err
	case !info.Mode().IsRegular():
		return 0, &fs.PathError{Op: "save", Path: path, Err: errors.New("this is not a regular file")}
	}
	f, err := os.OpenFile(path, os.O_WRONLY, 0) // asks whether it may be written
	if err != nil {
		return 0, err
	}
	return info.Mode().Perm(), f.Close()
}

// createBeside creates a new hidden file in the directory of path, with the
// permissions that any new file gets.
func createBeside(path string) (*os.File, error) {
	const tries = 100
	var err error
	for range tries {
		name := fmt.Sprintf(".chain-%08x", rand.Uint32())
		var f *os.File
		f, err = os.OpenFile(filepath.Join(filepath.Dir(path), name), os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
		if !errors.Is(err, fs.ErrExist) {
			return f, err
		}
	}
	return nil, err
}

// fill writes, flushes and closes a new file.
func fill(f *os.File, data []byte, mode fs.FileMode) error {
	_, err := f.Write(data)
	if err == nil && mode != 0 {
		err = f.Chmod(mode)
	}
	if err == nil {
		err = f.Sync()
	}
	return errors.Join(err, f.Close())
}

// syncDir makes a rename last through a crash, on systems that can.
func syncDir(dir string) {
	if d, err := os.Open(dir); err == nil {
		_ = d.Sync() // some file systems refuse; the file itself is safe
		_ = d.Close()
	}
}
