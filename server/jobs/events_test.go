package jobs_test

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/search"
	"tarn/store"
)

func TestListenerThatDoesNotReadMissesOnlyWhatIsOutdated(t *testing.T) {
	b := newBench(t)
	asleep := b.runner.Listen()
	defer asleep.Close()
	first := b.submit(cluster5, search.Settings{MaxQuenches: 1}, 0)
	second := b.submit(cluster5, search.Settings{MaxQuenches: 1}, 0)
	b.start()
	b.until(second.ID, store.Done) // nobody waited for the one who sleeps
	<-asleep.Ready()
	got := asleep.Take()
	require.Len(t, got, 2, "one entry a job, however many changes there were")
	require.Equal(t, []string{first.ID, second.ID}, []string{got[0].ID, got[1].ID})
	require.Equal(t, []store.State{store.Done, store.Done}, []store.State{got[0].State, got[1].State})
	require.Empty(t, asleep.Take())
	select {
	case <-asleep.Ready():
		require.Fail(t, "there is nothing to take")
	default:
	}
}

func TestClosedListenerHearsNothing(t *testing.T) {
	b := newBench(t)
	l := b.runner.Listen()
	l.Close()
	l.Close()
	b.submit(cluster5, search.Settings{}, 0)
	require.Empty(t, l.Take())
}
