package circuit

import "barlitre/machines/units"

// steered are the parameters of what an axis of the duty may open.
var steered = []Param{
	{Key: "follows", Title: "Follows axis", Type: AxisRef, Text: "its opening is found from the motion of this axis"},
	{Key: "directs", Title: "Directs axis", Type: AxisRef, Text: "fully open in the direction of this axis"},
}

// edgeSizes are the parameters of the four edges of a spool.
var edgeSizes = []Param{
	{Key: "nominal_flow", Title: "Nominal flow per edge", Symbol: "qN", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "of each edge, fully open, at the nominal drop"},
	{Key: "nominal_drop", Title: "Nominal drop per edge", Symbol: "ΔpN", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "proportional valves: 5 bar an edge, common practice", Above: true, Max: 200e5, Text: "of one edge at its nominal flow"},
	{Key: "flow_PA", Title: "Nominal flow P to A", Symbol: "qPA", Dim: units.Flow, Above: true, Max: 10, Text: "where it differs"},
	{Key: "flow_PB", Title: "Nominal flow P to B", Symbol: "qPB", Dim: units.Flow, Above: true, Max: 10, Text: "where it differs"},
	{Key: "flow_AT", Title: "Nominal flow A to T", Symbol: "qAT", Dim: units.Flow, Above: true, Max: 10, Text: "where it differs"},
	{Key: "flow_BT", Title: "Nominal flow B to T", Symbol: "qBT", Dim: units.Flow, Above: true, Max: 10, Text: "where it differs"},
}

// edgePorts are what the four edges of a spool lie between.
var edgePorts = []Port{
	{Name: "P", Type: Oil, Text: "supply"},
	{Name: "A", Type: Oil, Text: "to the actuator"},
	{Name: "B", Type: Oil, Text: "to the actuator"},
	{Name: "T", Type: Oil, Text: "return"},
}

// edgeLosses are what the oil loses at them.
var edgeLosses = []LossKind{
	{"metering P-A", ToOil, "P = (pP − pA)·q"}, {"metering P-B", ToOil, "P = (pP − pB)·q"},
	{"metering A-T", ToOil, "P = (pA − pT)·q"}, {"metering B-T", ToOil, "P = (pB − pT)·q"},
}
