package api

import (
	"context"
	"encoding/json"
	"errors"
	"net/http"

	"github.com/danielgtaylor/huma/v2"

	"tarn/molecule/notation"
	"tarn/molecule/smiles"
	"tarn/search"
	"tarn/server/jobs"
	"tarn/store"
)

// problem turns an error into a problem document: what users can mend gets a 4xx and its own words; anything else is logged and
// answered without details.
func (s *server) problem(ctx context.Context, err error) error {
	if p := known(err); p != nil {
		return p
	}
	if ctx.Err() != nil {
		return huma.NewError(http.StatusServiceUnavailable, "the request was given up before it was answered")
	}
	s.Log.Error("request failed", "error", err)
	return huma.NewError(http.StatusInternalServerError, "something went wrong inside the server; its log says more")
}

// refusal is [server.problem] for errors that can only come from the molecule or the settings of a request.
func (s *server) refusal(ctx context.Context, err error) error {
	if known(err) != nil || ctx.Err() != nil {
		return s.problem(ctx, err)
	}
	return huma.NewError(http.StatusUnprocessableEntity, err.Error(), &huma.ErrorDetail{Location: "body.molecule", Message: err.Error()})
}

// known returns the problem document of an error that users can mend, or nil.
func known(err error) error {
	var (
		input   *notation.InputError
		setting *search.SettingError
		open    *search.UnspecifiedError
		state   *jobs.StateError
	)
	const unusable = http.StatusUnprocessableEntity
	switch {
	case errors.Is(err, store.ErrNotFound):
		return huma.NewError(http.StatusNotFound, "there is no such record")
	case errors.As(err, &state):
		return huma.NewError(http.StatusConflict, state.Error())
	case errors.As(err, &input):
		return huma.NewError(unusable, input.Error(), &huma.ErrorDetail{Location: "body.molecule." + input.Part, Message: input.Error()})
	case errors.As(err, &setting):
		return huma.NewError(unusable, setting.Error(), &huma.ErrorDetail{Location: "body." + setting.Name, Message: setting.Reason})
	case errors.As(err, &open):
		details := make([]error, 0, len(open.Isomers))
		for _, m := range open.Isomers {
			text := smiles.Canonical(m)
			details = append(details, &huma.ErrorDetail{Location: "body.molecule", Message: text, Value: text})
		}
		return huma.NewError(unusable, open.Error(), details...)
	}
	return nil
}

func writeProblem(w http.ResponseWriter, problem huma.StatusError) {
	w.Header().Set("Content-Type", "application/problem+json")
	w.WriteHeader(problem.GetStatus())
	_ = json.NewEncoder(w).Encode(problem)
}
