// Package sweep runs a study: it cuts the cells into units, works the units on
// several goroutines, keeps each as a part file in a run directory, and at the end
// gathers the parts into tables.
//
// A unit is one cell × a block of replicates. What a unit yields depends on the
// study and the seed alone, and parts are gathered in the order of the plan, so the
// tables are the same to the byte for any number of workers and any interruption.
// A part's name is a hash of all that its rows depend on: running again keeps the
// parts that are there and intact, and works only what is missing. Several processes
// may each work a Share of the units; a Collection then makes the tables.
package sweep
