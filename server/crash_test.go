package server

import (
	"bufio"
	"context"
	"encoding/json"
	"io"
	"net/http"
	"os"
	"os/exec"
	"regexp"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/stretchr/testify/require"

	"tarn/api"
	"tarn/ensemble/report"
	"tarn/store"
)

// process is a running program with its address.
type process struct {
	t       *testing.T
	command *exec.Cmd
	address string
	log     *strings.Builder
	logged  chan struct{} // closed when the log has ended
}

var listening = regexp.MustCompile(`msg=listening address=(http://\S+)`)

func serveProcess(t *testing.T, folder string, more ...string) *process {
	t.Helper()
	p := &process{t: t, log: &strings.Builder{}, logged: make(chan struct{})}
	p.command = exec.Command(os.Args[0], append([]string{"serve", "--listen", "127.0.0.1:0", "--data", folder}, more...)...)
	p.command.Env = append(os.Environ(), programSwitch+"=1")
	stderr, err := p.command.StderrPipe()
	require.NoError(t, err)
	require.NoError(t, p.command.Start())
	address := make(chan string, 1)
	go func() {
		defer close(p.logged)
		lines := bufio.NewScanner(stderr)
		for lines.Scan() {
			p.log.WriteString(lines.Text() + "\n")
			if found := listening.FindStringSubmatch(lines.Text()); found != nil {
				address <- found[1]
			}
		}
	}()
	select {
	case p.address = <-address:
	case <-p.logged:
		require.FailNow(t, "the program ended", p.log.String())
	}
	t.Cleanup(func() { p.end(syscall.SIGKILL) })
	return p
}

// end sends a signal and waits; it returns how the process ended.
func (p *process) end(signal syscall.Signal) error {
	if p.command.ProcessState != nil {
		return nil
	}
	_ = p.command.Process.Signal(signal)
	<-p.logged
	return p.command.Wait()
}

func (p *process) request(method, path, body string) string {
	p.t.Helper()
	request, err := http.NewRequestWithContext(p.t.Context(), method, p.address+path, strings.NewReader(body))
	require.NoError(p.t, err)
	request.Header.Set("Content-Type", "application/json")
	response, err := http.DefaultClient.Do(request)
	require.NoError(p.t, err)
	defer response.Body.Close()
	defer http.DefaultClient.CloseIdleConnections()
	text, err := io.ReadAll(response.Body)
	require.NoError(p.t, err)
	require.Less(p.t, response.StatusCode, 300, string(text))
	return string(text)
}

// follow reads the events of a job until stop returns true or the stream ends; it returns the last one.
func (p *process) follow(id string, stop func(api.Job) bool) (last api.Job) {
	p.t.Helper()
	ctx, cancel := context.WithTimeout(p.t.Context(), 2*time.Minute)
	defer cancel()
	request, err := http.NewRequestWithContext(ctx, http.MethodGet, p.address+"/api/v1/jobs/"+id+"/events", http.NoBody)
	require.NoError(p.t, err)
	response, err := http.DefaultClient.Do(request)
	require.NoError(p.t, err)
	defer response.Body.Close()
	defer http.DefaultClient.CloseIdleConnections()
	lines := bufio.NewScanner(response.Body)
	lines.Buffer(nil, 1<<20)
	for lines.Scan() {
		if data, ok := strings.CutPrefix(lines.Text(), "data: "); ok {
			last = api.Job{}
			require.NoError(p.t, json.Unmarshal([]byte(data), &last))
			if stop(last) {
				break
			}
		}
	}
	return last
}

// minima returns the library without what depends on the clock.
func (p *process) minima(key string) report.Document {
	d := into[report.Document](p.t, p.request("GET", "/api/v1/molecules/"+key+"/minima", ""))
	d.WallSeconds = 0
	return d
}

const request = `{"molecule": {"smiles": "CCCCCC"}, "seed": 21, "window_kcal_mol": 4}`

