package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"

	"bendtest/results"
	"bendtest/scoring"
)

// A method's figures in one cell, as the closing table shows them.
type methodLine struct {
	smoother, rule string
	figures        map[string]scoring.Estimate
	replicates     int
	failed         int
	failure        string // the most frequent reason
}

// methodLines folds the summary rows of one cell into a line per method, in order.
func methodLines(rows []results.Summary) []methodLine {
	var lines []methodLine
	index := map[[2]string]int{}
	for _, r := range rows {
		key := [2]string{r.Smoother, r.Rule}
		i, ok := index[key]
		if !ok {
			i = len(lines)
			index[key] = i
			lines = append(lines, methodLine{
				smoother: r.Smoother, rule: r.Rule, figures: map[string]scoring.Estimate{},
				replicates: r.Replicates, failed: r.Failed, failure: r.Failure,
			})
		}
		lines[i].figures[r.Measure] = scoring.Estimate{Value: r.Value, MCSE: r.MCSE}
	}
	return lines
}

// leastExcess returns the line with the smallest median excess that is not an
// oracle's, or −1. The median, since a few points beyond the training range can rule
// a mean.
func leastExcess(lines []methodLine) int {
	best := -1
	for i, l := range lines {
		e := l.figures["median_excess"].Value
		if l.rule == scoring.Oracle || !e.Known {
			continue
		}
		if best < 0 || e.Value < lines[best].figures["median_excess"].Value.Value {
			best = i
		}
	}
	return best
}

// printCell writes one cell's closing table.
func printCell(w io.Writer, cell results.Cell, rows []results.Summary) {
	lines := methodLines(rows)
	fmt.Fprintf(w, "\n%s   noise floor %s, %s replicates\n", cell.Cell, short(results.Num(cell.NoiseVariance)), thousands(cell.Replicates))
	t := table.NewWriter()
	t.SetStyle(plainStyle())
	t.SetColumnConfigs(rightFrom(3, 9))
	t.AppendHeader(table.Row{"smoother", "rule", "mean df", "held-out error", "excess", "median excess", "regret", "regret > 2", "failed"})
	best := leastExcess(lines)
	last := ""
	for i, l := range lines {
		name := ""
		if l.smoother != last {
			name, last = l.smoother, l.smoother
		}
		rule := l.rule
		if i == best {
			rule += " ◂"
		}
		t.AppendRow(table.Row{
			name, rule, short(l.figures["mean_df"].Value),
			withError(l.figures["mean_heldout_mse"]), withError(l.figures["mean_excess"]),
			withError(l.figures["median_excess"]), withError(l.figures["mean_regret"]),
			percent(l.figures["regret_over_2"].Value), failures(l),
		})
	}
	fmt.Fprintln(w, render(t))
}

// failures writes how many replicates a method had no pick in, and why.
func failures(l methodLine) string {
	if l.failed == 0 {
		return "0"
	}
	if l.replicates == 0 {
		return l.failure
	}
	return fmt.Sprintf("%d of %d, %s", l.failed, l.failed+l.replicates, l.failure)
}

// percent writes a share.
func percent(n results.Number) string {
	if !n.Known {
		return "–"
	}
	return fmt.Sprintf("%.0f %%", 100*n.Value)
}

// plainStyle is a table without boxes: two blanks between columns, a rule under the
// head.
func plainStyle() table.Style {
	s := table.StyleDefault
	s.Box = table.BoxStyle{PaddingRight: "  ", MiddleHorizontal: "─"}
	s.Options = table.Options{SeparateHeader: true}
	s.Format.Header = text.FormatDefault
	return s
}

// render writes a table without blanks at the ends of its lines.
func render(t table.Writer) string {
	lines := strings.Split(t.Render(), "\n")
	for i, line := range lines {
		lines[i] = strings.TrimRight(line, " ")
	}
	return strings.Join(lines, "\n")
}

// rightFrom aligns columns first … last to the right, heads included.
func rightFrom(first, last int) []table.ColumnConfig {
	var c []table.ColumnConfig
	for n := first; n <= last; n++ {
		c = append(c, table.ColumnConfig{Number: n, Align: text.AlignRight, AlignHeader: text.AlignRight})
	}
	return c
}

// closingWords explains the closing tables.
const closingWords = `
held-out error  mean squared error at fresh points; the noise floor is what the true curve itself scores
excess          held-out error less what the truth scores on the same points; mean, then median
regret          error about the true curve ÷ that of the best df in the same replicate (the oracle)
failed          replicates in which the rule could pick no df, and the most frequent reason
± is one Monte Carlo standard error; ◂ marks the least median excess that a rule reached in the cell.
A simulation speaks for the cells it ran. Where curves feed decisions that can hurt people, have the
default confirmed on real data by a qualified statistician under the rules that govern that work.
`
