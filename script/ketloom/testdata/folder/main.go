package main

func main() { greet() }
