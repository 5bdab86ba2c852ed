package influx

import (
	"context"
	"errors"
	"net"
	"net/http"
	"strings"
	"sync/atomic"
	"time"

	influxdb2 "github.com/influxdata/influxdb-client-go/v2"
	"github.com/influxdata/influxdb-client-go/v2/api"
	"github.com/influxdata/influxdb-client-go/v2/api/query"

	"sashlog/configs/site"
)

// patience is how long to wait before each further attempt: a server that is
// restarted comes back within it.
func patience() []time.Duration {
	return []time.Duration{500 * time.Millisecond, time.Second, 2 * time.Second, 4 * time.Second, 8 * time.Second, 15 * time.Second}
}

// conn is a connection to one server. It is safe for concurrent use.
type conn struct {
	in     *site.Influx
	client influxdb2.Client
	query  api.QueryAPI
	http   *http.Client
	// met is set once the server answered; before, a failure to reach it is
	// final.
	met   atomic.Bool
	waits []time.Duration // before each further attempt
}

func connect(in *site.Influx) *conn {
	// No limit within the HTTP client: it would cover the whole body without
	// saying so. Each query has a deadline of its own instead.
	h := &http.Client{Transport: &http.Transport{
		Proxy:               http.ProxyFromEnvironment,
		DialContext:         (&net.Dialer{Timeout: 10 * time.Second, KeepAlive: 15 * time.Second}).DialContext,
		TLSHandshakeTimeout: 10 * time.Second,
		MaxIdleConnsPerHost: workers + 1,
		IdleConnTimeout:     30 * time.Second,
		ForceAttemptHTTP2:   true,
	}}
	opt := influxdb2.DefaultOptions().SetLogLevel(0).SetApplicationName("sashlog").SetHTTPClient(h).SetPrecision(time.Second)
	c := &conn{in: in, http: h, waits: patience(), client: influxdb2.NewClientWithOptions(in.Address, in.Token.Reveal(), opt)}
	c.query = c.client.QueryAPI(in.Organisation)
	return c
}

func (c *conn) close() { c.http.CloseIdleConnections() }

// rows sends a query and hands over its rows. What take has seen counts only
// when the error is nil: rows come before the error that ends them.
func (c *conn) rows(ctx context.Context, flux string, take func(*query.FluxRecord) error) error {
	limit := time.Duration(c.in.TimeOutS) * time.Second
	within, cancel := context.WithTimeout(ctx, limit)
	defer cancel()
	err := func() error {
		res, err := c.query.Query(within, flux)
		if err != nil {
			return err
		}
		c.met.Store(true)
		for res.Next() {
			if err := take(res.Record()); err != nil {
				cancel() // Close reads what is left
				_ = res.Close()
				return err
			}
		}
		if err := res.Err(); err != nil {
			return brokenOff{err}
		}
		return nil
	}()
	switch {
	case ctx.Err() != nil:
		return ctx.Err()
	case within.Err() != nil && errors.Is(within.Err(), context.DeadlineExceeded):
		c.http.CloseIdleConnections()
		return slow(limit)
	}
	return c.explain(ctx, err)
}

// steadily makes attempts until one succeeds, the failure is final or the
// patience is used up.
func (c *conn) steadily(ctx context.Context, attempt func() error) error {
	once := false
	for i := 0; ; i++ {
		err := attempt()
		var f *Failure
		if err == nil || ctx.Err() != nil || !errors.As(err, &f) || !f.again {
			return err
		}
		if i == len(c.waits) || !c.met.Load() || (f.slow || f.ours) && once {
			return err
		}
		once = once || f.slow || f.ours
		select {
		case <-ctx.Done():
			return ctx.Err()
		case <-time.After(c.waits[i]):
		}
	}
}

// version asks the server what it is; empty when it does not say.
func (c *conn) version(ctx context.Context) string {
	ctx, cancel := context.WithTimeout(ctx, 5*time.Second)
	defer cancel()
	req, err := http.NewRequestWithContext(ctx, http.MethodGet, c.in.Address+"/ping", nil)
	if err != nil {
		return ""
	}
	res, err := c.client.HTTPService().DoHTTPRequestWithResponse(req, nil)
	if err != nil {
		return ""
	}
	defer res.Body.Close()
	v := strings.TrimPrefix(res.Header.Get("X-Influxdb-Version"), "v")
	if v == "unknown" || len(v) > 40 {
		return ""
	}
	return v
}
