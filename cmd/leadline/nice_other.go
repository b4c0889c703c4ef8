//go:build !linux

package main

import "errors"

// beNice says that it cannot.
func beNice(int) error {
	return errors.New("this system is not asked for it here; start the worker with its own means")
}
