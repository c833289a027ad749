// Package scenarios reads study files.
//
// In comes the text of a study (TOML) and the vocabulary of rules; out comes
// either a Study, complete and ready to run, with the factorial laid out in cells, or
// all the faults of the file at once, each with its line, column, what is allowed,
// and the nearest valid word. Nothing is guessed: unknown keys, words and names are
// faults.
//
// The one idea worth knowing is that the schema is the option structs themselves.
// Every key of a study, be it an option of a family, of a noise law or of the file
// as a whole, is a struct field with tags (see Option). The parser, the canonical
// form, the default labels, the flags of a command line and the printed description
// of the file read the same tags.
package scenarios
