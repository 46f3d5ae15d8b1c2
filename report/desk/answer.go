package desk

import (
	"encoding/json"
	"errors"
	"fmt"
	"net/http"
	"strconv"

	"halfspan/report/ledger"
)

// failure is an answer that is not what was asked for, with its HTTP status.
type failure struct {
	status int
	text   string
}

func (f *failure) Error() string { return f.text }

func fail(status int, format string, args ...any) error {
	return &failure{status, fmt.Sprintf(format, args...)}
}

func refuse(w http.ResponseWriter, status int, text string) {
	w.Header().Set("Content-Type", "application/json")
	w.WriteHeader(status)
	_ = json.NewEncoder(w).Encode(map[string]string{"error": text})
}

// answerWith turns a function into a handler that answers in JSON.
func answerWith(f func(*http.Request) (any, error)) http.HandlerFunc {
	return func(w http.ResponseWriter, r *http.Request) {
		body, err := f(r)
		if err != nil {
			status := http.StatusInternalServerError
			var known *failure
			switch {
			case errors.As(err, &known):
				status = known.status
			case errors.Is(err, ledger.ErrStale):
				status = http.StatusConflict
			case errors.Is(err, ledger.ErrUnknown):
				status = http.StatusNotFound
			case errors.Is(err, ledger.ErrReason), errors.Is(err, ledger.ErrUnchanged), errors.Is(err, ledger.ErrNothing):
				status = http.StatusUnprocessableEntity
			case errors.Is(err, ledger.ErrBusy):
				status = http.StatusServiceUnavailable
			}
			refuse(w, status, err.Error())
			return
		}
		text, err := json.Marshal(body)
		if err != nil {
			refuse(w, http.StatusInternalServerError, "the answer cannot be written: "+err.Error())
			return
		}
		w.Header().Set("Content-Type", "application/json")
		_, _ = w.Write(text)
	}
}

// take reads the JSON body of a request.
func take[T any](r *http.Request) (T, error) {
	var v T
	dec := json.NewDecoder(r.Body)
	dec.DisallowUnknownFields()
	if err := dec.Decode(&v); err != nil {
		var large *http.MaxBytesError
		if errors.As(err, &large) {
			return v, fail(http.StatusRequestEntityTooLarge, "the request is larger than %d bytes", large.Limit)
		}
		return v, fail(http.StatusBadRequest, "the request cannot be read: %v", err)
	}
	return v, nil
}

func (d *Desk) paperOf(r *http.Request) (Paper, error) {
	p, ok := d.papers[r.URL.Query().Get("paper")]
	if !ok {
		return Paper{}, fail(http.StatusNotFound, "there is no such paper in this ledger")
	}
	return p, nil
}

func numberOf(r *http.Request, name string, low, high int) (int, error) {
	n, err := strconv.Atoi(r.URL.Query().Get(name))
	if err != nil || n < low || n > high {
		return 0, fail(http.StatusBadRequest, "%s must be a whole number from %d to %d", name, low, high)
	}
	return n, nil
}
