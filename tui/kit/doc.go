// Package kit holds what the screens share: the desk (the frame that is being
// composed, its history, marks and preview), the shape of a screen, the key map's
// form, colours of the interface, and small parts such as the one-line editor.
// It knows no screen.
package kit
