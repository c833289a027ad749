package main

import (
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"

	"bendtest/results"
)

// printVerdict writes a verdict for people.
func printVerdict(w io.Writer, v *verdict) {
	if len(v.methods) == 0 {
		fmt.Fprintln(w, "No method has a pick in any cell: there is nothing to judge.")
	} else {
		printWinners(w, v)
		fmt.Fprintf(w, "\n%s judged in %s. Excess is how far the held-out error lies above the noise\nfloor; behind is a method's excess against the best method of the same cell.\n\n",
			counted(len(v.methods), "method"), counted(len(v.cells), "cell"))
		fmt.Fprintln(w, methodTable(v))
		fmt.Fprintln(w, "\n"+"In brackets: 95 % intervals for the Monte Carlo error. Rank 1 is the best method of a cell.\n◂ least on average, ◃ least in its worst cell, = tied with the least on average")
	}
	printShortfalls(w, v)
	printFailures(w, v)
	printLimits(w, v)
}

// counted writes a number of things.
func counted(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return thousands(n) + " " + thing + "s"
}

// winners returns the methods with the least mean and the least worst relative excess
// among those judged in all cells, or −1.
func (v *verdict) winners() (mean, worst int) {
	mean, worst = -1, -1
	for i := range v.methods {
		m := &v.methods[i]
		if m.Cells < len(v.cells) {
			continue
		}
		if mean < 0 || m.MeanExcess.Value < v.methods[mean].MeanExcess.Value {
			mean = i
		}
		if worst < 0 || m.WorstExcess.Value < v.methods[worst].WorstExcess.Value {
			worst = i
		}
	}
	return mean, worst
}

// printWinners says in sentences what the study supports.
func printWinners(w io.Writer, v *verdict) {
	mean, worst := v.winners()
	if mean < 0 {
		fmt.Fprintln(w, "No method has a pick in every cell, so none can be called the best over all of them.")
		return
	}
	a, b := &v.methods[mean], &v.methods[worst]
	if mean == worst {
		fmt.Fprintf(w, "This study supports %s as a default.\n", method(a.Smoother, a.Rule))
		fmt.Fprintf(w, "  On average over the cells it is %s behind the best, the least of all methods.\n", interval(a.MeanExcess, a.MeanLo, a.MeanHi))
		fmt.Fprintf(w, "  In its worst cell, %s, it is %s behind, the least too.\n", a.WorstCell, interval(a.WorstExcess, a.WorstLo, a.WorstHi))
	} else {
		fmt.Fprintf(w, "This study supports two defaults, depending on what counts.\n")
		fmt.Fprintf(w, "  On average over the cells %s is %s behind the best,\n  the least of all methods; in its worst cell, %s, %s.\n",
			method(a.Smoother, a.Rule), interval(a.MeanExcess, a.MeanLo, a.MeanHi), a.WorstCell, interval(a.WorstExcess, a.WorstLo, a.WorstHi))
		fmt.Fprintf(w, "  Against the worst case %s guards better: it is never more than %s\n  behind (in %s), and on average %s.\n",
			method(b.Smoother, b.Rule), interval(b.WorstExcess, b.WorstLo, b.WorstHi), b.WorstCell, interval(b.MeanExcess, b.MeanLo, b.MeanHi))
	}
	printTies(w, v, mean)
	fmt.Fprintf(w, "  Drawing the replicates again, %s is the least on average in %s of the cases,\n", method(a.Smoother, a.Rule), percent(a.MeanWins))
	if mean == worst {
		fmt.Fprintf(w, "  and the least in its worst cell in %s.\n", percent(b.MinimaxWins))
		return
	}
	fmt.Fprintf(w, "  and %s is the least in its worst cell in %s.\n", method(b.Smoother, b.Rule), percent(b.MinimaxWins))
}

// printTies names the methods that this evidence cannot tell from the best.
func printTies(w io.Writer, v *verdict, mean int) {
	var tied, unsure []string
	for i := range v.methods {
		m := &v.methods[i]
		name := method(m.Smoother, m.Rule)
		switch {
		case i == mean:
		case m.Tied:
			tied = append(tied, name)
		case m.Cells == len(v.cells) && m.BehindLo.Known && m.BehindLo.Value <= v.margin:
			unsure = append(unsure, name)
		}
	}
	if len(tied) > 0 {
		fmt.Fprint(w, listed(fmt.Sprintf("Tied with it within the indifference margin of %s: ", share(v.margin)), tied))
	} else {
		fmt.Fprintf(w, "  No other method is within the indifference margin of %s on average.\n", share(v.margin))
	}
	if len(unsure) > 0 {
		fmt.Fprint(w, listed("With more replicates these may turn out tied, too: ", unsure))
	}
}

// listed writes a few of the names, indented, in lines of readable length.
func listed(start string, names []string) string {
	const most = 6
	more := ""
	if len(names) > most {
		more = fmt.Sprintf(" and %d more", len(names)-most)
		names = names[:most]
	}
	var b strings.Builder
	line := "  " + start
	for i, name := range names {
		word := name + ","
		if i == len(names)-1 {
			word = name + more + "."
		}
		if utf8.RuneCountInString(line)+utf8.RuneCountInString(word) > 100 {
			b.WriteString(strings.TrimRight(line, " ") + "\n")
			line = "    "
		}
		line += word + " "
	}
	b.WriteString(strings.TrimRight(line, " ") + "\n")
	return b.String()
}

