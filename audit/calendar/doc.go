// Package calendar says how the hours of a year fall to the states of a machine: work, idle, hold and off, from its
// shifts, breaks, weeks and planned stops. Times are in s; a year has 365 days, 8760 h.
package calendar
