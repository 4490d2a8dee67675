package api_test

import (
	"bufio"
	"context"
	"encoding/json"
	"io"
	"net/http"
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/require"

	"tarn/api"
	"tarn/ensemble/report"
	"tarn/molecule/notation"
	"tarn/search"
	"tarn/store"
)

func TestJobFromRequestToRankedMinima(t *testing.T) {
	s := newService(t)
	a := s.send("POST", "/api/v1/jobs", `{"molecule": {"smiles": "CCCC", "name": "butane"}, "seed": 7, "window_kcal_mol": 4, "priority": 2}`)
	require.Equal(t, http.StatusAccepted, a.StatusCode, a.text)
	job := into[api.Job](t, a)
	require.Equal(t, "/api/v1/jobs/"+job.ID, a.Header.Get("Location"))
	require.Equal(t, store.Queued, job.State)
	require.Equal(t, report.Molecule{Name: "butane", SMILES: "CCCC", Formula: "C4H10", Key: job.Molecule.Key}, job.Molecule)
	require.Equal(t, "mmff94", job.Field)
	require.Equal(t, search.Anneal, job.Method)
	require.Equal(t, uint64(7), job.Seed)
	require.Equal(t, 4.0, job.Settings.WindowKcal)
	require.Equal(t, 298.15, job.Settings.TemperatureK, "defaults are filled in")
	require.Equal(t, 2, job.Priority)
	require.Equal(t, job, into[api.Job](t, s.get(a.Header.Get("Location"))))

	s.begin()
	events := s.done(job.ID)
	last := events[len(events)-1]
	require.Equal(t, store.Done, last.State)
	require.Equal(t, search.StopCoverage, last.StopReason)
	require.Equal(t, 2, last.Progress.Minima)
	require.Equal(t, 1.0, last.Progress.Fraction)
	require.Len(t, s.done(job.ID), 1, "whoever comes late gets the last state and the end")
	seen := s.get("/api/v1/jobs/"+job.ID+"/events", "Last-Event-ID", job.ID+"-done")
	require.Equal(t, http.StatusNoContent, seen.StatusCode, "a browser that connects again must stop")

	// The published MMFF94 difference is 0.78 kcal/mol: Halgren, J. Comput. Chem. 20, 730 (1999), table of conformational energies.
	d := into[report.Document](t, s.get("/api/v1/molecules/"+job.Molecule.Key+"/minima"))
	require.Equal(t, job.Molecule, d.Molecule)
	require.Equal(t, "mmff94", d.Field)
	require.Len(t, d.Elements, 14)
	require.Len(t, d.Minima, 2)
	require.InDelta(t, 0.78, d.Minima[1].Relative, 0.02)
	require.Equal(t, []int{1, 2}, []int{d.Minima[0].Degeneracy, d.Minima[1].Degeneracy})
	require.InDelta(t, 0.65, d.Minima[0].Population, 0.01)
	require.InDelta(t, 1, d.Minima[0].Population+d.Minima[1].Population, 1e-12)
	require.Len(t, d.Minima[0].XYZ, 14)
	require.Len(t, d.Minima[0].RotationalConstantsMHz, 3)
	require.Equal(t, last.Progress.Quenches, d.Quenches)
	require.GreaterOrEqual(t, d.Coverage.Estimate, 0.99)

	s.send("POST", "/api/v1/jobs", `{"molecule": {"smiles": "CCCC"}, "max_quenches": 1, "window_kcal_mol": 2, "seed": 8}`)
	more := into[report.Document](t, s.get("/api/v1/molecules/"+job.Molecule.Key+"/minima"))
	require.Equal(t, d.Coverage, more.Coverage, "a search that has hardly begun takes nothing away")
	require.Equal(t, 4.0, more.Settings.WindowKcal)
	require.Equal(t, uint64(7), *more.Seed)

	warm := into[report.Document](t, s.get("/api/v1/molecules/"+job.Molecule.Key+"/minima?temperature_k=1000"))
	require.Less(t, warm.Minima[0].Population, d.Minima[0].Population, "warmth favours the higher minimum")
	narrow := into[report.Document](t, s.get("/api/v1/molecules/"+job.Molecule.Key+"/minima?window=0.5"))
	require.Len(t, narrow.Minima, 1)
	require.Equal(t, 1.0, narrow.Minima[0].Population)

	known := into[struct{ Molecules []report.Molecule }](t, s.get("/api/v1/molecules"))
	require.Equal(t, []report.Molecule{job.Molecule}, known.Molecules)
	one := into[struct {
		report.Molecule
		Libraries []api.LibraryOverview
	}](t, s.get("/api/v1/molecules/"+job.Molecule.Key))
	require.Equal(t, job.Molecule, one.Molecule)
	require.Len(t, one.Libraries, 1)
	require.Equal(t, 2, one.Libraries[0].Minima)
	require.InDelta(t, d.Minima[0].Energy, one.Libraries[0].Lowest, 1e-12)
}

