// Package server is the tarn program: its commands, their options and the wiring of all rooms. One file a command; root.go turns
// errors into exit statuses, input.go turns an INPUT argument into molecules. Package server/tarn is main.
package server
