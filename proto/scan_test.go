package proto_test

import (
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// comments gives the comment above each field and rpc of the schema, by full name without the
// package ("Eye.side", "FittingService.Fit"). Generated code carries no comments, so they are read from the
// text, which `buf format` keeps in one shape.
func comments(t *testing.T) map[string]string {
	t.Helper()
	files, err := filepath.Glob("meniscus/v1/*.proto")
	if err != nil {
		t.Fatal(err)
	}
	all := map[string]string{}
	for _, file := range files {
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		found, err := scan(string(text))
		if err != nil {
			t.Fatalf("%s: %v", file, err)
		}
		for name, comment := range found {
			all[name] = comment
		}
	}
	return all
}

var (
	blockLine = regexp.MustCompile(`^(message|enum|service|oneof|extend) ([\w.]+) \{(\})?$`)
	rpcLine   = regexp.MustCompile(`^rpc (\w+)\(`)
	fieldLine = regexp.MustCompile(`^(?:repeated )?[\w.]+ (\w+) = \d+[ ;]`)
)

// scan reads the comments of one file in the shape of `buf format`.
func scan(text string) (map[string]string, error) {
	found := map[string]string{}
	var scopes []string // names of the open blocks; "" where a block adds nothing to a name
	var comment []string
	path := func(name string) string {
		var parts []string
		for _, s := range scopes {
			if s != "" {
				parts = append(parts, s)
			}
		}
		return strings.Join(append(parts, name), ".")
	}
	for i, line := range strings.Split(text, "\n") {
		line = strings.TrimSpace(line)
		if rest, ok := strings.CutPrefix(line, "//"); ok {
			comment = append(comment, strings.TrimSpace(rest))
			continue
		}
		if m := blockLine.FindStringSubmatch(line); m != nil {
			scope := m[2]
			if m[1] == "oneof" || m[1] == "extend" {
				scope = ""
			}
			if m[3] == "" {
				scopes = append(scopes, scope)
			}
		} else {
			if m := rpcLine.FindStringSubmatch(line); m != nil {
				found[path(m[1])] = strings.Join(comment, " ")
			} else if m := fieldLine.FindStringSubmatch(line); m != nil {
				found[path(m[1])] = strings.Join(comment, " ")
			}
			if strings.HasSuffix(line, "{") {
				scopes = append(scopes, "")
			}
		}
		if strings.HasPrefix(line, "}") {
			if len(scopes) == 0 {
				return nil, fmt.Errorf("line %d: closes a block that is not open", i+1)
			}
			scopes = scopes[:len(scopes)-1]
		}
		comment = nil
	}
	if len(scopes) != 0 {
		return nil, fmt.Errorf("%d blocks are not closed", len(scopes))
	}
	return found, nil
}

func TestScanFindsTheCommentOfEachFieldAndRPC(t *testing.T) {
	t.Parallel()
	got, err := scan(`// Not of a field.

service S {
  // Does it.
  rpc Do(A) returns (B) {
    option idempotency_level = NO_SIDE_EFFECTS;
  }
}

message A {
  // One,
  // and more.
  repeated double one_mm = 1 [(quantity) = {
    unit: "mm"
    lookalikes: {
      minimum: 1
    }
  }];
  oneof o {
    // Two.
    string two = 2;
  }
  // Stray.

  B three = 3;
}

message B {}
`)
	if err != nil {
		t.Fatal(err)
	}
	want := map[string]string{"S.Do": "Does it.", "A.one_mm": "One, and more.", "A.two": "Two.", "A.three": ""}
	if fmt.Sprint(got) != fmt.Sprint(want) {
		t.Errorf("got %q, want %q", got, want)
	}
}
