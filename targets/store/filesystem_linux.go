package store

import "golang.org/x/sys/unix"

// fileSystem names the kind of file system that holds a path.
func fileSystem(path string) (int64, error) {
	var s unix.Statfs_t
	if err := unix.Statfs(path, &s); err != nil {
		return 0, err
	}
	return int64(s.Type), nil
}
