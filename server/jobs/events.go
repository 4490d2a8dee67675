package jobs

import (
	"sync"

	"tarn/store"
)

// events hands every change of a job to all listeners. A listener that does not keep up misses intermediate states of a job, never its
// latest one.
type events struct {
	mu        sync.Mutex
	listeners map[*Listener]bool
}

// Listener receives the states of jobs.
type Listener struct {
	hub   *events
	wake  chan struct{} // holds a token while there is something to take
	mu    sync.Mutex
	fresh map[string]store.Job
	order []string
}

func (e *events) listen() *Listener {
	l := &Listener{hub: e, wake: make(chan struct{}, 1), fresh: map[string]store.Job{}}
	e.mu.Lock()
	defer e.mu.Unlock()
	if e.listeners == nil {
		e.listeners = map[*Listener]bool{}
	}
	e.listeners[l] = true
	return l
}

// Ready is readable when Take has something to give.
func (l *Listener) Ready() <-chan struct{} { return l.wake }

// Take returns the jobs that changed since the last Take, each in its latest state, in the order of their changes.
func (l *Listener) Take() []store.Job {
	l.mu.Lock()
	defer l.mu.Unlock()
	jobs := make([]store.Job, 0, len(l.order))
	for _, id := range l.order {
		jobs = append(jobs, l.fresh[id])
	}
	clear(l.fresh)
	l.order = l.order[:0]
	return jobs
}

// Close ends the listening.
func (l *Listener) Close() {
	l.hub.mu.Lock()
	defer l.hub.mu.Unlock()
	delete(l.hub.listeners, l)
}

func (e *events) publish(job store.Job) {
	e.mu.Lock()
	defer e.mu.Unlock()
	for l := range e.listeners {
		l.offer(job)
	}
}

func (l *Listener) offer(job store.Job) {
	l.mu.Lock()
	defer l.mu.Unlock()
	if _, waiting := l.fresh[job.ID]; !waiting {
		l.order = append(l.order, job.ID)
	}
	l.fresh[job.ID] = job
	select {
	case l.wake <- struct{}{}:
	default:
	}
}
