package main

import (
	"bytes"
	"context"
	"os"
	"regexp"
	"strings"
	"testing"
)

// fenced are the blocks of a document in a language, in their order.
func fenced(t *testing.T, path, language string) []string {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	var out []string
	for _, m := range regexp.MustCompile("(?ms)^```"+language+"\n(.*?)^```$").FindAllStringSubmatch(string(text), -1) {
		out = append(out, m[1])
	}
	return out
}

// The first command of the README prints what the README shows; a line of ... stands for lines left out.
func TestTheFirstCommandOfTheReadmePrintsWhatItShows(t *testing.T) {
	t.Parallel()
	const readme = "../../README.md"
	command := strings.TrimSpace(fenced(t, readme, "sh")[0])
	line, ok := strings.CutPrefix(command, "go run ./cmd/meniscus ")
	if !ok {
		t.Fatalf("the first command is %q", command)
	}
	var args []string
	for _, m := range regexp.MustCompile(`"([^"]*)"|(\S+)`).FindAllStringSubmatch(line, -1) {
		args = append(args, m[1]+m[2])
	}
	var stdout, stderr bytes.Buffer
	if code := run(context.Background(), args, strings.NewReader(""), &stdout, &stderr); code != 0 {
		t.Fatalf("%q ends with %d: %s", args, code, stderr.String())
	}
	rest := stdout.String()
	for part := range strings.SplitSeq(fenced(t, readme, "text")[0], "...\n") {
		_, after, found := strings.Cut(rest, part)
		if !found {
			t.Errorf("not printed:\n%s\nprinted:\n%s", part, stdout.String())
		}
		rest = after
	}
}

// The Go of the README is the body of the example in client/embedded, which is compiled and run.
func TestTheGoOfTheReadmeIsTheExample(t *testing.T) {
	t.Parallel()
	source, err := os.ReadFile("../../client/embedded/example_test.go")
	if err != nil {
		t.Fatal(err)
	}
	for _, block := range fenced(t, "../../README.md", "go") {
		var body string
		for line := range strings.Lines(block) {
			body += "\t" + line
		}
		if !strings.Contains(string(source), body) {
			t.Errorf("client/embedded/example_test.go does not hold:\n%s", body)
		}
	}
}
