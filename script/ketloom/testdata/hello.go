package main

import (
	"flag"
	"fmt"
	"os"
)

func main() {
	n := flag.Int("n", 1, "how often")
	code := flag.Int("code", 0, "exit code")
	flag.Parse()
	for i := range *n {
		fmt.Println("hello", i, flag.Args())
	}
	os.Exit(*code)
}
