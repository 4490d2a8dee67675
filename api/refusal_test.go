package api_test

import (
	"bytes"
	"encoding/json"
	"fmt"
	"net/http"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/api"
)

// water is a molfile with its coordinates to be filled in.
const water = "water\n  hand\n\n  3  2  0  0  0  0  0  0  0  0999 V2000\n" +
	"    0.0000    0.0000    0.0000 O   0  0\n%10s    0.0000    0.0000 H   0  0\n   -0.2400    0.9300    0.0000 H   0  0\n" +
	"  1  2  1  0\n  1  3  1  0\nM  END\n"

func quoted(text string) string {
	b, _ := json.Marshal(text)
	return string(b)
}

func TestBadRequestsAreRefusedWithTheirPlace(t *testing.T) {
	s := newService(t)
	truncated := fmt.Sprintf(water, "0.9600")
	truncated = truncated[:strings.Index(truncated, "  1  3")]
	for _, c := range []struct {
		name, body string
		status     int
		location   string
		says       string
	}{
		{"no SMILES", `{"molecule": {"smiles": "C1CC(("}}`, 422, "body.molecule.smiles", "column 6"},
		{"impossible valence", `{"molecule": {"smiles": "CC(C)(C)(C)C"}}`, 422, "body.molecule.smiles", "atom 2"},
		{"no kekulé structure", `{"molecule": {"smiles": "c1cccc1"}}`, 422, "body.molecule.smiles", "aromatic ring"},
		{"salt", `{"molecule": {"smiles": "[Na+].CC(=O)[O-]"}}`, 422, "body.molecule", "2 separate molecules"},
		{"open stereochemistry", `{"molecule": {"smiles": "CC(O)C(=O)O"}}`, 422, "body.molecule", "stereoisomer"},
		{"element that MMFF94 lacks", `{"molecule": {"smiles": "C[Se]C"}}`, 422, "body.molecule", "atom 2 (Se"},
		{"5,000 atoms", `{"molecule": {"smiles": "` + strings.Repeat("C", 1666) + `"}}`, 422, "body.molecule", "5000 atoms"},
		{"no molecule", `{"molecule": {}}`, 422, "body.molecule", "exactly one"},
		{"no atoms", `{"molecule": {"smiles": " "}}`, 422, "body.molecule", "exactly one"},
		{"two notations", `{"molecule": {"smiles": "C", "xyz": "1\n\nC 0 0 0"}}`, 422, "body.molecule", "exactly one"},
		{"cluster and molecule", `{"molecule": {"smiles": "C", "lj": 5}}`, 422, "body.molecule", "exactly one"},
		{"a cluster of one", `{"molecule": {"lj": 1}}`, 422, "body.molecule", "cluster of 1"},
		{"huge cluster", `{"molecule": {"lj": 5000}}`, 422, "body.molecule", "cluster of 5000"},
		{"lj for a molecule", `{"molecule": {"smiles": "C"}, "field": "lj"}`, 422, "body.field", "clusters"},
		{"not a number in a molfile", `{"molecule": {"molfile": ` + quoted(fmt.Sprintf(water, "nan")) + `}}`, 422, "body.molecule.molfile", "line 6"},
		{"truncated molfile", `{"molecule": {"molfile": ` + quoted(truncated) + `}}`, 422, "body.molecule.molfile", "line"},
		{"no molfile", `{"molecule": {"molfile": "hello"}}`, 422, "body.molecule.molfile", "line"},
		{"infinite XYZ", `{"molecule": {"xyz": "1\n\nAr inf 0 0\n"}}`, 422, "body.molecule.xyz", "line 3"},
		{"unknown method", `{"molecule": {"smiles": "CC"}, "method": "guess"}`, 422, "body.method", "anneal"},
		{"unknown field", `{"molecule": {"smiles": "CC"}, "field": "uff"}`, 422, "body.field", "mmff94"},
		{"negative temperature", `{"molecule": {"smiles": "CC"}, "temperature_k": -5}`, 422, "body.temperature_k", "> 0"},
		{"zero kelvin", `{"molecule": {"smiles": "CC"}, "temperature_k": 0}`, 422, "body.temperature_k", "> 0"},
		{"negative window", `{"molecule": {"smiles": "CC"}, "window_kcal_mol": -1}`, 422, "body.window_kcal_mol", "> 0"},
		{"more than everything", `{"molecule": {"smiles": "CC"}, "coverage": 1.5}`, 422, "body.coverage", "<= 1"},
		{"no quenches", `{"molecule": {"smiles": "CC"}, "max_quenches": 0}`, 422, "body.max_quenches", ">= 1"},
		{"half a quench", `{"molecule": {"smiles": "CC"}, "max_quenches": 1.5}`, 422, "body.max_quenches", "integer"},
		{"negative seed", `{"molecule": {"smiles": "CC"}, "seed": -1}`, 422, "body.seed", ">= 0"},
		{"text for a number", `{"molecule": {"smiles": "CC"}, "seed": "one"}`, 422, "body.seed", "integer"},
		{"misspelt setting", `{"molecule": {"smiles": "CC"}, "temprature_k": 300}`, 422, "body.temprature_k", "unexpected"},
		{"misspelt part", `{"molecule": {"smile": "CC"}}`, 422, "body.molecule.smile", "unexpected"},
		{"nothing", `{}`, 422, "body", "molecule"},
		{"no JSON", `{"molecule": `, 400, "body", "JSON"},
		{"NaN", `{"molecule": {"smiles": "CC"}, "seed": NaN}`, 400, "body", "invalid character"},
	} {
		t.Run(c.name, func(t *testing.T) {
			a := s.send("POST", "/api/v1/jobs", c.body)
			require.Equal(t, c.status, a.StatusCode, a.text)
			require.Equal(t, "application/problem+json", a.Header.Get("Content-Type"))
			p := into[api.Problem](t, a)
			require.Equal(t, c.status, p.Status)
			require.Equal(t, http.StatusText(c.status), p.Title)
			require.NotEmpty(t, p.Errors)
			require.Contains(t, p.Detail+p.Errors[0].Message, c.says)
			require.Equal(t, c.location, p.Errors[0].Location)
			require.Equal(t, "#"+strings.ReplaceAll(strings.TrimPrefix(c.location, "body"), ".", "/"), p.Errors[0].Pointer)
			require.NotContains(t, p.Detail, "validation failed", "say what is wrong")
		})
	}
	require.Empty(t, into[struct{ Jobs []api.Job }](t, s.get("/api/v1/jobs")).Jobs, "nothing of this was queued")
	require.Equal(t, http.StatusOK, s.get("/readyz").StatusCode, "the server is up")
	s.submit(`{"molecule": {"smiles": "CC"}}`)
}

