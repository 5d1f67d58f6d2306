package store

import "sync"

// A memory holds what rows say that are never changed once they are committed, so
// that a commit need not ask for them again. Only what another transaction
// committed is put in: what a transaction writes itself may yet be rolled back.
type memory[K comparable] struct {
	mu sync.Mutex
	m  map[K]int64
}

// get returns what is remembered of key, or asks and remembers.
func (m *memory[K]) get(key K, ask func() (int64, error)) (int64, error) {
	m.mu.Lock()
	v, known := m.m[key]
	m.mu.Unlock()
	if known {
		return v, nil
	}
	v, err := ask()
	if err != nil {
		return 0, err
	}
	m.mu.Lock()
	defer m.mu.Unlock()
	if m.m == nil {
		m.m = map[K]int64{}
	}
	m.m[key] = v
	return v, nil
}

// forget empties the memory.
func (m *memory[K]) forget() {
	m.mu.Lock()
	defer m.mu.Unlock()
	clear(m.m)
}
