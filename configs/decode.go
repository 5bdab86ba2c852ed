package configs

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"reflect"
	"sort"
	"strconv"
	"strings"

	"github.com/go-viper/mapstructure/v2"
	"github.com/spf13/viper"
)

// environment lists the settings that may come from the environment instead
// of the file; Loaded says which did. Secrets and privacy do not belong here.
var environment = []struct{ path, name string }{
	{"step_min", "SASHLOG_STEP_MIN"},
	{"tolerance" + delim + "rejected_share", "SASHLOG_REJECTED_SHARE"},
	{"criteria" + delim + "preset", "SASHLOG_CRITERIA_PRESET"},
}

// delim separates nested keys within viper. A full stop would cut keys such
// as L1.02 in two.
const delim = "\x1f"

// asWritten decodes YAML for viper with numbers and dates kept as written.
type asWritten struct{}

func (asWritten) Decoder(string) (viper.Decoder, error) { return asWritten{}, nil }

func (asWritten) Decode(text []byte, into map[string]any) error {
	t, p := parse("", text)
	if p != nil {
		return *p
	}
	for k, v := range plain(t.root).(map[string]any) {
		into[k] = v
	}
	return nil
}

// decode fills the raw site from the text by viper; values of the wrong type
// become problems in the tree.
func decode(t *tree, text []byte, env func(string) string) rawSite {
	var raw rawSite
	v := viper.NewWithOptions(viper.KeyDelimiter(delim), viper.WithDecoderRegistry(asWritten{}))
	v.SetConfigType("yaml")
	if err := v.ReadConfig(bytes.NewReader(text)); err != nil {
		t.addAt(1, 1, "cannot be read: "+err.Error(), "")
		return raw
	}
	for _, e := range environment {
		if env == nil {
			break
		}
		if s := env(e.name); s != "" {
			var val any = s
			if e.path == "step_min" || strings.HasSuffix(e.path, "rejected_share") {
				val = json.Number(s)
			}
			v.Set(e.path, val)
			path := strings.ReplaceAll(e.path, delim, ".")
			t.written[path], t.fromEnv[path] = s, e.name
		}
	}
	err := v.Unmarshal(&raw, func(c *mapstructure.DecoderConfig) {
		c.WeaklyTypedInput = false
		c.DecodeHook = hook
	})
	t.typeErrors(err)
	return raw
}

// hook lets the few keys with a short form be written as a word or list.
func hook(from, to reflect.Type, data any) (any, error) {
	single := from.Kind() == reflect.String
	switch to {
	case reflect.TypeFor[many]():
		if single {
			return []any{data}, nil
		}
	case reflect.TypeFor[rawOpenings](), reflect.TypeFor[rawPrivacy](), reflect.TypeFor[rawClock]():
		if single {
			return map[string]any{"(word)": data}, nil
		}
	}
	return data, nil
}

// typeErrors turns what mapstructure could not convert into problems at the
// place of the value.
func (t *tree) typeErrors(err error) {
	if err == nil {
		return
	}
	if list, ok := err.(interface{ Unwrap() []error }); ok {
		for _, e := range list.Unwrap() {
			t.typeErrors(e)
		}
		return
	}
	de, ok := err.(*mapstructure.DecodeError)
	if !ok {
		if inner := errors.Unwrap(err); inner != nil {
			t.typeErrors(inner)
			return
		}
		t.addAt(1, 1, "cannot be understood: "+err.Error(), "")
		return
	}
	path := strings.ToLower(strings.ReplaceAll(de.Name(), delim, "."))
	path = strings.ReplaceAll(path, ".(word)", "")
	want := wanted(path)
	got, hint := t.kinds[path], ""
	if text, ok := t.written[path]; ok {
		got = fmt.Sprintf("%q", text)
		if _, err := strconv.ParseFloat(text, 64); err == nil && want == "must be a number" {
			hint = "remove the quotes"
		}
	}
	if want == "must be a list" && t.kinds[path] != "" {
		hint = "begin each entry with a dash"
	}
	if !t.reported(path) {
		t.at(path, hint, "%s is %s: %s", last(path), got, want)
	}
}

// wanted says what kind of value a path takes.
func wanted(path string) string {
	as := reflect.TypeFor[rawSite]()
	for _, part := range strings.Split(path, ".") {
		key, _, indexed := strings.Cut(part, "[")
		ft, ok := keysOf(as, "")[key]
		if !ok || ft == nil {
			return "not the kind of value that belongs here"
		}
		as = ft
		if indexed && as.Kind() == reflect.Slice {
			as = as.Elem()
		}
	}
	if as.Kind() == reflect.Pointer {
		as = as.Elem()
	}
	switch as.Kind() {
	case reflect.Float64:
		return "must be a number"
	case reflect.Bool:
		return "must be true or false"
	case reflect.String:
		return "must be text"
	case reflect.Slice:
		return "must be a list"
	}
	switch as {
	case reflect.TypeFor[rawOpenings](), reflect.TypeFor[rawPrivacy](), reflect.TypeFor[rawClock]():
		return "must be a word or a group of keys"
	}
	return "must be a group of keys"
}

func sortStrings(s []string) { sort.Strings(s) }