func TestSmilesErrorMarksTheColumn(t *testing.T) {
	s := newService(t)
	p := into[api.Problem](t, s.send("POST", "/api/v1/molecules", `{"smiles": "CCQC"}`))
	require.Equal(t, 422, p.Status)
	require.Equal(t, 3, p.Errors[0].Column)
	lines := strings.Split(p.Detail, "\n")
	require.Len(t, lines, 3)
	require.Equal(t, strings.Index(lines[1], "Q"), strings.Index(lines[2], "^"), "the caret stands under the character")
}

func TestProblemsOfferWhatCanBeSubmittedInstead(t *testing.T) {
	s := newService(t)
	for body, count := range map[string]int{
		`{"molecule": {"smiles": "CC(O)C(O)C"}}`:       3, // 2,3-butanediol: a pair of enantiomers and the meso form
		`{"molecule": {"smiles": "[Na+].CC(=O)[O-]"}}`: 2,
	} {
		p := into[api.Problem](t, s.send("POST", "/api/v1/jobs", body))
		require.Len(t, p.Errors, count)
		for _, fault := range p.Errors {
			require.Equal(t, http.StatusAccepted, s.send("POST", "/api/v1/jobs", `{"molecule": {"smiles": `+quoted(fault.Value.(string))+`}}`).StatusCode)
		}
	}
}

