//go:build !linux

package store

import "errors"

func fileSystem(string) (int64, error) { return 0, errors.ErrUnsupported }
