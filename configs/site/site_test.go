package site

import (
	"math"
	"strings"
	"testing"
)

// Fixed points and definitions: water freezes at 32 °F and boils at 212 °F;
// -40 is the same on both scales; 0 K is -273.15 °C (SI brochure); 1 ft is
// 0.3048 m, 1 mile 1609.344 m (1959 agreement); 1 nautical mile 1852 m; one
// ton of refrigeration is 3.5168 kW (ASHRAE Terminology, 12 000 Btu/h); a
// relative humidity of 0.5 is 50 %.
func TestConvert(t *testing.T) {
	for _, c := range []struct {
		q        Quantity
		unit     string
		in, want float64
		tol      float64
	}{
		{AirTemp, "", 21, 21, 0}, {AirTemp, "°C", 21, 21, 0}, {AirTemp, "degF", 32, 0, 1e-9}, {AirTemp, "F", 212, 100, 1e-9},
		{OutdoorTemp, "Fahrenheit", -40, -40, 1e-9}, {OutdoorTemp, "K", 0, -273.15, 0}, {SetpointCool, " deg F ", 120, 48.8889, 1e-4},
		{Humidity, "fraction", 0.5, 50, 0}, {Humidity, "%RH", 50, 50, 0}, {CO2, "vol%", 0.1, 1000, 1e-9},
		{ZoneAirflow, "l/s", 1, 3.6, 0}, {ZoneAirflow, "m3/s", 1, 3600, 0}, {ZoneAirflow, "CFM", 1, 1.69901, 1e-5},
		{WindSpeed, "km/h", 36, 10, 1e-9}, {WindSpeed, "mph", 1, 0.44704, 1e-12}, {WindSpeed, "kn", 1, 0.514444, 1e-6}, {AirSpeed, "fpm", 1, 0.00508, 1e-12},
		{Rain, "in/h", 1, 25.4, 0}, {Solar, "kW/m2", 1, 1000, 0}, {PM25, "mg/m3", 0.01, 10, 1e-12},
		{CoolingPower, "tonR", 1, 3.5168, 1e-4}, {ElectricPower, "W", 1500, 1.5, 1e-12}, {ElectricPower, "MW", 1, 1000, 0},
		{ZoneDamper, "0-10V", 5, 50, 0}, {Window, "", 1, 1, 0}, {People, "persons", 3, 3, 0},
	} {
		conv, err := Convert(c.q, c.unit)
		if err != nil {
			t.Error(err)
			continue
		}
		if got := conv.Factor*c.in + conv.Offset; math.Abs(got-c.want) > c.tol {
			t.Errorf("%s: %g %s = %.9g, want %g", c.q, c.in, c.unit, got, c.want)
		}
	}
	for q, unit := range map[Quantity]string{AirTemp: "ppm", Humidity: "0-10V", WindDirection: "%", PlantStatus: "V", ZoneDamper: "%RH", "nothing": "degC"} {
		if _, err := Convert(q, unit); err == nil {
			t.Errorf("%s in %s was accepted", q, unit)
		}
	}
	if _, err := Convert(AirTemp, "degR"); err == nil || !strings.Contains(err.Error(), "degC") {
		t.Errorf("the error must name what is allowed: %v", err)
	}
	if !RainPerInterval("mm") || !RainPerInterval(" IN ") || RainPerInterval("mm/h") {
		t.Error("rain per interval")
	}
}

// Every quantity of the contract has a trait, a unit it can be logged in and
// somebody it belongs to; weather belongs to the site alone.
func TestQuantitiesAreComplete(t *testing.T) {
	if len(Quantities()) != len(traits) {
		t.Errorf("%d listed, %d known", len(Quantities()), len(traits))
	}
	for _, q := range Quantities() {
		tr, ok := q.Trait()
		if !ok || tr.Words == "" || !(tr.Low < tr.High) {
			t.Errorf("%s: %+v", q, tr)
		}
		if c, err := Convert(q, tr.Unit); err != nil || c != identity {
			t.Errorf("%s in its own unit: %v %v", q, c, err)
		}
		if len(q.Owners()) == 0 || q.IsWeather() != (len(q.Owners()) == 1 && q.MayBelong(OwnerSite)) {
			t.Errorf("%s belongs to %v", q, q.Owners())
		}
		for _, u := range Units(q) {
			if _, err := Convert(q, u); err != nil {
				t.Error(err)
			}
		}
	}
}
