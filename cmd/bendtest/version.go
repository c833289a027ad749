package main

import (
	"fmt"
	"runtime/debug"

	"github.com/spf13/cobra"
)

// release is the version of the source; a build from a tagged module knows better.
const release = "0.1.0-dev"

// version returns the version of this build: the module's, or the release with the
// commit it was built from.
func version() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return release
	}
	if v := info.Main.Version; v != "" && v != "(devel)" {
		return v
	}
	commit, dirty := "", ""
	for _, s := range info.Settings {
		switch s.Key {
		case "vcs.revision":
			commit = "+" + s.Value[:min(12, len(s.Value))]
		case "vcs.modified":
			if s.Value == "true" {
				dirty = ".changed"
			}
		}
	}
	return release + commit + dirty
}

func versionCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "version",
		Short: "Print the version of the program",
		Args:  between(0, 0),
		RunE: func(cmd *cobra.Command, _ []string) error {
			_, err := fmt.Fprintln(cmd.OutOrStdout(), "bendtest", version())
			return err
		},
	}
}
