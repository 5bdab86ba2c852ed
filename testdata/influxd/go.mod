module sashlog/testdata/influxd

go 1.16

require github.com/influxdata/influxdb v1.8.10
