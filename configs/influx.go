package configs

import (
	"math"
	"net/url"
	"regexp"
	"strings"

	"sashlog/configs/site"
)

// What an influx entry leaves out.
const (
	influxTokenEnv    = "SASHLOG_INFLUX_TOKEN"
	influxMeasurement = "readings"
	influxPointTag    = "point"
	influxField       = "value"
	influxTimeOutS    = 300
	influxTimeOutMost = 24 * 3600
)

const tokenHint = "the token comes only from the environment: put it into the variable " + influxTokenEnv + ", or name another one in token_env"

// secret reports whether a key asks for what does not belong into a file.
func secret(key string) bool {
	switch strings.ToLower(key) {
	case "token", "password", "secret", "api_key", "apikey":
		return true
	}
	return false
}

var variableName = regexp.MustCompile(`^[A-Za-z_][A-Za-z0-9_]{0,127}$`)

// influx reads the entry of a log that is kept in a database. Messages about
// the address and the variable never repeat them: they may hold a secret.
func (b *builder) influx(here string, r *rawLog, l *site.Log) {
	in, at := &r.Influx, here+".influx"
	l.Influx = &site.Influx{Organisation: in.Organisation, Bucket: in.Bucket,
		TokenEnv: orElse(in.TokenEnv, influxTokenEnv), Measurement: orElse(in.Measurement, influxMeasurement),
		PointTag: orElse(in.PointTag, influxPointTag), Field: orElse(in.Field, influxField), TimeOutS: influxTimeOutS,
		Read: word(b, at+".read", in.Read, site.InfluxMeans, site.InfluxMeans, site.InfluxRaw)}
	if b.tree.reported(at) {
		return // not a group of keys
	}
	l.Influx.Address = b.address(at+".address", in.Address)
	if strings.TrimSpace(in.Bucket) == "" {
		b.missing(at+".bucket", "name the bucket; on an InfluxDB 1.8 the database, or database/retention")
	}
	for _, k := range []string{"organisation", "measurement", "point_tag", "field"} {
		if path := at + "." + k; strings.ContainsAny(b.tree.written[path], "\n\r\x00") {
			b.tree.at(path, "", "%s holds a line break", k)
		}
	}
	if strings.HasPrefix(l.Influx.PointTag, "_") {
		b.tree.at(at+".point_tag", "name the tag whose value says which point a reading belongs to", "point_tag is %q: names with a leading _ are the database's own", l.Influx.PointTag)
	}
	if v := b.number(at+".time_out_s", in.TimeOutS, 1, influxTimeOutMost, " seconds"); !math.IsNaN(v) {
		l.Influx.TimeOutS = int(math.Ceil(v))
	}
	switch {
	case !variableName.MatchString(l.Influx.TokenEnv):
		b.tree.at(at+".token_env", tokenHint, "token_env is not the name of an environment variable")
	case b.env != nil:
		l.Influx.Token = site.NewSecret(strings.TrimSpace(b.env(l.Influx.TokenEnv)))
	}
	for _, k := range []string{"path", "layout", "sheet", "header_row", "time_column", "date_column", "clock_column", "key_columns", "value_columns",
		"separator", "decimal", "encoding", "date_order", "time_format"} {
		if b.tree.has(here+"."+k) && !b.tree.reported(here+"."+k) {
			b.tree.at(here+"."+k, "files and databases are logs of their own: begin another entry", "%s describes a file, but this log is an InfluxDB", k)
		}
	}
	if l.Name == "" {
		l.Name = in.Bucket
	}
}

func orElse(text, otherwise string) string {
	if text == "" {
		return otherwise
	}
	return text
}

// address checks the server's address.
func (b *builder) address(path, text string) string {
	const hint = "write scheme, host and port, for instance http://127.0.0.1:8086"
	if strings.TrimSpace(text) == "" {
		b.missing(path, hint)
		return ""
	}
	u, err := url.Parse(text)
	switch {
	case err != nil || u.Scheme != "http" && u.Scheme != "https" || u.Hostname() == "":
		b.tree.at(path, hint, "address is not that of a server")
	case u.User != nil:
		b.tree.at(path, tokenHint, "address holds credentials")
	case u.RawQuery != "" || u.Fragment != "":
		b.tree.at(path, hint, "address holds more than scheme, host, port and path")
	}
	return strings.TrimSuffix(text, "/")
}
