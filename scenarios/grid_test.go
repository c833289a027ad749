package scenarios

import (
	"slices"
	"strings"
	"testing"
)

func TestGridsListTheirDF(t *testing.T) {
	tests := []struct {
		text string
		want []float64
	}{
		{"2..5", []float64{2, 3, 4, 5}},
		{"2.5..5", []float64{2.5, 3.5, 4.5}},
		{"3..9 by 2", []float64{3, 5, 7, 9}},
		{" 3 .. 8  by  2 ", []float64{3, 5, 7}},
		{"2..2.3 by 0.1", []float64{2, 2.1, 2.2, 2.3}}, // as written, not 2.3000000000000003
		{"4..4", []float64{4}},
		{"5", []float64{5}},
		{"2, 2.5,4", []float64{2, 2.5, 4}},
	}
	for _, tt := range tests {
		got, err := ParseGrid(tt.text)
		if err != nil || !slices.Equal(got, tt.want) {
			t.Errorf("%q: %v %v, want %v", tt.text, got, err, tt.want)
		}
	}
}

func TestGridsAreBounded(t *testing.T) {
	if g, err := ParseGrid("1..1000"); err != nil || len(g) != 1000 {
		t.Errorf("1000 entries are refused: %v", err)
	}
	for text, want := range map[string]string{
		"1..1001":                       "at most 1000 entries",
		"1..2 by 0.000001":              "at most 1000 entries",
		"0..3":                          "df above 0",
		"1..1000001":                    "at most 1000000",
		"4..3":                          "low..high",
		"3..4 by 0":                     "a step above 0",
		"2,2":                           "ascending",
		"2,x":                           "a number",
		"2,-1":                          "df above 0",
		"nan":                           "df above 0",
		"":                              "a list",
		"-3..4":                         "a range",
		"1..2 by 0.1 by 2":              "a range",
		"1.." + strings.Repeat("1", 99): "a range",
		"1000000..1000000 by 0.00000000000000000000000000001": "",
		"100000..100001 by 0.0000000000000001":                "a larger step",
	} {
		_, err := ParseGrid(text)
		if want == "" {
			if err != nil {
				t.Errorf("%q: %v", text, err)
			}
			continue
		}
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: error %v, want %q in it", text, err, want)
		}
	}
}
