//go:build ignore

// Script scan is run by this program with its own package chain at hand.
package main

import (
	"context"
	"flag"
	"fmt"
	"log"

	"example.org/couplings/chain"
	"ketloom/script/host"
)

func main() {
	second := flag.Float64("second", 0, "coupling to second neighbours")
	flag.Parse()
	level, err := chain.Ring{Sites: 12, First: 1, Second: *second}.Lowest(context.Background())
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%.6f a site", level.Energy/12)
	host.Return("energy", level.Energy)
}
