package scenarios

import (
	"reflect"
	"strings"
	"testing"

	"bendtest/sim"
	"bendtest/sim/expr"
	"bendtest/smoothers"
)

// A shared is embedded into the options below.
type shared struct {
	Wide bool `option:"wide" doc:"wider"`
}

// An example has an option of each type.
type example struct {
	shared
	Count  int              `option:"count" min:"1" max:"9" doc:"how many" unit:"rows"`
	Share  float64          `option:"share" above:"0" below:"1"`
	Level  *float64         `option:"level" above:"0"`
	Word   string           `option:"word" oneof:"red green"`
	Text   string           `option:"text"`
	Ends   []float64        `option:"ends"`
	Curve  *expr.Expression `option:"curve"`
	Must   float64          `option:"must" required:"true"`
	Hidden int
}

func TestOptionsOfReadsTags(t *testing.T) {
	want := []Option{
		{Name: "wide", Doc: "wider", Type: "true or false", Default: "false"},
		{Name: "count", Doc: "how many", Unit: "rows", Type: "whole number", Range: "from 1 to 9", Default: "3"},
		{Name: "share", Type: "number", Range: "above 0 and below 1", Default: "0.5"},
		{Name: "level", Type: "number", Range: "above 0"},
		{Name: "word", Type: "word", Allowed: []string{"red", "green"}, Default: "red"},
		{Name: "text", Type: "text"},
		{Name: "ends", Type: "list of numbers", Default: "[0, 1]"},
		{Name: "curve", Type: "expression in x"},
		{Name: "must", Type: "number", Required: true},
	}
	got := OptionsOf(&example{Count: 3, Share: 0.5, Word: "red", Ends: []float64{0, 1}})
	for i := range want {
		if want[i].Allowed == nil {
			want[i].Allowed = []string{}
		}
		if i >= len(got) || !reflect.DeepEqual(got[i], want[i]) {
			t.Errorf("option %d: got %+v, want %+v", i, got[i], want[i])
		}
	}
	if len(got) != len(want) {
		t.Errorf("%d options, want %d", len(got), len(want))
	}
}

func TestSetTakesTextOfAFlag(t *testing.T) {
	var e example
	for option, text := range map[string]string{
		"wide": "true", "count": "9", "share": " 2.5e-1", "level": "3", "word": "green", "text": "a, b", "ends": "1,2.5", "curve": "2*x",
	} {
		if err := Set(&e, option, text); err != nil {
			t.Errorf("%s = %s: %v", option, text, err)
		}
	}
	if !e.Wide || e.Count != 9 || e.Share != 0.25 || *e.Level != 3 || e.Word != "green" || e.Text != "a, b" || !reflect.DeepEqual(e.Ends, []float64{1, 2.5}) || e.Curve.String() == "" {
		t.Errorf("got %+v", e)
	}
}

func TestSetRefusesInWords(t *testing.T) {
	tests := []struct{ option, text, want string }{
		{"count", "10", "count = 10 (want a whole number from 1 to 9)"},
		{"count", "2.0", "count = 2.0 (want a whole number from 1 to 9)"},
		{"count", "x", `count = "x" (want a whole number from 1 to 9)`},
		{"share", "1", "share = 1 (want a number above 0 and below 1)"},
		{"share", "NaN", "share = NaN (want a number above 0 and below 1)"},
		{"level", "-1", "level = -1 (want a number above 0)"},
		{"wide", "yes", `wide = "yes" (want true or false)`},
		{"word", "gren", `unknown word "gren" (did you mean "green"? known: green, red)`},
		{"ends", "1,b", `entry 2 of ends = "b" (want a number)`},
		{"curve", "2**x", `curve: found "*" (want `},
		{"shar", "1", `unknown option "shar" (did you mean "share"? known: `},
	}
	for _, tt := range tests {
		e := example{Count: 3}
		err := Set(&e, tt.option, tt.text)
		if err == nil || !strings.HasPrefix(err.Error(), tt.want) {
			t.Errorf("%s = %s: error %q, want %q", tt.option, tt.text, err, tt.want)
		}
		if !reflect.DeepEqual(e, example{Count: 3}) {
			t.Errorf("%s = %s changed the options to %+v", tt.option, tt.text, e)
		}
	}
}

// TestAllOptionsAreDescribed goes through every list of kinds there is.
func TestAllOptionsAreDescribed(t *testing.T) {
	all := map[string]any{"design": defaultDesign(), "noise": &sim.Noise{}}
	for _, k := range sim.Designs() {
		all["design "+k.Name] = k.New()
	}
	for _, k := range sim.Noises() {
		all["noise "+k.Name] = k.New()
	}
	for _, f := range smoothers.Families() {
		all["family "+f.Name] = f.New()
	}
	for _, k := range vocabulary("").Rules {
		all["rule "+k.Name] = k.New()
	}
	for kind, options := range all {
		for _, o := range OptionsOf(options) {
			if o.Doc == "" || o.Type == "" {
				t.Errorf("%s: option %s has no description", kind, o.Name)
			}
			if o.Type == "word" && !o.Required && !strings.Contains(" "+strings.Join(o.Allowed, " ")+" ", " "+o.Default+" ") {
				t.Errorf("%s: option %s defaults to %q, not one of %v", kind, o.Name, o.Default, o.Allowed)
			}
			if !o.Required && o.Default != "" {
				if err := Set(options, o.Name, o.Default); err != nil {
					t.Errorf("%s: the default of %s is refused: %v", kind, o.Name, err)
				}
			}
		}
	}
	for _, k := range Keys(vocabulary("").Rules) {
		if k.Doc == "" || k.Type == "" {
			t.Errorf("key %s %s has no description", k.Table, k.Name)
		}
	}
}

func TestCanonicalIsOneLineOfAllOptions(t *testing.T) {
	got := Canonical("example", &example{Count: 3, Word: "red", Must: 1e-7})
	if want := `example wide=false count=3 share=0 word="red" must=1e-07`; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}

func TestOptionsOfRefusesWhatIsNoStruct(t *testing.T) {
	for name, v := range map[string]any{"value": example{}, "number": new(int), "tag": &struct {
		A float64 `option:"a" min:"low"`
	}{}} {
		t.Run(name, func(t *testing.T) {
			defer func() {
				if recover() == nil {
					t.Error("no panic")
				}
			}()
			OptionsOf(v)
		})
	}
}
