// Package tui is the program's screens: one program that routes keys and
// messages to the open screen, asks the engine for previews, keeps the session
// file, and shows help and the way out. The screens themselves are packages of
// their own below this one.
package tui
