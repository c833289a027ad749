package main

import (
	"errors"
	"io/fs"
	"os"

	"bendtest/scenarios"
	"bendtest/scoring"
)

// vocabulary is what a study file may name: the rules live above the parser.
func vocabulary() scenarios.Vocabulary {
	var v scenarios.Vocabulary
	for _, k := range scoring.Rules() {
		v.Rules = append(v.Rules, scenarios.Kind{Name: k.Name, Doc: k.Doc, New: func() any { return k.New() }})
	}
	return v
}

// loadStudy reads the study file at path, or the embedded demonstration if path is
// empty. Whatever is wrong with it is a wrong request.
func loadStudy(path string, seed *uint64) (*scenarios.Study, error) {
	name, text := path, []byte(nil)
	if path == "" {
		name, text = scenarios.Demo()
	} else {
		var err error
		if text, err = os.ReadFile(path); err != nil {
			return nil, refuse("%w", unwrapPath(err))
		}
	}
	study, faults := scenarios.Parse(name, text, vocabulary())
	if len(faults) > 0 {
		return nil, &requestError{faults}
	}
	if seed != nil {
		if *seed > scenarios.MaxSeed {
			return nil, refuse("--seed %d is too large; want at most %d", *seed, uint64(scenarios.MaxSeed))
		}
		study = study.WithSeed(*seed)
	}
	return study, nil
}

// unwrapPath keeps a file error to its path and reason.
func unwrapPath(err error) error {
	var p *fs.PathError
	if errors.As(err, &p) {
		return errors.New(p.Path + ": " + p.Err.Error())
	}
	return err
}
