package main

import "fmt"

func main() {
	fmt.Println("ready")
	for {
	}
}
