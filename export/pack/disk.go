package pack

import (
	"errors"
	"io"
	"os"
)

// disk is what placing asks of a file system. Tests hand in one that fails, or ends, at a
// call of their choice.
type disk interface {
	MakeFolder(dir string) error                    // with those above it; none when it is there
	Lock(dir string) (unlock func(), err error)     // alone among processes; errors.ErrUnsupported where there are no locks
	Names(dir string) ([]string, error)             // in order, hidden ones too
	Look(name string) (there, folder bool, e error) // a link is no folder
	MakeBeside(dir, prefix string) (string, error)  // a new folder: the prefix and a number
	Create(name string) (file, error)               // a new file
	Flush(dir string) error                         // a folder's names to the disk
	Rename(from, to string) error
	Exchange(a, b string) error // in one step; errors.ErrUnsupported where there is none
	RemoveAll(name string) error
}

type file interface {
	io.WriteCloser
	Sync() error
}

// system is the file system of the machine. Lock, Flush and Exchange are in the files of
// their systems.
type system struct{}

func (system) MakeFolder(dir string) error { return os.MkdirAll(dir, 0o777) }

func (system) Names(dir string) ([]string, error) {
	list, err := os.ReadDir(dir)
	if err != nil {
		return nil, err
	}
	names := make([]string, len(list))
	for i, e := range list {
		names[i] = e.Name()
	}
	return names, nil
}

func (system) Look(name string) (there, folder bool, err error) {
	info, err := os.Lstat(name)
	if errors.Is(err, os.ErrNotExist) {
		return false, false, nil
	}
	return err == nil, err == nil && info.IsDir(), err
}

func (system) MakeBeside(dir, prefix string) (string, error) {
	name, err := os.MkdirTemp(dir, prefix)
	if err != nil {
		return "", err
	}
	if err := os.Chmod(name, 0o755); err != nil {
		return "", errors.Join(err, os.Remove(name))
	}
	return name, nil
}

func (system) Create(name string) (file, error) {
	return os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
}

func (system) Rename(from, to string) error { return os.Rename(from, to) }

func (system) RemoveAll(name string) error { return os.RemoveAll(name) }
