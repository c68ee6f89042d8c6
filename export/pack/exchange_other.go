//go:build !linux

package pack

import "errors"

// Exchange is not to be had here.
func (system) Exchange(_, _ string) error { return errors.ErrUnsupported }