func TestOtherRefusals(t *testing.T) {
	s := newService(t)
	key := s.submit(`{"molecule": {"smiles": "CC"}}`).Molecule.Key
	ethane := `{"molecule": {"smiles": "CC"}}`
	for _, c := range []struct {
		name, method, path, body string
		header                   []string
		status                   int
	}{
		{"wrong content type", "POST", "/api/v1/jobs", ethane, []string{"Content-Type", "text/plain"}, 415},
		{"SMILES as text", "POST", "/api/v1/molecules", "CC", []string{"Content-Type", "chemical/x-daylight-smiles"}, 415},
		{"too large", "POST", "/api/v1/molecules", `{"molfile": "` + string(bytes.Repeat([]byte("x"), 17<<20)) + `"}`, nil, 413},
		{"page of another site", "POST", "/api/v1/jobs", ethane, []string{"Sec-Fetch-Site", "cross-site"}, 403},
		{"unknown job", "GET", "/api/v1/jobs/00009999", "", nil, 404},
		{"events of an unknown job", "GET", "/api/v1/jobs/00009999/events", "", nil, 404},
		{"unknown molecule", "GET", "/api/v1/molecules/nothing", "", nil, 404},
		{"minima of an unknown molecule", "GET", "/api/v1/molecules/nothing/minima", "", nil, 404},
		{"unknown route", "GET", "/api/v1/conformers", "", nil, 404},
		{"wrong method", "DELETE", "/api/v1/jobs/00000001", "", nil, 405},
		{"bad limit", "GET", "/api/v1/jobs?limit=0", "", nil, 422},
		{"bad cursor", "GET", "/api/v1/jobs?cursor=newest", "", nil, 422},
		{"bad temperature", "GET", "/api/v1/molecules/" + key + "/minima?temperature_k=-1", "", nil, 422},
		{"temperature that is no number", "GET", "/api/v1/molecules/" + key + "/minima?temperature_k=NaN", "", nil, 422},
		{"endless window", "GET", "/api/v1/molecules/" + key + "/minima?window=Inf", "", nil, 422},
		{"bad window", "GET", "/api/v1/molecules/" + key + "/minima?window=wide", "", nil, 422},
		{"bad format", "GET", "/api/v1/molecules/" + key + "/minima?format=pdf", "", nil, 422},
		{"bad minima cursor", "GET", "/api/v1/molecules/" + key + "/minima?cursor=-4", "", nil, 422},
		{"misspelt parameter", "GET", "/api/v1/molecules/" + key + "/minima?temprature_k=300", "", nil, 422},
	} {
		t.Run(c.name, func(t *testing.T) {
			a := s.send(c.method, c.path, c.body, c.header...)
			require.Equal(t, c.status, a.StatusCode, a.text)
			require.Equal(t, "application/problem+json", a.Header.Get("Content-Type"))
			p := into[api.Problem](t, a)
			require.Equal(t, c.status, p.Status)
			require.NotEmpty(t, p.Detail)
			require.Less(t, len(a.text), 2000, "no echo of large requests")
		})
	}
}

func TestServiceRoutes(t *testing.T) {
	s := newService(t)
	s.submit(`{"molecule": {"smiles": "CC"}}`)
	require.Equal(t, "ok\n", s.get("/healthz").text)
	require.Equal(t, "ok\n", s.get("/readyz").text)
	require.Contains(t, s.get("/metrics").text, `tarn_jobs{state="queued"} 1`)
	require.Equal(t, "the page", s.get("/").text)
	require.Equal(t, "nosniff", s.get("/api/v1/jobs").Header.Get("X-Content-Type-Options"))

	d := into[struct {
		OpenAPI    string `json:"openapi"`
		Paths      map[string]map[string]any
		Components struct {
			Schemas map[string]struct{ Properties map[string]any }
		}
	}](t, s.get("/openapi.json"))
	require.Equal(t, "3.1.0", d.OpenAPI)
	for path, methods := range map[string][]string{
		"/api/v1/jobs": {"get", "post"}, "/api/v1/jobs/{id}": {"get"}, "/api/v1/jobs/{id}/pause": {"post"},
		"/api/v1/jobs/{id}/resume": {"post"}, "/api/v1/jobs/{id}/cancel": {"post"}, "/api/v1/jobs/{id}/events": {"get"},
		"/api/v1/events": {"get"}, "/api/v1/molecules": {"get", "post"}, "/api/v1/molecules/{key}": {"get"},
		"/api/v1/molecules/{key}/minima": {"get"},
	} {
		for _, method := range methods {
			require.Contains(t, d.Paths[path], method, path)
		}
	}
	require.Contains(t, d.Components.Schemas["JobRequest"].Properties, "window_kcal_mol")
	require.Contains(t, d.Components.Schemas["Problem"].Properties, "detail")
}
