// Tarn finds the low-energy conformers of flexible molecules.
package main

import (
	"os"

	"tarn/server"
)

func main() { os.Exit(server.Main(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) }
