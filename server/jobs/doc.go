// Package jobs runs the searches of the queue one after the other and tells whoever listens how they go.
//
// In: jobs in the store. Out: their minima and checkpoints in the store, and events. runner.go holds the loop and what users may do to
// a job (pause, resume, cancel); run.go turns one job into a search; events.go hands its progress to listeners. All walks of a search
// share the workers, so running several jobs at a time would make none of them finish sooner.
package jobs
