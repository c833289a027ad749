package main

import (
	"io"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"bendtest/scenarios"
	"bendtest/scoring"
	"bendtest/smoothers"
)

// A fitRequest is what the flags of fit ask for.
type fitRequest struct {
	data     string
	x, y     string
	families []string
	options  map[string]string // by name, those that were given
	df       string
	tuning   string
	at       string
	gamma    float64
	variance *float64
	format   string
}

// A fitResult is one family's readings.
type fitResult struct {
	family   string
	label    string // the family with the options that are away from their defaults
	smoother smoothers.Smoother
	readings []scoring.Reading
}

// fitFormats are the forms that fit prints.
var fitFormats = []string{"table", "csv", "json"}

func fitCommand() *cobra.Command {
	r := fitRequest{options: map[string]string{}}
	var variance float64
	cmd := &cobra.Command{
		Use:   "fit DATA.csv",
		Short: "Fit smoothers to a data set at several df",
		Long: `Fit one or more families to the columns of a CSV file, at each df or tuning asked
for, and print the fits with every criterion. Options of a family are flags of the
same names; see "bendtest describe families".`,
		Example: `  bendtest fit night.csv --df 2..12
  bendtest fit night.csv --family local --degree 2 --kernel gaussian --width bandwidth --df 4,6 --format json
  bendtest fit night.csv --family smoothing-spline --tuning 0.001 --at 200 --format csv`,
		Args: between(1, 1),
		RunE: func(cmd *cobra.Command, args []string) error {
			r.data = args[0]
			for _, name := range familyOptionNames() {
				if f := cmd.Flags().Lookup(name); f.Changed {
					r.options[name] = f.Value.String()
				}
			}
			if cmd.Flags().Changed("noise-variance") {
				r.variance = &variance
			}
			return r.run(cmd.OutOrStdout())
		},
	}
	f := cmd.Flags()
	f.SortFlags = false
	f.StringVar(&r.x, "x", "", "`COL` of x, by name or number (default the first)")
	f.StringVar(&r.y, "y", "", "`COL` of y, by name or number (default the second)")
	f.StringSliceVar(&r.families, "family", []string{"smoothing-spline"}, "`FAMILY` to fit; may be repeated: "+strings.Join(familyNames(), ", "))
	f.StringVar(&r.df, "df", "", "`LIST` of df, such as 2..12 or 4,5.5,7 (default 2..10)")
	f.StringVar(&r.tuning, "tuning", "", "`LIST` of values of the family's own parameter, instead of df")
	f.StringVar(&r.at, "at", "", "`FILE|COUNT`: predict at the x of a file, or at COUNT points over the data")
	f.Float64Var(&r.gamma, "gamma", 1, "`G`, the cost of a degree of freedom in gcv and cp")
	f.Float64Var(&variance, "noise-variance", 0, "`V`, the noise variance if it is known; cp needs it")
	f.StringVar(&r.format, "format", "table", "`FORM` to print: "+strings.Join(fitFormats, ", "))
	addFamilyFlags(f)
	return cmd
}

// familyNames lists the families.
func familyNames() []string {
	var names []string
	for _, f := range smoothers.Families() {
		names = append(names, f.Name)
	}
	return names
}

// familyOptionNames lists the options of all families, each once.
func familyOptionNames() []string {
	var names []string
	for _, f := range smoothers.Families() {
		for _, o := range scenarios.OptionsOf(f.New()) {
			if !slices.Contains(names, o.Name) {
				names = append(names, o.Name)
			}
		}
	}
	return names
}

// addFamilyFlags adds a flag per option, telling which families have it and what it
// takes.
func addFamilyFlags(f *pflag.FlagSet) {
	for _, name := range familyOptionNames() {
		var families []string
		var option scenarios.Option
		for _, family := range smoothers.Families() {
			for _, o := range scenarios.OptionsOf(family.New()) {
				if o.Name == name {
					families = append(families, family.Name)
					option = o
				}
			}
		}
		takes := option.Range
		if len(option.Allowed) > 0 {
			takes = strings.Join(option.Allowed, " or ")
		}
		usage := "`VALUE`"
		if takes != "" {
			usage += ", " + takes + ","
		}
		if len(families) == len(smoothers.Families()) {
			families = []string{"every family"}
		}
		f.String(name, "", usage+" for "+strings.Join(families, ", "))
		if option.Type == "true or false" {
			f.Lookup(name).NoOptDefVal = "true"
		}
	}
}

