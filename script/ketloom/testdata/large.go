package main

import "fmt"

func main() {
	x := make([]float64, 1000*1000)
	fmt.Println(len(x))
}
