package batch_test

// plainAnswer is a row of a batch as one plain struct, with the keys in their order.
type plainAnswer struct {
	Row                            int         `json:"row"`
	ID                             string      `json:"id"`
	Status                         string      `json:"status"`
	FlowArea                       *float64    `json:"flow_area"`
	WettedPerimeter                *float64    `json:"wetted_perimeter"`
	HydraulicDiameter              *float64    `json:"hydraulic_diameter"`
	HydraulicRadius                *float64    `json:"hydraulic_radius"`
	EqualAreaDiameter              *float64    `json:"equal_area_diameter"`
	FreeSurfaceWidth               *float64    `json:"free_surface_width"`
	MeanDepth                      *float64    `json:"mean_depth"`
	CentroidDepth                  *float64    `json:"centroid_depth"`
	FillRatio                      *float64    `json:"fill_ratio"`
	LaminarConstant                *float64    `json:"laminar_constant"`
	LaminarEquivalentDiameter      *float64    `json:"laminar_equivalent_diameter"`
	EqualFrictionDiameter          *float64    `json:"equal_friction_diameter"`
	Density                        *float64    `json:"density"`
	DynamicViscosity               *float64    `json:"dynamic_viscosity"`
	KinematicViscosity             *float64    `json:"kinematic_viscosity"`
	Phase                          *string     `json:"phase"`
	VapourPressure                 *float64    `json:"vapour_pressure"`
	SoundSpeed                     *float64    `json:"sound_speed"`
	HeatCapacityRatio              *float64    `json:"heat_capacity_ratio"`
	Temperature                    *float64    `json:"temperature"`
	Pressure                       *float64    `json:"pressure"`
	PropertySource                 *string     `json:"property_source"`
	MassFlow                       *float64    `json:"mass_flow"`
	VolumeFlow                     *float64    `json:"volume_flow"`
	Velocity                       *float64    `json:"velocity"`
	ReferenceVolumeFlow            *float64    `json:"reference_volume_flow"`
	ReferenceTemperature           *float64    `json:"reference_temperature"`
	ReferencePressure              *float64    `json:"reference_pressure"`
	Reynolds                       *float64    `json:"reynolds"`
	FlowRegime                     *string     `json:"flow_regime"`
	PossibleRegimes                []string    `json:"possible_regimes"`
	LowerCriticalReynolds          *float64    `json:"lower_critical_reynolds"`
	UpperCriticalReynolds          *float64    `json:"upper_critical_reynolds"`
	RegimeBasis                    *string     `json:"regime_basis"`
	EntryLength                    *float64    `json:"entry_length"`
	DarcyFrictionFactor            *float64    `json:"darcy_friction_factor"`
	FanningFrictionFactor          *float64    `json:"fanning_friction_factor"`
	FrictionLaw                    *string     `json:"friction_law"`
	RelativeRoughness              *float64    `json:"relative_roughness"`
	WallShearStress                *float64    `json:"wall_shear_stress"`
	FrictionVelocity               *float64    `json:"friction_velocity"`
	RoughnessReynolds              *float64    `json:"roughness_reynolds"`
	RoughnessRegime                *string     `json:"roughness_regime"`
	DarcyFrictionFactorIfLaminar   *float64    `json:"darcy_friction_factor_if_laminar"`
	DarcyFrictionFactorIfTurbulent *float64    `json:"darcy_friction_factor_if_turbulent"`
	FrictionDrop                   *float64    `json:"friction_drop"`
	FittingsDrop                   *float64    `json:"fittings_drop"`
	TotalPressureLoss              *float64    `json:"total_pressure_loss"`
	ElevationDrop                  *float64    `json:"elevation_drop"`
	AccelerationDrop               *float64    `json:"acceleration_drop"`
	StaticPressureDrop             *float64    `json:"static_pressure_drop"`
	FrictionGradient               *float64    `json:"friction_gradient"`
	HeadLoss                       *float64    `json:"head_loss"`
	FluidPower                     *float64    `json:"fluid_power"`
	FrictionDropIfLaminar          *float64    `json:"friction_drop_if_laminar"`
	FrictionDropIfTurbulent        *float64    `json:"friction_drop_if_turbulent"`
	StaticPressureDropIfLaminar    *float64    `json:"static_pressure_drop_if_laminar"`
	StaticPressureDropIfTurbulent  *float64    `json:"static_pressure_drop_if_turbulent"`
	InletPressure                  *float64    `json:"inlet_pressure"`
	OutletPressure                 *float64    `json:"outlet_pressure"`
	LowestPressure                 *float64    `json:"lowest_pressure"`
	GaugePressureDrop              *float64    `json:"gauge_pressure_drop"`
	GasModel                       *string     `json:"gas_model"`
	InletTemperature               *float64    `json:"inlet_temperature"`
	OutletTemperature              *float64    `json:"outlet_temperature"`
	InletVelocity                  *float64    `json:"inlet_velocity"`
	OutletVelocity                 *float64    `json:"outlet_velocity"`
	MachNumberIn                   *float64    `json:"mach_number_in"`
	MachNumberOut                  *float64    `json:"mach_number_out"`
	ChokingMassFlow                *float64    `json:"choking_mass_flow"`
	FrictionSlope                  *float64    `json:"friction_slope"`
	BedSlope                       *float64    `json:"bed_slope"`
	Notes                          []plainNote `json:"notes"`
	Fingerprint                    string      `json:"fingerprint"`
}

type plainNote struct {
	Code  string `json:"code"`
	Level string `json:"level"`
	Text  string `json:"text"`
}
