package influx

import (
	"context"
	"errors"
	"fmt"
	"net/http"
	"strconv"
	"strings"
	"time"

	client "github.com/influxdata/influxdb-client-go/v2/api/http"
)

// Failure is why a database could not be read or written, and what to do.
type Failure struct {
	Text, Hint string
	Err        error

	again bool // another attempt may succeed
	slow  bool // the time for an answer ran out
	ours  bool // the server may find fault with the question: one more attempt will do
}

func (f *Failure) Error() string {
	if f.Hint == "" {
		return f.Text
	}
	return f.Text + "; hint: " + f.Hint
}

func (f *Failure) Unwrap() error { return f.Err }

// at puts what was asked for before a failure's text.
func at(what string, err error) error {
	var f *Failure
	if errors.As(err, &f) {
		g := *f
		g.Text = what + ": " + f.Text
		return &g
	}
	return err
}

func slow(limit time.Duration) *Failure {
	return &Failure{Text: fmt.Sprintf("no complete answer within %v", limit), Hint: "raise time_out_s of the log, or look whether the server is overloaded", again: true, slow: true}
}

// partial is an answer that lacks readings the server has.
func partial(got, want int64) *Failure {
	return &Failure{Text: fmt.Sprintf("the answer holds %d readings of %d: it is not whole", got, want), Hint: "nothing of it was used; look whether the server or something between is failing", again: true}
}

// brokenOff is an error met in an answer that had begun.
type brokenOff struct{ error }

func (b brokenOff) Unwrap() error { return b.error }

// explain turns an error of the client into a Failure.
func (c *conn) explain(ctx context.Context, err error) error {
	if err == nil {
		return nil
	}
	var f *Failure
	if errors.As(err, &f) {
		return f
	}
	var ce *client.Error
	if !errors.As(err, &ce) || ce.StatusCode == 0 {
		text, hint := err.Error(), "is the server still running? run the command again once it is"
		if errors.As(err, new(brokenOff)) {
			return &Failure{Text: "the answer broke off: " + text, Err: err, again: true}
		}
		if !c.met.Load() {
			hint = "is the server running, and is the address of the log right?"
		}
		if !noDatabase(text) {
			return &Failure{Text: "the connection failed: " + text, Hint: hint, Err: err, again: true}
		}
		return &Failure{Text: fmt.Sprintf("there is no bucket %q", c.in.Bucket), Hint: bucketHint, Err: err}
	}
	c.met.Store(true)
	said := ce.Message
	if said == "" {
		said = ce.Error()
	}
	said = strings.TrimSpace(said)
	if len(said) > 300 {
		said = said[:300]
	}
	f = &Failure{Text: fmt.Sprintf("the server answers %d: %s", ce.StatusCode, said), Err: err}
	switch code := ce.StatusCode; {
	case noDatabase(said):
		f.Text, f.Hint = fmt.Sprintf("there is no bucket %q: the server answers %d: %s", c.in.Bucket, code, said), bucketHint
	case code == http.StatusUnauthorized && c.in.Token.IsEmpty():
		f.Text, f.Hint = "the server asks for a token", fmt.Sprintf("the variable %s is not set; on an InfluxDB 1.8 a token is user:password", c.in.TokenEnv)
	case code == http.StatusUnauthorized:
		f.Text, f.Hint = fmt.Sprintf("the server refuses the token in %s", c.in.TokenEnv), "look whether it is the token of this server and still in force; on an InfluxDB 1.8 it is user:password"
	case code == http.StatusForbidden && strings.Contains(strings.ToLower(said), "flux"):
		f.Hint = "set flux-enabled = true in the [http] section of the server's settings"
	case code == http.StatusForbidden:
		f.Hint = fmt.Sprintf("the token in %s may not use this bucket", c.in.TokenEnv)
	case code == http.StatusNotFound || code == http.StatusMethodNotAllowed || code == http.StatusNotImplemented:
		f.Hint = versionHint(c.version(ctx))
	case code == http.StatusTooManyRequests || code >= 500:
		f.again, f.ours = true, code == http.StatusInternalServerError
	}
	return f
}

const bucketHint = "compare bucket and organisation of the log with the server's; on an InfluxDB 1.8 the bucket is database or database/retention"

// noDatabase recognises what servers say of a bucket that is not there.
func noDatabase(said string) bool {
	s := strings.ToLower(said)
	return strings.Contains(s, "no database") || strings.Contains(s, "database not found") || strings.Contains(s, "could not find bucket") ||
		strings.Contains(s, "retention policy not found") || strings.Contains(s, "invalid retention policy") || strings.Contains(s, "bucket") && strings.Contains(s, "not found")
}

// versionHint says what a server's version means for this program, which asks
// in Flux.
func versionHint(version string) string {
	const needs = "this source needs an InfluxDB 2.x, or 1.8 with Flux enabled"
	part := strings.SplitN(version, ".", 3)
	major, err := strconv.Atoi(part[0])
	minor := 0
	if len(part) > 1 {
		minor, _ = strconv.Atoi(part[1])
	}
	switch {
	case err != nil:
		return needs + "; look whether the address leads to one"
	case major >= 3:
		return fmt.Sprintf("the server is version %s, and 3.x answers no Flux: %s; export the readings to files instead", version, needs)
	case major == 1 && minor < 8 || major < 1:
		return fmt.Sprintf("the server is version %s: %s", version, needs)
	}
	return needs + fmt.Sprintf(" (it says it is %s)", version)
}
