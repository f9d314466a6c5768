package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"

	"eliminant/checks/diag"
)

// asError is errors.As with the target's type inferred.
func asError[T error](err error, target *T) bool { return errors.As(err, target) }

// writeFile writes a file whole or not at all: into a new file in the same
// folder, which then takes the place of the old one. A device or pipe is
// written to directly. The error is a diag.List.
func writeFile(path string, content []byte) error {
	fail := func(err error) error {
		return diag.List{{Code: "unwritable", File: path, Message: "cannot be written: " + plain(err), Hint: "choose a place you may write to; nothing was changed"}}
	}
	if real, err := filepath.EvalSymlinks(path); err == nil {
		path = real // keep a link and replace what it points to
	}
	mode := os.FileMode(0o666)
	if info, err := os.Stat(path); err == nil {
		switch {
		case info.IsDir():
			return fail(errors.New("it is a folder"))
		case !info.Mode().IsRegular():
			return device(path, content, fail)
		}
		mode = info.Mode().Perm()
	}
	f, err := create(path, mode)
	if err != nil {
		return fail(err)
	}
	_, err = f.Write(content)
	if err == nil {
		err = f.Sync()
	}
	if closing := f.Close(); err == nil {
		err = closing
	}
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	if err != nil {
		os.Remove(f.Name())
		return fail(err)
	}
	return nil
}

// create makes a new file beside path.
func create(path string, mode os.FileMode) (*os.File, error) {
	for i := 0; ; i++ {
		name := fmt.Sprintf("%s.new-%d-%d", path, os.Getpid(), i)
		f, err := os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, mode)
		if err == nil || !errors.Is(err, os.ErrExist) || i > 1000 {
			return f, err
		}
	}
}

func device(path string, content []byte, fail func(error) error) error {
	f, err := os.OpenFile(path, os.O_WRONLY, 0)
	if err != nil {
		return fail(err)
	}
	_, err = f.Write(content)
	if closing := f.Close(); err == nil {
		err = closing
	}
	if err != nil {
		return fail(err)
	}
	return nil
}

// prepareFolder makes a folder for results and checks that files can be made in
// it, before any work is done. The error is a diag.List.
func prepareFolder(path string) error {
	err := os.MkdirAll(path, 0o777)
	if err == nil {
		var f *os.File
		if f, err = create(filepath.Join(path, "probe"), 0o666); err == nil {
			f.Close()
			err = os.Remove(f.Name())
		}
	}
	if err != nil {
		return diag.List{{Code: "unwritable", File: path, Message: "cannot be written to: " + plain(err), Hint: "choose a folder you may write to"}}
	}
	return nil
}