func TestMinimaAreDownloadedInEveryFormat(t *testing.T) {
	s := newService(t)
	s.begin()
	job := s.submit(`{"molecule": {"smiles": "CCCCC", "name": "n-pentane"}}`)
	s.done(job.ID)
	path := "/api/v1/molecules/" + job.Molecule.Key + "/minima"
	for _, c := range []struct {
		query, accept, media string
		check                func(text string)
	}{
		{"?format=sdf", "", "chemical/x-mdl-sdfile", func(text string) {
			source, err := notation.NewSource(strings.NewReader(text), notation.SDF, 0)
			require.NoError(t, err)
			for range 4 {
				r, err := source.Read()
				require.NoError(t, err)
				require.Equal(t, "n-pentane", r.Name)
				require.Len(t, r.Geometry, 3*17)
			}
			_, err = source.Read()
			require.ErrorIs(t, err, io.EOF)
			require.Contains(t, text, ">  <relative_kcal_mol>")
		}},
		{"?format=xyz", "", "chemical/x-xyz", func(text string) {
			require.Equal(t, 4, strings.Count(text, "17\n"))
			require.Equal(t, 4*(17+2), strings.Count(text, "\n"))
		}},
		{"?format=csv", "", "text/csv; charset=utf-8", func(text string) {
			rows := strings.Split(strings.TrimSpace(text), "\n")
			require.Len(t, rows, 5)
			require.True(t, strings.HasPrefix(rows[0], "rank,energy_kcal_mol,"))
			require.True(t, strings.HasPrefix(rows[4], "4,"))
		}},
		{"?format=json", "", "application/json", func(text string) { require.True(t, json.Valid([]byte(text))) }},
		{"", "chemical/x-xyz", "chemical/x-xyz", nil},
		{"", "text/csv;q=0.3, chemical/x-mdl-sdfile;q=0.9", "chemical/x-mdl-sdfile", nil},
		{"", "text/html, */*;q=0.1", "application/json", nil},
		{"?format=csv", "application/json", "text/csv; charset=utf-8", nil},
	} {
		a := s.get(path+c.query, "Accept", c.accept)
		require.Equal(t, http.StatusOK, a.StatusCode, a.text)
		require.Equal(t, c.media, a.Header.Get("Content-Type"))
		if c.query != "" {
			require.Contains(t, a.Header.Get("Content-Disposition"), "attachment; filename=n-pentane-"+job.Molecule.Key+"."+strings.TrimPrefix(c.query, "?format="))
		}
		if c.check != nil {
			c.check(a.text)
		}
	}
	refused := s.get(path, "Accept", "image/png")
	require.Equal(t, http.StatusNotAcceptable, refused.StatusCode)
	require.Equal(t, "application/problem+json", refused.Header.Get("Content-Type"))
}

func TestMinimaArePagedAndThinned(t *testing.T) {
	s := newService(t)
	s.begin()
	job := s.submit(`{"molecule": {"smiles": "CCCCC"}}`)
	s.done(job.ID)
	path := "/api/v1/molecules/" + job.Molecule.Key + "/minima"
	all := into[report.Document](t, s.get(path)).Minima
	require.Len(t, all, 4)
	var paged []report.Minimum
	for cursor, pages := "", 0; ; pages++ {
		require.Less(t, pages, 4)
		page := into[report.Document](t, s.get(path+"?limit=3&cursor="+cursor))
		paged = append(paged, page.Minima...)
		if cursor = page.NextCursor; cursor == "" {
			break
		}
	}
	require.Equal(t, all, paged)
	thinned := into[report.Document](t, s.get(path+"?rmsd=100")).Minima
	require.Equal(t, all[:1], thinned, "everything is closer than 100 Å to the lowest")
	require.Equal(t, all, into[report.Document](t, s.get(path+"?rmsd=0.01")).Minima)
}

func TestClusterIsSearchedInReducedUnits(t *testing.T) {
	s := newService(t)
	s.begin()
	job := s.submit(`{"molecule": {"lj": 7}}`)
	require.Equal(t, "lj", job.Field)
	s.done(job.ID)
	path := "/api/v1/molecules/" + job.Molecule.Key + "/minima"
	d := into[report.Document](t, s.get(path))
	// Four minima; the lowest at -16.505384: Hoare and Pal, Adv. Phys. 20, 161 (1971).
	require.Len(t, d.Minima, 4)
	require.InDelta(t, -16.505384, d.Minima[0].Energy, 1e-6)
	require.Equal(t, http.StatusNotAcceptable, s.get(path+"?format=sdf").StatusCode, "no bonds, no SD file")
	require.Equal(t, http.StatusOK, s.get(path+"?format=xyz").StatusCode)
}

