package main

import (
	"fmt"
	"io"
	"slices"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"
	"github.com/spf13/cobra"

	"bendtest/results"
	"bendtest/scenarios"
	"bendtest/scoring"
	"bendtest/sim"
	"bendtest/sim/expr"
	"bendtest/smoothers"
)

// A topic is something that describe can print.
type topic struct {
	name  string
	doc   string
	print func(w io.Writer)
}

// topics lists all topics but the tables.
func topics() []topic {
	return []topic{
		{"families", "the families of smoother and their options", printFamilies},
		{"rules", "the rules and their options", printRules},
		{"truths", "what the expression of a truth may hold", printTruths},
		{"designs", "the design laws and their options", printDesigns},
		{"noises", "the noise laws and their options", printNoises},
		{"study", "all keys of a study file", printStudy},
	}
}

func describeCommand() *cobra.Command {
	var lines []string
	for _, t := range topics() {
		lines = append(lines, fmt.Sprintf("  %-10s %s", t.name, t.doc))
	}
	lines = append(lines, fmt.Sprintf("  %-10s %s", "table NAME", "the columns of a table: "+strings.Join(tableNames(), ", ")))
	return &cobra.Command{
		Use:     "describe [TOPIC]",
		Short:   "Explain families, rules, truths, designs, noises, tables and the study file",
		Long:    "Print what the program knows of a topic:\n\n" + strings.Join(lines, "\n"),
		Example: "  bendtest describe families\n  bendtest describe table fits",
		Args:    between(0, 2),
		RunE: func(cmd *cobra.Command, args []string) error {
			return describe(cmd.OutOrStdout(), args)
		},
	}
}

// describe prints the topic that args name, or the list of topics.
func describe(w io.Writer, args []string) error {
	if len(args) == 0 {
		for _, t := range topics() {
			fmt.Fprintf(w, "%-10s %s\n", t.name, t.doc)
		}
		fmt.Fprintf(w, "%-10s the columns of a table: %s\n", "table NAME", strings.Join(tableNames(), ", "))
		return nil
	}
	if args[0] == "table" {
		return describeTable(w, args[1:])
	}
	known := []string{"table"}
	for _, t := range topics() {
		if t.name == args[0] && len(args) == 1 {
			t.print(w)
			return nil
		}
		known = append(known, t.name)
	}
	return unknownWord("topic", strings.Join(args, " "), known)
}

// unknownWord refuses a word, with the nearest known one.
func unknownWord(what, word string, known []string) error {
	near := ""
	if n := expr.Nearest(word, known); n != "" {
		near = fmt.Sprintf("did you mean %q? ", n)
	}
	return refuse("unknown %s %q (%sknown: %s)", what, word, near, strings.Join(known, ", "))
}

// tableNames lists the tables.
func tableNames() []string {
	var names []string
	for _, t := range results.Tables() {
		names = append(names, t.Name)
	}
	return names
}

// describeTable prints the columns of a table.
func describeTable(w io.Writer, args []string) error {
	if len(args) != 1 {
		return refuse("describe table takes one name (known: %s)", strings.Join(tableNames(), ", "))
	}
	at := slices.IndexFunc(results.Tables(), func(t results.TableDoc) bool { return t.Name == args[0] })
	if at < 0 {
		return unknownWord("table", args[0], tableNames())
	}
	doc := results.Tables()[at]
	fmt.Fprintf(w, "%s: %s (schema version %s)\n\n", doc.Name, doc.Doc, results.SchemaVersion)
	t := newTable("column", "type", "unit", "meaning")
	for _, c := range doc.Columns {
		t.AppendRow(table.Row{c.Column, c.Type, c.Unit, c.Description})
	}
	fmt.Fprintln(w, render(t))
	switch doc.Name {
	case results.Summaries.Name:
		m := newTable("measure", "meaning")
		for _, measure := range scoring.Measures() {
			m.AppendRow(table.Row{measure.Name, measure.Doc})
		}
		fmt.Fprintf(w, "\nmeasures:\n%s\n", render(m))
	case results.Rungs.Name:
		m := newTable("quantity", "meaning")
		for _, figure := range scoring.FigureDocs() {
			m.AppendRow(table.Row{figure.Name, figure.Doc})
		}
		fmt.Fprintf(w, "\nquantities:\n%s\n", render(m))
	}
	return nil
}