func TestKilledSearchGoesOnToTheSameLibrary(t *testing.T) {
	calm := serveProcess(t, t.TempDir())
	job := into[api.Job](t, calm.request("POST", "/api/v1/jobs", request))
	calmEnd := calm.follow(job.ID, func(api.Job) bool { return false })
	require.Equal(t, store.Done, calmEnd.State)
	want := calm.minima(job.Molecule.Key)
	require.NoError(t, calm.end(syscall.SIGTERM))

	folder := t.TempDir()
	p := serveProcess(t, folder)
	again := into[api.Job](t, p.request("POST", "/api/v1/jobs", request))
	var last api.Job
	kills := 0
	for ; kills < 50; kills++ {
		events, round := 0, last.Progress.Round
		last = p.follow(again.ID, func(j api.Job) bool {
			events++
			// Every other time as soon as a round more is done, otherwise somewhere within it.
			return j.State == store.Running && j.Progress.Round >= round+kills%2 && events > 1+kills%3
		})
		if last.State.Settled() {
			break
		}
		require.Error(t, p.end(syscall.SIGKILL))
		p = serveProcess(t, folder)
	}
	require.Greater(t, kills, 1, "there was something to kill")
	require.Equal(t, store.Done, last.State)
	require.Equal(t, calmEnd.StopReason, last.StopReason)
	require.Equal(t, want, p.minima(again.Molecule.Key))
	t.Logf("killed %d times", kills)
}

func TestTerminatedServerEndsAtOnceAndLeavesItsJobInTheQueue(t *testing.T) {
	folder := t.TempDir()
	p := serveProcess(t, folder)
	job := into[api.Job](t, p.request("POST", "/api/v1/jobs", `{"molecule": {"smiles": "CCCCCCCCCCCC"}}`))
	p.follow(job.ID, func(j api.Job) bool { return j.State == store.Running && j.Progress.Round > 0 })
	opened, ended := make(chan struct{}), make(chan struct{})
	go func() {
		defer close(ended)
		events := 0
		p.follow(job.ID, func(api.Job) bool {
			if events++; events == 1 {
				close(opened)
			}
			return false
		})
	}()
	select {
	case <-opened:
	case <-ended:
		require.FailNow(t, "the stream ended before the server did")
	}
	require.NoError(t, p.end(syscall.SIGTERM), p.log.String())
	<-ended

	s, err := store.Open(folder)
	require.NoError(t, err)
	left, err := s.Job(job.ID)
	require.NoError(t, err)
	require.Equal(t, store.Queued, left.State)
	checkpoint, err := s.Checkpoint(job.ID)
	require.NoError(t, err)
	require.Positive(t, checkpoint.Round)
	require.NoError(t, s.Close())
}

func TestDemonstrationIsQueuedOnceInAnEmptyStore(t *testing.T) {
	folder := t.TempDir()
	for range 2 {
		p := serveProcess(t, folder, "--demo")
		list := into[struct{ Jobs []api.Job }](t, p.request("GET", "/api/v1/jobs", ""))
		require.Len(t, list.Jobs, 1)
		require.Equal(t, "C16H30O", list.Jobs[0].Molecule.Formula) // muscone
		require.NoError(t, p.end(syscall.SIGTERM), p.log.String())
	}
}

func TestProgramReportsByItsExitStatus(t *testing.T) {
	for _, c := range []struct {
		status    int
		arguments []string
	}{
		{exitDone, []string{"molecule", "CCO"}},
		{exitUnusable, []string{"molecule", "CCO("}},
	} {
		command := exec.Command(os.Args[0], c.arguments...)
		command.Env = append(os.Environ(), programSwitch+"=1")
		_ = command.Run()
		require.Equal(t, c.status, command.ProcessState.ExitCode(), c.arguments)
	}
}

func TestInterruptedProgramPrintsWhatItHasFound(t *testing.T) {
	var out, errOut strings.Builder
	command := exec.Command(os.Args[0], "search", "CCCCCCCCCCC", "--json", "--coverage", "1", "--window", "20")
	command.Env = append(os.Environ(), programSwitch+"=1")
	command.Stdout, command.Stderr = &out, &errOut
	require.NoError(t, command.Start())
	time.AfterFunc(time.Second, func() { _ = command.Process.Signal(os.Interrupt) }) // any moment will do
	require.Error(t, command.Wait())
	require.Equal(t, exitPartial, command.ProcessState.ExitCode(), errOut.String())
	require.Contains(t, errOut.String(), "interrupted")
}
