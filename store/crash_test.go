package store_test

import (
	"bufio"
	"fmt"
	"os"
	"os/exec"
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/require"

	"tarn/molecule/notation"
	"tarn/search"
	"tarn/store"
)

const writerFolder = "TARN_STORE_TEST_WRITER" // set: this process writes into that folder until it is killed

func TestMain(m *testing.M) {
	if folder := os.Getenv(writerFolder); folder != "" {
		if err := writeForEver(folder); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
	}
	os.Exit(m.Run())
}

// writeForEver submits jobs and records rounds; it prints a line for each that is done.
func writeForEver(folder string) error {
	s, err := store.Open(folder)
	if err != nil {
		return err
	}
	for {
		job, err := s.Submit(store.Job{Input: notation.Input{LJ: 2}, Molecule: store.Molecule{Key: "lj-2"}, Field: "lj"})
		if err != nil {
			return err
		}
		fmt.Println(job.ID, 0)
		library, err := s.OpenLibrary("lj-2", "lj", pair, nil)
		if err != nil {
			return err
		}
		var c search.Checkpoint
		for n := range 20 {
			c.Minima = append(c.Minima, search.Minimum{Energy: -1 / distanceOf(n), X: turned(n, 0)})
			for i := range c.Minima {
				c.Minima[i].Hits++
				c.Minima[i].LastHitInRound = c.Round
			}
			c.Round++
			if err := library.Record(job.ID, c); err != nil {
				return err
			}
			fmt.Println(job.ID, c.Round)
		}
	}
}

func TestNothingAcknowledgedIsLostByKill(t *testing.T) {
	folder := t.TempDir()
	for kill := range 5 {
		writer := exec.Command(os.Args[0])
		writer.Env = append(os.Environ(), writerFolder+"="+folder)
		var complaint strings.Builder
		writer.Stderr = &complaint
		out, err := writer.StdoutPipe()
		require.NoError(t, err)
		require.NoError(t, writer.Start())
		acknowledged := map[string]int{} // job → rounds
		lines := bufio.NewScanner(out)
		for count := 0; lines.Scan(); count++ {
			var id string
			var round int
			_, err := fmt.Sscan(lines.Text(), &id, &round)
			require.NoError(t, err)
			acknowledged[id] = round
			if count == 7+11*kill {
				time.AfterFunc(time.Duration(kill)*time.Millisecond, func() { _ = writer.Process.Kill() }) // somewhere in the next writes
			}
		}
		require.Error(t, writer.Wait(), "it was killed")
		require.Empty(t, complaint.String())

		s, err := store.Open(folder)
		require.NoError(t, err)
		faults, err := s.Check()
		require.NoError(t, err)
		require.Empty(t, faults)
		entries, err := s.Entries("lj-2", "lj")
		require.NoError(t, err)
		for id, round := range acknowledged {
			_, err := s.Job(id)
			require.NoError(t, err, "a job that was acknowledged is on disk")
			if round == 0 {
				continue
			}
			c, err := s.Checkpoint(id)
			require.NoError(t, err)
			require.GreaterOrEqual(t, c.Round, round)
			require.LessOrEqual(t, c.Round, round+1, "at most the round in flight is ahead of what was acknowledged")
			require.Len(t, c.Minima, c.Round)
			for n, m := range c.Minima {
				require.Equal(t, c.Round-n, m.Hits)
				require.Equal(t, m.Hits, entries[n].HitsByJob[id], "library and checkpoint are of the same moment")
			}
		}
		require.NoError(t, s.Close())
	}
}