// interval writes a share with its interval.
func interval(v, lo, hi results.Number) string {
	if !lo.Known || !hi.Known {
		return shareOr(v)
	}
	return fmt.Sprintf("%s (%s to %s)", shareOr(v), shareOr(lo), shareOr(hi))
}

// shareOr writes a share that may be missing.
func shareOr(n results.Number) string {
	if !n.Known {
		return "–"
	}
	return share(n.Value)
}

// share writes 0.123 as 12.3 %, and large shares without needless digits.
func share(v float64) string {
	switch p := 100 * v; {
	case p >= 99.95:
		return fmt.Sprintf("%.0f %%", p)
	default:
		return trim(fmt.Sprintf("%.1f", p)) + " %"
	}
}

// methodTable is a line per method.
func methodTable(v *verdict) string {
	t := table.NewWriter()
	t.SetStyle(plainStyle())
	columns := rightFrom(3, 5)
	columns = append(columns, table.ColumnConfig{Number: 7, Align: text.AlignRight, AlignHeader: text.AlignRight}, table.ColumnConfig{Number: 8, Align: text.AlignRight, AlignHeader: text.AlignRight})
	t.SetColumnConfigs(columns)
	t.AppendHeader(table.Row{"smoother", "rule", "behind on average", "mean rank", "behind at worst", "in cell", "cells", "failed"})
	mean, worst := v.winners()
	for i := range v.methods {
		m := &v.methods[i]
		mark := ""
		if i == mean {
			mark += " ◂"
		} else if m.Tied {
			mark += " ="
		}
		if i == worst {
			mark += " ◃"
		}
		t.AppendRow(table.Row{
			m.Smoother, m.Rule + mark,
			bracketed(m.MeanExcess, m.MeanLo, m.MeanHi), short(m.MeanRank), bracketed(m.WorstExcess, m.WorstLo, m.WorstHi),
			m.WorstCell, m.Cells, failedShare(m),
		})
	}
	return render(t)
}

// bracketed writes a share and its interval for a table.
func bracketed(v, lo, hi results.Number) string {
	return fmt.Sprintf("%s  [%s, %s]", shareOr(v), strings.TrimSuffix(shareOr(lo), " %"), strings.TrimSuffix(shareOr(hi), " %"))
}

// failedShare writes the share of replicates in which a method had no pick.
func failedShare(m *results.Verdict) string {
	if m.Failed == 0 {
		return "0"
	}
	return share(float64(m.Failed) / float64(m.Failed+m.Replicates))
}

// printShortfalls lists the cells in which no method is good enough.
func printShortfalls(w io.Writer, v *verdict) {
	if len(v.short) == 0 {
		fmt.Fprintf(w, "\nIn every cell the best method's mean held-out error is within %s of the noise floor.\n", share(v.floor))
		return
	}
	fmt.Fprintf(w, "\nNo method is good enough in %s: there the held-out error stays more than %s above the noise floor\n(or every method fails in more than 1 %% of the replicates):\n", counted(len(v.short), "cell"), share(v.floor))
	for _, s := range v.short {
		switch {
		case s.Smoother == "":
			fmt.Fprintf(w, "  %s: no method has a pick\n", s.Cell)
		case s.Failing:
			fmt.Fprintf(w, "  %s: every method fails too often; the best, %s, is %s above\n", s.Cell, method(s.Smoother, s.Rule), share(s.Above.Value.Value))
		default:
			fmt.Fprintf(w, "  %s: the best, %s, is %s above\n", s.Cell, method(s.Smoother, s.Rule), share(s.Above.Value.Value))
		}
	}
}

// printFailures lists the methods that failed, and those that cannot be judged.
func printFailures(w io.Writer, v *verdict) {
	for i := range v.methods {
		m := &v.methods[i]
		if m.Cells < len(v.cells) {
			fmt.Fprintf(w, "\n%s has picks in %d of the %d cells only, so that it cannot be called the best.", method(m.Smoother, m.Rule), m.Cells, len(v.cells))
		}
		if m.Failed > 0 {
			fmt.Fprintf(w, "\n%s has no pick in %s of %s replicates (%s); its figures leave these out.",
				method(m.Smoother, m.Rule), thousands(m.Failed), thousands(m.Failed+m.Replicates), m.Failure)
		}
	}
	for _, s := range v.silent {
		fmt.Fprintf(w, "\n%s is not judged: it has no pick anywhere (%s).", method(s.smoother, s.rule), s.why)
	}
	fmt.Fprintln(w)
}

// printLimits says what the verdict does not say.
func printLimits(w io.Writer, v *verdict) {
	if v.within < v.of {
		fmt.Fprintf(w, "Caution: only %s of %s exact expectations were met within 4 MCSE (table audit): find out why first.\n", thousands(v.within), thousands(v.of))
	}
	fmt.Fprint(w, `What this cannot say: it speaks for the cells that were run, each with equal weight, and for no other
curves, designs, noises or sample sizes; cells closer to your data deserve more weight than this gives
them. The intervals cover the chance of the simulation, not the choice of cells. Means feel rare large
errors, such as those beyond the range of the data; the table summary has medians and quantiles.
Where curves feed decisions that can hurt people, have the default confirmed on real data by a qualified
statistician under the rules that govern that work.
`)
}
