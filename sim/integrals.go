package sim

import "sync"

// integrals keeps what integrals came to, by their content, so that cells that share
// a truth and a design law work them out once. The zero value is ready; many
// goroutines may use it.
type integrals struct {
	mu    sync.Mutex
	known map[string]integral
}

// An integral is a value, or why there is none.
type integral struct {
	value float64
	err   error
}

// get returns the integral with a key, worked out by work if it is not known.
func (k *integrals) get(key string, work func() (float64, error)) (float64, error) {
	k.mu.Lock()
	defer k.mu.Unlock()
	i, known := k.known[key]
	if !known {
		i.value, i.err = work()
		if k.known == nil {
			k.known = map[string]integral{}
		}
		k.known[key] = i
	}
	return i.value, i.err
}
