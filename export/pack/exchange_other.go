//go:build !linux

package pack

import (
	"errors"
	"os"
)

// exchange swaps two folders; between the two renames there is no folder at b.
func exchange(a, b string) error {
	aside := a + ".old"
	if err := os.Rename(b, aside); err != nil {
		return err
	}
	if err := os.Rename(a, b); err != nil {
		return errors.Join(err, os.Rename(aside, b))
	}
	return os.Rename(aside, a)
}
