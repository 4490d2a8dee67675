// Package store keeps molecules, jobs, the library of minima and checkpoints in one bbolt file.
//
// In: the [Job] of a request, and after every round the checkpoint of its search. Out: jobs, the library of a molecule over all its
// searches, and the checkpoint to go on from. A job is on disk before Submit returns; the minima of a round and its checkpoint
// are written in one transaction, and writing the same round twice changes nothing, so a process may be killed at any moment.
//
// buckets.go lays down the file (raise schemaVersion when its meaning changes); jobs.go, molecules.go, library.go and checkpoints.go
// hold one kind of record each; check.go verifies the whole. Values are JSON, which keeps every bit of a float64.
package store