// run reads the data, fits, and prints.
func (r *fitRequest) run(w io.Writer) error {
	if !slices.Contains(fitFormats, r.format) {
		return refuse("unknown format %q (known: %s)", r.format, strings.Join(fitFormats, ", "))
	}
	if !(r.gamma > 0) || r.variance != nil && !(*r.variance > 0) {
		return refuse("--gamma and --noise-variance take numbers above 0")
	}
	sheet, err := r.sheet()
	if err != nil {
		return err
	}
	found, err := r.smoothers()
	if err != nil {
		return err
	}
	for i := range found {
		sheet.Smoother = found[i].smoother
		if found[i].readings, err = scoring.Readings(sheet); err != nil {
			return refuse("%s: %w", r.data, err)
		}
	}
	return printFits(w, r.format, sheet, found)
}

// sheet reads the data and the lists.
func (r *fitRequest) sheet() (*scoring.Sheet, error) {
	columns, err := readColumns(r.data, r.x, r.y)
	if err != nil {
		return nil, err
	}
	s := &scoring.Sheet{X: columns[0], Y: columns[1], Gamma: r.gamma, Variance: r.variance}
	if len(s.X) == 0 {
		return nil, refuse("%s: there are no observations", r.data)
	}
	switch {
	case r.df != "" && r.tuning != "":
		return nil, refuse("--df and --tuning exclude each other")
	case r.tuning != "":
		s.Tuning, err = numbers("--tuning", r.tuning)
	case r.df == "":
		r.df = "2..10"
		fallthrough
	default:
		if s.DF, err = scenarios.ParseGrid(r.df); err != nil {
			err = refuse("--df: %w", err)
		}
	}
	if err == nil && r.at != "" {
		s.At, err = r.points(s.X)
	}
	return s, err
}

// smoothers makes the families that are asked for, with the options that are given
// set on each that has them.
func (r *fitRequest) smoothers() ([]fitResult, error) {
	used := map[string]bool{}
	var list []fitResult
	for _, name := range r.families {
		at := slices.Index(familyNames(), name)
		if at < 0 {
			return nil, unknownWord("family", name, familyNames())
		}
		family := smoothers.Families()[at]
		s := family.New()
		for _, o := range scenarios.OptionsOf(s) {
			text, given := r.options[o.Name]
			if !given {
				continue
			}
			used[o.Name] = true
			if err := scenarios.Set(s, o.Name, text); err != nil {
				return nil, refuse("--%s %s: %w", o.Name, text, err)
			}
		}
		if err := s.Check(); err != nil {
			return nil, refuse("%s: %w", name, err)
		}
		list = append(list, fitResult{family: name, label: scenarios.Label(name, family.New(), s), smoother: s})
	}
	for name := range r.options {
		if !used[name] {
			return nil, refuse("--%s: none of %s has this option", name, strings.Join(r.families, ", "))
		}
	}
	return list, nil
}

// points reads --at: a count of points over the range of x, or a file of x.
func (r *fitRequest) points(x []float64) ([]float64, error) {
	const most = 10_000_000
	count, err := strconv.Atoi(r.at)
	if err != nil {
		columns, err := readColumns(r.at, "")
		if err != nil {
			return nil, err
		}
		return columns[0], nil
	}
	if count < 2 || count > most {
		return nil, refuse("--at %d; want a file, or a count between 2 and %d", count, most)
	}
	lo, hi := slices.Min(x), slices.Max(x)
	at := make([]float64, count)
	for i := range at {
		share := float64(i) / float64(count-1)
		at[i] = lo*(1-share) + hi*share
	}
	return at, nil
}

// readColumns reads columns of a CSV file; whatever is wrong is a wrong request.
func readColumns(path string, columns ...string) ([][]float64, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, refuse("%w", unwrapPath(err))
	}
	defer f.Close()
	values, faults := scenarios.ReadColumns(path, f, columns...)
	if len(faults) > 0 {
		return nil, &requestError{faults}
	}
	return values, nil
}

// numbers reads positive numbers separated by commas.
func numbers(flag, text string) ([]float64, error) {
	var list []float64
	for word := range strings.SplitSeq(text, ",") {
		v, err := strconv.ParseFloat(strings.TrimSpace(word), 64)
		if err != nil || math.IsNaN(v) || v < 0 {
			return nil, refuse("%s: %q is not a number of at least 0", flag, word)
		}
		list = append(list, v)
	}
	return list, nil
}