func TestJobsAreListedPausedResumedAndCancelled(t *testing.T) {
	s := newService(t)
	var ids []string
	for range 5 {
		ids = append(ids, s.submit(`{"molecule": {"smiles": "CCO"}}`).ID)
	}
	type list struct {
		Jobs       []api.Job
		NextCursor string `json:"next_cursor"`
	}
	first := into[list](t, s.get("/api/v1/jobs?limit=3"))
	require.Equal(t, []string{ids[4], ids[3], ids[2]}, []string{first.Jobs[0].ID, first.Jobs[1].ID, first.Jobs[2].ID})
	rest := into[list](t, s.get("/api/v1/jobs?limit=3&cursor="+first.NextCursor))
	require.Len(t, rest.Jobs, 2)
	require.Empty(t, rest.NextCursor)

	act := func(id, action string) (int, api.Job) {
		a := s.send("POST", "/api/v1/jobs/"+id+"/"+action, "")
		var job api.Job
		if a.StatusCode == http.StatusOK {
			job = into[api.Job](t, a)
		} else {
			require.Equal(t, "application/problem+json", a.Header.Get("Content-Type"))
		}
		return a.StatusCode, job
	}
	for _, c := range []struct {
		id, action string
		status     int
		state      store.State
	}{
		{ids[0], "resume", 409, ""},
		{ids[0], "pause", 200, store.Paused},
		{ids[0], "pause", 409, ""},
		{ids[0], "resume", 200, store.Queued},
		{ids[0], "cancel", 200, store.Cancelled},
		{ids[0], "cancel", 409, ""},
		{"00009999", "cancel", 404, ""},
	} {
		status, job := act(c.id, c.action)
		require.Equal(t, c.status, status, "%s %s", c.action, c.id)
		require.Equal(t, c.state, job.State)
	}
}

func TestOneStreamTellsOfAllJobs(t *testing.T) {
	s := newService(t)
	waiting := s.submit(`{"molecule": {"smiles": "CCO", "name": "before"}, "priority": -1}`)
	ctx, cancel := context.WithTimeout(t.Context(), time.Minute)
	defer cancel()
	request, err := http.NewRequestWithContext(ctx, "GET", s.URL+"/api/v1/events", http.NoBody)
	require.NoError(t, err)
	response, err := s.Client().Do(request)
	require.NoError(t, err)
	defer response.Body.Close()
	require.Equal(t, "text/event-stream", response.Header.Get("Content-Type"))
	require.Equal(t, "no-store", response.Header.Get("Cache-Control"))
	lines := bufio.NewScanner(response.Body)
	next := func() api.Job {
		for lines.Scan() {
			if data, ok := strings.CutPrefix(lines.Text(), "data: "); ok {
				var job api.Job
				require.NoError(t, json.Unmarshal([]byte(data), &job))
				return job
			}
		}
		require.FailNow(t, "the stream ended", lines.Err())
		return api.Job{}
	}
	require.Equal(t, waiting.ID, next().ID, "what has not ended comes first")
	later := s.submit(`{"molecule": {"lj": 4}, "max_quenches": 1}`)
	require.Equal(t, later.ID, next().ID)
	s.begin()
	for job := next(); job.ID != later.ID || job.State != store.Done; job = next() {
		require.False(t, job.ID == waiting.ID && job.State == store.Done, "the one with the higher priority runs first")
	}
	for job := next(); job.ID != waiting.ID || job.State != store.Done; job = next() {
	}
}

func TestMoleculeIsCheckedWithoutQueuing(t *testing.T) {
	s := newService(t)
	a := s.send("POST", "/api/v1/molecules", `{"smiles": "C[C@@H]1CC[C@H]([C@@H](C1)O)C(C)C", "name": "menthol"}`)
	require.Equal(t, http.StatusOK, a.StatusCode, a.text)
	u := into[report.Understood](t, a)
	require.Equal(t, "C10H20O", u.Formula)
	require.InDelta(t, 156.27, u.MassU, 0.01) // IUPAC atomic weights
	require.Equal(t, 31, u.Atoms)
	require.Equal(t, 1, u.RotatableBonds)
	require.Equal(t, "menthol", u.Name)
	labels := map[int]string{}
	for _, c := range u.Stereocentres {
		labels[c.Atom] = c.Label
	}
	require.Equal(t, map[int]string{2: "R", 5: "S", 6: "R"}, labels) // (1R,2S,5R)-menthol: 1 is atom 6, 2 is atom 5, 5 is atom 2
	require.Empty(t, u.ForceField)
	open := into[report.Understood](t, s.send("POST", "/api/v1/molecules", `{"smiles": "CC(O)C(=O)O"}`))
	require.Len(t, open.Stereoisomers, 2, "lactic acid has two")
	require.Empty(t, into[struct{ Jobs []api.Job }](t, s.get("/api/v1/jobs")).Jobs)
	require.Empty(t, into[struct{ Molecules []report.Molecule }](t, s.get("/api/v1/molecules")).Molecules)
}
