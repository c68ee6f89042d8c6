//go:build linux || darwin || freebsd || netbsd || openbsd || dragonfly

package pack

import (
	"errors"
	"os"

	"golang.org/x/sys/unix"
)

// Lock waits for the lock on a folder itself, so no file is left for it. The system gives
// it up when the process ends. Folders on some network file systems take no lock.
func (system) Lock(dir string) (unlock func(), err error) {
	f, err := os.Open(dir)
	if err != nil {
		return nil, err
	}
	for {
		err = unix.Flock(int(f.Fd()), unix.LOCK_EX)
		if !errors.Is(err, unix.EINTR) {
			break
		}
	}
	if err != nil {
		f.Close()
		return nil, errors.ErrUnsupported
	}
	return func() { f.Close() }, nil
}

// Flush writes a folder's names to the disk, where its file system has a way to.
func (system) Flush(dir string) error {
	f, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer f.Close()
	if err := f.Sync(); err != nil && !errors.Is(err, unix.EINVAL) && !errors.Is(err, errors.ErrUnsupported) {
		return err
	}
	return nil
}
