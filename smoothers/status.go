package smoothers

import "fmt"

// A Status says whether a rung exists, and if not, why.
type Status uint8

// The statuses of a rung. The last three are for outside programs.
const (
	OK Status = iota
	DFUnattainable
	RankDeficient
	EmptyWindow
	NotFinite
	TimedOut
	Crashed
	BadReply
)

var statusWords = [...]string{
	OK:             "ok",
	DFUnattainable: "df-unattainable",
	RankDeficient:  "rank-deficient",
	EmptyWindow:    "empty-window",
	NotFinite:      "not-finite",
	TimedOut:       "timed-out",
	Crashed:        "crashed",
	BadReply:       "bad-reply",
}

// String returns the word that tables use.
func (s Status) String() string { return statusWords[s] }

// An OptionError reports an option that makes no sense.
type OptionError struct {
	Option string // the option's name in the study file
	Found  string // what it was
	Want   string // what is allowed
}

func (e *OptionError) Error() string {
	return fmt.Sprintf("%s = %s; want %s", e.Option, e.Found, e.Want)
}
