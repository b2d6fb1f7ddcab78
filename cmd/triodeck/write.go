package main

import (
	"io/fs"
	"os"
	"path/filepath"
)

// writeFile writes a file whole or not at all: what fails leaves the old one.
func writeFile(path string, mode fs.FileMode, write func(*os.File) error) error {
	f, err := os.CreateTemp(filepath.Dir(path), ".triodeck-*")
	if err != nil {
		return err
	}
	err = write(f)
	if err == nil {
		err = f.Chmod(mode)
	}
	if closed := f.Close(); err == nil {
		err = closed
	}
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	if err != nil {
		os.Remove(f.Name())
	}
	return err
}
