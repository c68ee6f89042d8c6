package pack

import "golang.org/x/sys/unix"

// exchange swaps two folders in one step, so that no moment exists without a pack.
func exchange(a, b string) error {
	return unix.Renameat2(unix.AT_FDCWD, a, unix.AT_FDCWD, b, unix.RENAME_EXCHANGE)
}
