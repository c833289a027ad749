package main

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"strconv"

	"github.com/jedib0t/go-pretty/v6/table"

	"bendtest/results"
	"bendtest/scenarios"
	"bendtest/scoring"
	"bendtest/smoothers"
)

// printFits prints what fit found.
func printFits(w io.Writer, format string, sheet *scoring.Sheet, found []fitResult) error {
	switch format {
	case "json":
		return fitsJSON(w, sheet, found)
	case "csv":
		return fitsCSV(w, sheet, found)
	}
	return fitsTable(w, sheet, found)
}

// fitsTable prints a line per rung, for people, and marks the least GCV.
func fitsTable(w io.Writer, sheet *scoring.Sheet, found []fitResult) error {
	for i := range found {
		f := &found[i]
		t := table.NewWriter()
		t.SetStyle(plainStyle())
		t.SetColumnConfigs(rightFrom(1, 9))
		t.AppendHeader(table.Row{"df", "tr S", "tuning", "RSS", "gcv", "loocv", "aicc", "bic", "residual df", "status"})
		best := leastGCV(f.readings)
		for j, r := range f.readings {
			c := r.Criteria
			status := r.Status.String()
			if r.Note != "" {
				status += ": " + r.Note
			}
			if j == best {
				status += " ◂ least gcv"
			}
			t.AppendRow(table.Row{
				short(results.Num(r.DF)), short(r.TrS), short(r.Tuning), short(r.RSS), short(c.GCV), short(c.LOOCV),
				short(c.AICc), short(c.BIC), short(r.DFResidual), status,
			})
		}
		if _, err := fmt.Fprintf(w, "%s, %s observations\n\n%s\n\n", f.label, thousands(len(sheet.X)), render(t)); err != nil {
			return err
		}
	}
	return nil
}

// leastGCV returns the reading with the smallest gcv, or −1.
func leastGCV(readings []scoring.Reading) int {
	best := -1
	for i, r := range readings {
		g := r.Criteria.GCV
		if g.Known && (best < 0 || g.Value < readings[best].Criteria.GCV.Value) {
			best = i
		}
	}
	return best
}

// fitsCSV prints a line per rung and point: the observations, then the points asked
// for with --at.
func fitsCSV(w io.Writer, sheet *scoring.Sheet, found []fitResult) error {
	out := csv.NewWriter(w)
	out.Write([]string{"family", "df", "status", "point", "x", "y", "fitted", "leverage"})
	real := func(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }
	for i := range found {
		label := found[i].label
		for _, r := range found[i].readings {
			head := []string{label, real(r.DF), r.Status.String()}
			if r.Status != smoothers.OK {
				out.Write(append(head, "", "", "", "", ""))
				continue
			}
			for k, v := range r.Fitted {
				out.Write(append(head, "observation", real(sheet.X[k]), real(sheet.Y[k]), real(v), real(r.Leverage[k])))
			}
			for k, v := range r.Predicted {
				out.Write(append(head, "at", real(sheet.At[k]), "", real(v), ""))
			}
		}
	}
	out.Flush()
	return out.Error()
}

// A jsonFit is one rung as fit prints it in JSON. Figures that do not apply are
// null.
type jsonFit struct {
	Family     string                     `json:"family"`
	Options    map[string]json.RawMessage `json:"options"`
	DF         float64                    `json:"df"`
	TrS        results.Number             `json:"tr_s"`
	TrSTS      results.Number             `json:"tr_sts"`
	DFResidual results.Number             `json:"df_residual"`
	Tuning     results.Number             `json:"tuning"`
	Status     string                     `json:"status"`
	Note       string                     `json:"note,omitempty"`
	RSS        results.Number             `json:"rss"`
	GCV        results.Number             `json:"gcv"`
	LOOCV      results.Number             `json:"loocv"`
	KFold      results.Number             `json:"kfold"`
	KFoldSE    results.Number             `json:"kfold_se"`
	CP         results.Number             `json:"cp"`
	AIC        results.Number             `json:"aic"`
	AICc       results.Number             `json:"aicc"`
	BIC        results.Number             `json:"bic"`
	REML       results.Number             `json:"reml"`
	ML         results.Number             `json:"ml"`
	Fitted     []float64                  `json:"fitted"`
	Leverage   []float64                  `json:"leverage"`
	At         []float64                  `json:"at,omitempty"`
	Predicted  []float64                  `json:"predicted,omitempty"`
}

// fitsJSON prints an array with an object per rung.
func fitsJSON(w io.Writer, sheet *scoring.Sheet, found []fitResult) error {
	list := []jsonFit{}
	for i := range found {
		options, err := optionValues(found[i].smoother)
		if err != nil {
			return err
		}
		for _, r := range found[i].readings {
			c := r.Criteria
			list = append(list, jsonFit{
				Family: found[i].family, Options: options, DF: r.DF, TrS: r.TrS, TrSTS: r.TrSTS,
				DFResidual: r.DFResidual, Tuning: r.Tuning, Status: r.Status.String(), Note: r.Note, RSS: r.RSS,
				GCV: c.GCV, LOOCV: c.LOOCV, CP: c.CP, AIC: c.AIC, AICc: c.AICc, BIC: c.BIC, REML: c.REML, ML: c.ML,
				Fitted: r.Fitted, Leverage: r.Leverage, At: sheet.At, Predicted: r.Predicted,
			})
		}
	}
	out := json.NewEncoder(w)
	out.SetIndent("", " ")
	return out.Encode(list)
}

// optionValues returns the options of a smoother as JSON values.
func optionValues(s smoothers.Smoother) (map[string]json.RawMessage, error) {
	values := map[string]json.RawMessage{}
	for _, o := range scenarios.OptionsOf(s) {
		text := []byte(o.Default)
		if !json.Valid(text) { // a word
			var err error
			if text, err = json.Marshal(o.Default); err != nil {
				return nil, err
			}
		}
		values[o.Name] = text
	}
	return values, nil
}
