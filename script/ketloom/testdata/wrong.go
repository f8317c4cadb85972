package main

func main() {
	x := 1
	y = 2
}
