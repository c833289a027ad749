// Package results keeps what a study finds: the schemas of all tables, Parquet and
// Arrow files, the run directory with its part files, and export.
//
// In come rows of plain Go structs; out come files that any tool reads. Invariants:
// a file under its final name is whole and on disk; a part is never changed, and is
// read only after its checksum was found right; the same rows give the same bytes.
//
//	DIR/bendtest.json          the manifest: what ran here, with which study and build
//	DIR/study.toml             the study as it was run
//	DIR/parts/KEY.part         rows of one unit of work, kept for resuming
//	DIR/tables/NAME.parquet    the tables
//	DIR/lock                   held by the one process that writes here
//
// This is the only package that knows of Arrow.
package results
