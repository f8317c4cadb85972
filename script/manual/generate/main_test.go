package main

import (
	"bytes"
	"os"
	"testing"
)

// The pages say what the doc comments say today.
func TestPagesAreFresh(t *testing.T) {
	want, err := Pages("../../..")
	if err != nil {
		t.Fatal(err)
	}
	got, err := os.ReadFile("../pages.json")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Error("pages.json is stale; run go generate ./script/manual")
	}
}
