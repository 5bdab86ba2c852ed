package influxtest

import (
	"bytes"
	"io"
	"net/http"
	"net/http/httputil"
	"net/url"
	"strconv"
	"strings"
	"sync/atomic"
	"testing"

	"net/http/httptest"
)

// Truncator stands before a server like a faulty gateway: of long answers it
// passes on only the first lines, in good order and without any error.
type Truncator struct {
	// Times is how many answers are still cut.
	Times   atomic.Int64
	address string
}

// NewTruncator listens in front of a server until the test ends. Answers of
// more than lines lines are cut to so many.
func NewTruncator(t testing.TB, address string, lines int) *Truncator {
	t.Helper()
	to, err := url.Parse(address)
	if err != nil {
		t.Fatal(err)
	}
	tr := &Truncator{}
	gate := &httputil.ReverseProxy{
		Rewrite: func(r *httputil.ProxyRequest) {
			r.SetURL(to)
			r.Out.Header.Del("Accept-Encoding")
		},
		ModifyResponse: func(res *http.Response) error {
			if !strings.HasSuffix(res.Request.URL.Path, "/query") || res.StatusCode != http.StatusOK {
				return nil
			}
			body, err := io.ReadAll(res.Body)
			if err != nil {
				return err
			}
			if all := bytes.SplitAfter(body, []byte("\n")); len(all) > lines && tr.Times.Add(-1) >= 0 {
				body = bytes.Join(all[:lines], nil)
			}
			res.Body = io.NopCloser(bytes.NewReader(body))
			res.ContentLength = int64(len(body))
			res.Header.Set("Content-Length", strconv.Itoa(len(body)))
			return nil
		},
	}
	s := httptest.NewServer(gate)
	t.Cleanup(s.Close)
	tr.address = s.URL
	return tr
}

// Address is where the gateway listens.
func (t *Truncator) Address() string { return t.address }
