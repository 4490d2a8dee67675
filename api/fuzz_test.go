package api_test

import (
	"encoding/json"
	"io"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"github.com/prometheus/client_golang/prometheus"
	"github.com/stretchr/testify/require"

	"tarn/api"
	"tarn/store"
)

// forgetful is a queue that accepts every job and keeps none; what else a queue can do is not asked of it.
type forgetful struct{ api.Queue }

func (forgetful) Submit(j store.Job) (store.Job, error) {
	j.ID, j.State = "1", store.Queued
	return j, nil
}

// FuzzJobRequest posts arbitrary bodies as jobs: whatever they hold, the answer is a job (202) or a problem document that blames the
// request (4xx), never a panic or a fault of the server. Every route up to the queue is the real one; nothing is searched.
func FuzzJobRequest(f *testing.F) {
	for _, seed := range []string{
		`{"molecule":{"smiles":"CCO","name":"ethanol"},"seed":7,"max_quenches":10}`,
		`{"molecule":{"lj":13},"field":"lj","method":"anneal","window_kcal_mol":2.5,"coverage":0.9,"max_seconds":1e3,"temperature_k":300,"priority":-1}`,
		`{"molecule":{"xyz":"3\n\nO 0 0 0\nH 0.96 0 0\nH -0.24 0.93 0\n","charge":0},"field":"mmff94s","method":"mixed"}`,
		`{"molecule":{"molfile":"m\n\n\n  1  0  0  0  0  0  0  0  0  0999 V2000\n    0.0000    0.0000    0.0000 C   0  0\nM  END\n"}}`,
		`{"molecule":{"smiles":"CC=CC"}}`, `{"molecule":{"smiles":"[Na+].[Cl-]"}}`, `{"molecule":{"smiles":"C1CC"}}`, `{"molecule":{}}`,
		`{"molecule":{"smiles":"C","lj":3}}`, `{"molecule":{"smiles":"C"},"seed":-1,"colour":"red"}`, `{"molecule":{"smiles":"C"},"coverage":1e999}`,
		`[]`, `null`, `{`, "\xff\x00", ``, `{"molecule":{"lj":9223372036854775807}}`, `{"molecule":{"smiles":["C"]}}`,
	} {
		f.Add([]byte(seed))
	}
	quiet := slog.New(slog.NewTextHandler(io.Discard, nil))
	handler := api.New(api.Options{Queue: forgetful{}, Metrics: prometheus.NewRegistry(), Log: quiet, Version: "test"})
	f.Fuzz(func(t *testing.T, body []byte) {
		if len(body) > 10_000 {
			return
		}
		request := httptest.NewRequestWithContext(t.Context(), http.MethodPost, "/api/v1/jobs", strings.NewReader(string(body)))
		request.Header.Set("Content-Type", "application/json")
		answer := httptest.NewRecorder()
		handler.ServeHTTP(answer, request)
		if answer.Code == http.StatusAccepted {
			var job api.Job
			require.NoError(t, json.Unmarshal(answer.Body.Bytes(), &job), answer.Body)
			require.NotEmpty(t, job.Molecule.Key)
			return
		}
		require.GreaterOrEqual(t, answer.Code, 400, answer.Body)
		require.Less(t, answer.Code, 500, answer.Body)
		var problem api.Problem
		require.NoError(t, json.Unmarshal(answer.Body.Bytes(), &problem), answer.Body)
		require.NotEmpty(t, problem.Detail)
	})
}
