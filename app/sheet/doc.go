// Package sheet is the station Circuit: the two circuits side by side on one clock,
// the properties of the selected block, and the findings. Every edit goes through
// the document; the pictures and numbers come from its last solution.
//
// The sheets (editor) are one raster each with a few objects on top for what moves
// with the pointer. Place on a sheet is counted in three ways: units of the toolkit
// (screen), modules of the circuit's own coordinates (Block.At), and modules from
// the corner of the drawn sheet, which differ from those by figures.Sheet.Origin.
package sheet