// newTable starts a table of text, the last column of which is broken into lines.
func newTable(head ...any) table.Writer {
	t := table.NewWriter()
	t.SetStyle(plainStyle())
	t.SetColumnConfigs([]table.ColumnConfig{{Number: len(head), WidthMax: 80, WidthMaxEnforcer: text.WrapSoft}})
	t.AppendHeader(head)
	return t
}

// printKind prints one kind with its options.
func printKind(w io.Writer, name, doc string, options any) {
	fmt.Fprintf(w, "%s: %s\n", name, doc)
	for _, o := range scenarios.OptionsOf(options) {
		fmt.Fprintf(w, "    %-16s %s\n", o.Name, optionText(o))
	}
}

// optionText says what an option takes.
func optionText(o scenarios.Option) string {
	parts := []string{o.Doc}
	if o.Unit != "" {
		parts = append(parts, "unit "+o.Unit)
	}
	kind := o.Type
	if len(o.Allowed) > 0 {
		kind = "one of " + strings.Join(o.Allowed, ", ")
	} else if o.Range != "" {
		kind += " " + o.Range
	}
	parts = append(parts, kind)
	switch {
	case o.Required:
		parts = append(parts, "required")
	case o.Default != "":
		parts = append(parts, "default "+o.Default)
	}
	return strings.Join(parts, "; ")
}

func printFamilies(w io.Writer) {
	for _, f := range smoothers.Families() {
		printKind(w, f.Name, f.Doc, f.New())
		fmt.Fprintf(w, "    tuning is the %s\n\n", f.Tuning)
	}
}

func printRules(w io.Writer) {
	for _, r := range scoring.Rules() {
		printKind(w, r.Name, r.Doc, r.New())
	}
	fmt.Fprintf(w, "%s: the rung with the smallest true error; always computed, never a candidate\n", scoring.Oracle)
}

func printDesigns(w io.Writer) {
	for _, d := range sim.Designs() {
		printKind(w, d.Name, d.Doc, d.New())
	}
	printKind(w, "\nevery law", "takes these too", &sim.Design{Redraw: true})
}

func printNoises(w io.Writer) {
	for _, n := range sim.Noises() {
		printKind(w, n.Name, n.Doc, n.New())
	}
	printKind(w, "\nevery law", "takes exactly one of sd, variance, signal-to-noise and r2, and these", &sim.Noise{})
	fmt.Fprint(w, `
The error at x is sd × scale(x) × e with e of variance 1. The noise floor is its variance averaged over the
design law; signal-to-noise and r2 take the variance of f over the design law too.
`)
}

func printTruths(w io.Writer) {
	fmt.Fprint(w, `f is an expression in x: numbers, x, pi, e; + - * / ^ (^ binds tightest, to the right; -x^2 is -(x^2));
< <= > >= == != give 1 or 0; cond ? a : b; parentheses; and these functions:

`)
	t := newTable("function", "meaning")
	for _, f := range expr.Functions() {
		args := "(x)"
		if f.Args == 2 {
			args = "(a, b)"
		}
		t.AppendRow(table.Row{f.Name + args, f.Doc})
	}
	fmt.Fprintln(w, render(t))
	fmt.Fprint(w, `
A bare name such as f = "doppler" stands for doppler(x). In place of f, knots = {x = […], y = […]} gives the natural
cubic spline through points.
`)
}

func printStudy(w io.Writer) {
	last := "-"
	for _, k := range scenarios.Keys(vocabulary().Rules) {
		if k.Table != last {
			last = k.Table
			title := k.Table
			if title == "" {
				title = "at the top of the file"
			}
			fmt.Fprintf(w, "\n%s\n", title)
		}
		fmt.Fprintf(w, "    %-16s %s\n", k.Name, optionText(k.Option))
	}
	fmt.Fprint(w, "\nOptions of laws, families and rules: see describe designs, noises, families and rules.\n")
}
