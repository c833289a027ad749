package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"

	"github.com/spf13/cobra"

	"bendtest/results"
)

func exportCommand() *cobra.Command {
	var format, out string
	var names, docs []string
	for _, f := range results.Formats() {
		names = append(names, f.Name)
		docs = append(docs, fmt.Sprintf("  %-8s %s", f.Name, f.Doc))
	}
	cmd := &cobra.Command{
		Use:   "export DIR TABLE",
		Short: "Write a table of a run as CSV, Arrow, Parquet or JSON lines",
		Long:  "Write a table of a run in another form, to stdout or a file.\n\nForms:\n" + strings.Join(docs, "\n"),
		Example: `  bendtest export night summary
  bendtest export night fits --format arrow -o fits.arrow`,
		Args: between(2, 2),
		RunE: func(cmd *cobra.Command, args []string) error {
			f, err := formatNamed(format)
			if err != nil {
				return err
			}
			dir, err := results.Open(args[0])
			if err != nil {
				return &requestError{err}
			}
			return exportTo(dir, args[1], f, out, cmd.OutOrStdout())
		},
	}
	cmd.Flags().StringVar(&format, "format", "csv", "`FORM` to write: "+strings.Join(names, ", "))
	cmd.Flags().StringVarP(&out, "output", "o", "", "`FILE` to write instead of stdout")
	return cmd
}

// formatNamed finds an export format.
func formatNamed(name string) (results.Format, error) {
	var known []string
	for _, f := range results.Formats() {
		if f.Name == name {
			return f, nil
		}
		known = append(known, f.Name)
	}
	return results.Format{}, refuse("unknown format %q (known: %s)", name, strings.Join(known, ", "))
}

// exportTo writes a table to a file, which appears whole or not at all, or to stdout.
func exportTo(dir *results.Dir, name string, f results.Format, out string, stdout io.Writer) error {
	write := func(w io.Writer) error { return dir.Export(name, f, w) }
	var err error
	if out != "" {
		err = results.WriteFile(out, write)
	} else {
		buffer := bufio.NewWriterSize(stdout, 1<<16)
		err = write(buffer)
		if err == nil {
			err = buffer.Flush()
		}
	}
	var none *results.NoTableError
	if errors.As(err, &none) || errors.Is(err, os.ErrNotExist) {
		return &requestError{err}
	}
	return err
}
