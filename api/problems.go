package api

import (
	"context"
	"encoding/json"
	"errors"
	"net/http"
	"strings"

	"github.com/danielgtaylor/huma/v2"

	"tarn/molecule/notation"
	"tarn/molecule/smiles"
	"tarn/search"
	"tarn/server/jobs"
	"tarn/store"
)

// Problem is a problem document (RFC 9457). Detail is one sentence for the user; Errors says where the request is at fault.
type Problem struct {
	Type   string   `json:"type" doc:"Always about:blank: the status says what kind of problem it is"`
	Title  string   `json:"title"`
	Status int      `json:"status"`
	Detail string   `json:"detail"`
	Errors []*Fault `json:"errors,omitempty"`
}

// Fault is one place of a request that cannot be used.
type Fault struct {
	Message  string `json:"message"`
	Location string `json:"location,omitempty" doc:"Such as body.molecule.smiles or query.limit"`
	Pointer  string `json:"pointer,omitempty" doc:"JSON pointer into the body, such as #/molecule/smiles"`
	Column   int    `json:"column,omitempty" doc:"Character of a SMILES, from 1"`
	Value    any    `json:"value,omitempty" doc:"What stands there, or what may be put there instead"`
}

// init makes huma answer its own refusals in the same form; it is the hook that huma has for that.
func init() {
	huma.NewError = func(status int, detail string, faults ...error) huma.StatusError {
		return newProblem(status, detail, faults...)
	}
}

func newProblem(status int, detail string, faults ...error) *Problem {
	p := &Problem{Type: "about:blank", Title: http.StatusText(status), Status: status, Detail: detail}
	for _, err := range faults {
		if err != nil {
			p.Errors = append(p.Errors, faultOf(err))
		}
	}
	if detail == "validation failed" && len(p.Errors) > 0 { // huma's words for faults that it found itself
		first := p.Errors[0]
		p.Detail = strings.TrimPrefix(strings.TrimPrefix(first.Location, "body."), "query.") + ": " + first.Message
	}
	return p
}

func faultOf(err error) *Fault {
	f := &Fault{Message: err.Error()}
	var own *Fault
	var detailed huma.ErrorDetailer
	switch {
	case errors.As(err, &own):
		f = own
	case errors.As(err, &detailed):
		d := detailed.ErrorDetail()
		f = &Fault{Message: d.Message, Location: d.Location, Value: d.Value}
		if text, err := json.Marshal(d.Value); err != nil || len(text) > 100 { // no echo of whole molecules
			f.Value = nil
		}
	}
	if path, inBody := strings.CutPrefix(f.Location, "body"); inBody {
		f.Pointer = "#" + strings.ReplaceAll(path, ".", "/")
	}
	return f
}

func (f *Fault) Error() string { return f.Message }

// Error returns the detail.
func (p *Problem) Error() string { return p.Detail }

// GetStatus implements huma.StatusError.
func (p *Problem) GetStatus() int { return p.Status }

// ContentType implements huma.ContentTypeFilter.
func (p *Problem) ContentType(string) string { return "application/problem+json" }

func (p *Problem) write(w http.ResponseWriter) {
	w.Header().Set("Content-Type", p.ContentType(""))
	w.WriteHeader(p.Status)
	_ = json.NewEncoder(w).Encode(p)
}

// problem turns an error into a problem document: what users can mend gets a 4xx and its own words; anything else is logged and
// answered without details.
func (s *server) problem(ctx context.Context, err error) error {
	if p := known(err); p != nil {
		return p
	}
	if ctx.Err() != nil {
		return newProblem(http.StatusServiceUnavailable, "the request took too long and was given up; nothing was queued")
	}
	s.Log.Error("request failed", "error", err)
	return newProblem(http.StatusInternalServerError, "something went wrong inside the server; its log says more")
}

// refusal is [server.problem] for errors that can only come from the molecule or the settings of a request.
func (s *server) refusal(ctx context.Context, err error) error {
	if known(err) != nil || ctx.Err() != nil {
		return s.problem(ctx, err)
	}
	return newProblem(http.StatusUnprocessableEntity, err.Error(), &Fault{Location: "body.molecule", Message: err.Error()})
}

// known returns the problem document of an error that users can mend, or nil.
func known(err error) *Problem {
	var (
		problem *Problem
		input   *notation.InputError
		setting *search.SettingError
		open    *search.UnspecifiedError
		state   *jobs.StateError
	)
	const unusable = http.StatusUnprocessableEntity
	switch {
	case errors.As(err, &problem):
		return problem
	case errors.Is(err, store.ErrNotFound):
		return newProblem(http.StatusNotFound, "there is no such record; GET the list to see what there is")
	case errors.As(err, &state):
		return newProblem(http.StatusConflict, state.Error())
	case errors.As(err, &input):
		return newProblem(unusable, input.Error(), inputFaults(input)...)
	case errors.As(err, &setting):
		return newProblem(unusable, setting.Error(), &Fault{Location: "body." + setting.Name, Message: setting.Reason})
	case errors.As(err, &open):
		var faults []error
		for _, m := range open.Isomers {
			faults = append(faults, choice(smiles.Canonical(m)))
		}
		return newProblem(unusable, open.Error(), faults...)
	}
	return nil
}

// inputFaults says where in the molecule of a request the fault is, or which parts of it could be submitted instead.
func inputFaults(input *notation.InputError) []error {
	location := "body.molecule." + input.Part
	if input.Part == "molecule" {
		location = "body.molecule"
	}
	var syntax *smiles.SyntaxError
	var fragments *notation.FragmentsError
	switch {
	case errors.As(input, &syntax):
		return []error{&Fault{Location: location, Message: syntax.Reason, Column: syntax.Column}}
	case errors.As(input, &fragments):
		var faults []error
		for _, text := range fragments.SMILES {
			faults = append(faults, choice(text))
		}
		return faults
	}
	return []error{&Fault{Location: location, Message: input.Error()}}
}

// choice is a SMILES that could be submitted instead. It stands in the value, as it is, for programs that offer it to their users.
func choice(text string) *Fault {
	return &Fault{Location: "body.molecule", Message: text, Value: text}
}
