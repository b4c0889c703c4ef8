package main

import (
	"fmt"
	"image"
	"strconv"
	"strings"
)

// maxProbe bounds the points of one call.
const maxProbe = 1_000_000

// points reads --at or --grid.
func (g probeFlags) points(trim, full image.Rectangle) ([]image.Point, error) {
	if g.grid != "" {
		return gridPoints(g.grid, trim)
	}
	points := make([]image.Point, len(g.at))
	for i, s := range g.at {
		x, y, ok := pair(s, ",")
		if !ok {
			return nil, usage(fmt.Errorf("--at %q is not X,Y", s), "two whole numbers, such as --at 100,250")
		}
		points[i] = image.Pt(x, y)
		if !points[i].In(full) {
			return nil, usage(fmt.Errorf("--at %s lies outside the sheet", s),
				fmt.Sprintf("X is a number from %d to %d, Y from %d to %d", full.Min.X, full.Max.X-1, full.Min.Y, full.Max.Y-1))
		}
	}
	return points, nil
}

// gridPoints are the middles of cols x rows equal parts of the trim.
func gridPoints(grid string, trim image.Rectangle) ([]image.Point, error) {
	cols, rows, ok := pair(grid, "x")
	if !ok || cols < 1 || rows < 1 || cols > maxProbe || rows > maxProbe/cols {
		return nil, usage(fmt.Errorf("--grid %q is not CxR", grid),
			fmt.Sprintf("two whole numbers of 1 or more, such as --grid 10x10; at most %d points", maxProbe))
	}
	points := make([]image.Point, 0, cols*rows)
	for j := range rows {
		for i := range cols {
			points = append(points, image.Pt((2*i+1)*trim.Dx()/(2*cols), (2*j+1)*trim.Dy()/(2*rows)))
		}
	}
	return points, nil
}

// pair reads two whole numbers and nothing else.
func pair(s, between string) (a, b int, ok bool) {
	first, second, ok := strings.Cut(s, between)
	a, errA := strconv.Atoi(first)
	b, errB := strconv.Atoi(second)
	return a, b, ok && errA == nil && errB == nil
}
