package site

// owners says what each quantity may belong to. Weather belongs to the site
// alone, room conditions to zones, the state of a unit to plant; meters and
// commands may sit at any level.
var owners = map[Quantity][]OwnerKind{
	AirTemp: {OwnerZone}, OperativeTemp: {OwnerZone}, GlobeTemp: {OwnerZone}, SurfaceTemp: {OwnerZone, OwnerPlant},
	ThermostatTemp: {OwnerZone}, Humidity: {OwnerZone}, CO2: {OwnerZone},
	Window: {OwnerZone}, WindowOpening: {OwnerZone},
	WindowCommand: {OwnerZone, OwnerSite}, WindowEnable: {OwnerZone, OwnerPlant, OwnerSite},
	ModeSignal: {OwnerZone, OwnerPlant, OwnerSite}, ManualOverride: {OwnerZone, OwnerPlant, OwnerSite},
	PlantStatus: {OwnerPlant, OwnerZone}, ZoneAirflow: {OwnerZone}, ZoneDamper: {OwnerZone},
	HeatingValve: {OwnerZone, OwnerPlant}, CoolingValve: {OwnerZone, OwnerPlant},
	SupplyAirTemp: {OwnerPlant, OwnerZone}, ReturnAirTemp: {OwnerPlant}, MixedAirTemp: {OwnerPlant},
	OutdoorAirDamper: {OwnerPlant}, SupplyAirflow: {OwnerPlant},
	CeilingFan: {OwnerZone}, AirSpeed: {OwnerZone}, People: {OwnerZone}, Presence: {OwnerZone}, PM25: {OwnerZone},
	ElectricPower: {OwnerPlant, OwnerZone, OwnerSite}, CoolingPower: {OwnerPlant, OwnerZone, OwnerSite},
	HeatingPower: {OwnerPlant, OwnerZone, OwnerSite},
	SetpointHeat: {OwnerZone, OwnerPlant}, SetpointCool: {OwnerZone, OwnerPlant},
}

// Owners lists what the quantity may belong to, the usual owner first.
func (q Quantity) Owners() []OwnerKind {
	if q.IsWeather() {
		return []OwnerKind{OwnerSite}
	}
	return owners[q]
}

// MayBelong reports whether the quantity can belong to an owner of this kind.
func (q Quantity) MayBelong(o OwnerKind) bool {
	for _, k := range q.Owners() {
		if k == o {
			return true
		}
	}
	return false
}

func (o OwnerKind) String() string {
	switch o {
	case OwnerSite:
		return "the site"
	case OwnerZone:
		return "a zone"
	case OwnerPlant:
		return "a plant unit"
	}
	return "nothing"
}

// HasPlacement reports whether where its sensor hangs matters for q.
func (q Quantity) HasPlacement() bool {
	switch q {
	case AirTemp, OperativeTemp, GlobeTemp, ThermostatTemp, Humidity, CO2, PM25, AirSpeed:
		return true
	}
	return false
}

// HasShare reports whether a point of q can stand for a share of its zone's
// opening area.
func (q Quantity) HasShare() bool { return q == Window || q == WindowOpening || q == WindowCommand }
