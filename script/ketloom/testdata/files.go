package main

import (
	"fmt"
	"os"
)

func main() {
	for _, path := range os.Args[1:] {
		err := os.WriteFile(path, []byte("written\n"), 0o666)
		text, errRead := os.ReadFile(path)
		fmt.Printf("%q %v %v\n", text, err != nil, errRead != nil)
	}
	fmt.Println(len(os.Environ()) > 0)
}
