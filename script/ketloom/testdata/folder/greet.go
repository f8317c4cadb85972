package main

import "fmt"

func greet() { fmt.Println("from a folder") }
