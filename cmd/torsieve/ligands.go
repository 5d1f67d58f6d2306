package main

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io"
	"os"

	"torsieve/molecule/load"
	"torsieve/screen"
	"torsieve/screen/report"
)

// ligands reads all files of a run. What could not be read or is refused is
// among the ligands, and has been told. The solvent is what will surround them.
func (s *session) ligands(files []string, in inputOptions, how intakeOptions, solvent string) ([]*screen.Ligand, []report.Input, error) {
	intake := screen.NewIntake()
	intake.ExpandStereo = how.Stereo == "expand"
	intake.StripSalts = how.Salts == "strip"
	intake.Solvent = solvent
	var ligands []*screen.Ligand
	var inputs []report.Input
	for _, file := range files {
		input := report.Input{File: file, SHA256: hashFile(file)}
		err := s.records(file, in, func(rec load.Record) error {
			input.Records++
			ligands = append(ligands, intake.Take(file, rec)...)
			return nil
		})
		if err != nil {
			return nil, nil, err
		}
		inputs = append(inputs, input)
	}
	salt := false
	for _, l := range ligands {
		for _, w := range l.Warnings {
			s.voice.warn("%s: %s", l.Name(), w)
		}
		if l.Err != nil {
			s.voice.failed("%s", told(l))
			salt = salt || errors.As(l.Err, new(*screen.FragmentsError))
		}
	}
	if salt {
		s.voice.note("hint: --salts strip keeps the largest organic fragment")
	}
	return ligands, inputs, nil
}

// told is what is said of a ligand with an error: a reader's error knows its
// place itself.
func told(l *screen.Ligand) string {
	if l.Status == screen.Unreadable {
		return l.Err.Error()
	}
	return l.Name() + ": " + l.Err.Error()
}

// hashFile returns the SHA-256 of a file as it lies on disk, or "" for a stream.
func hashFile(file string) string {
	if file == "-" {
		return ""
	}
	f, err := os.Open(file)
	if err != nil {
		return "" // the reader will say so
	}
	defer f.Close()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return ""
	}
	return hex.EncodeToString(h.Sum(nil))
}
