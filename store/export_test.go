package store

// SkipSync lets the system write when it likes: tests that only look at the logic need no waiting for the disk.
func (s *Store) SkipSync() { s.db.NoSync = true }
