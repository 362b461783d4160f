package main

import (
	"context"
	"embed"
	"errors"
	"fmt"
	"path"
	"strings"

	"lanternbook/calc"
	"lanternbook/store"
)

// seedFiles is what a first start finds: a drawer of generic parts and of
// standard types with their published limits, and invented builds to look at.
//
//go:embed seed/parts/*.json seed/builds/*.json
var seedFiles embed.FS

// seedBuilds are the builds of a first start as they are put on the shelf: the
// last lies on top.
var seedBuilds = []string{
	"lantern-no-4", "corner-bakery", "wren-cabin-lights", "arcade-jewellers", "fernhollow-halt", "harbour-letters",
}

// seedPart is a part of a first start.
type seedPart struct {
	key      string
	document []byte
}

// seed fills an empty store. Everything is read and judged before the first
// write, so that a fault in one file leaves the store empty. Called again it
// adds what is missing and leaves alone what is there, by a part's key and a
// build's title.
func (s *server) seed(ctx context.Context) error {
	parts, err := readSeedParts()
	if err != nil {
		return err
	}
	var builds [][]byte
	titles := map[string]bool{}
	there, err := s.store.Builds(ctx, "")
	if err != nil {
		return err
	}
	for _, b := range there {
		titles[b.Summary.Title] = true
	}
	for _, name := range seedBuilds {
		document, err := seedFiles.ReadFile("seed/builds/" + name + ".json")
		if err != nil {
			return err
		}
		b, _, _, err := examine(document)
		if err != nil {
			return fmt.Errorf("seed build %s: %w", name, err)
		}
		if !titles[b.Title] {
			builds = append(builds, document)
		}
	}
	for _, p := range parts {
		var taken *store.KeyTaken
		if _, err := s.store.CreatePart(ctx, p.key, p.document); err != nil && !errors.As(err, &taken) {
			return err
		}
	}
	for _, document := range builds {
		if _, _, _, err := s.create(ctx, document); err != nil {
			return err
		}
	}
	return nil
}

// readSeedParts reads the drawer of a first start, by key. A part's key is its
// file's name.
func readSeedParts() ([]seedPart, error) {
	files, err := seedFiles.ReadDir("seed/parts")
	if err != nil {
		return nil, err
	}
	var parts []seedPart
	for _, file := range files {
		document, err := seedFiles.ReadFile(path.Join("seed/parts", file.Name()))
		if err != nil {
			return nil, err
		}
		key := strings.TrimSuffix(file.Name(), ".json")
		if _, err := calc.ReadPart(document); err != nil {
			return nil, fmt.Errorf("seed part %s: %w", key, err)
		}
		parts = append(parts, seedPart{key, document})
	}
	return parts, nil
}
