package main

func main() {
	var m map[string]int
	m["a"] = 1
}
