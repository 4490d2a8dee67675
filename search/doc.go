// Package search explores a potential energy surface for all of its low minima and says how complete the answer is.
//
// In: a [Problem] (force field, graph symmetry, start geometries) and [Settings]. Out: a [Result] with the ranked minima and the
// estimated coverage. [Run] is a loop over small parts: choose starts (plan.go) → walk (overminima.go, anneal.go,
// dynamics.go) → quench and check (trail.go) → identify and count (merge.go) → describe (describe.go) → stop? (stop.go). A new method is
// a new file beside anneal.go that turns a start geometry and a random stream into snapshots; everything else is shared. docs/search.md
// describes the methods with their sources and compares them.
//
// The parts that know nothing of searches are packages of their own: moves (changes of geometry), schedule (temperatures), integrate
// (equations of motion), coverage (estimators of what is unseen); enumerate is the brute-force yardstick of the tests.
package search
