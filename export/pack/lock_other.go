//go:build !(linux || darwin || freebsd || netbsd || openbsd || dragonfly)

package pack

import "errors"

// Lock is not to be had here: what a killed run left beside is not tidied up, because its
// run might be alive.
func (system) Lock(string) (unlock func(), err error) { return nil, errors.ErrUnsupported }

// Flush is left to the system.
func (system) Flush(string) error { return nil }
