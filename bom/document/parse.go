package document

import (
	"errors"
	"fmt"
	"strings"

	"github.com/goccy/go-yaml"
	"github.com/goccy/go-yaml/ast"
	"github.com/goccy/go-yaml/lexer"
	"github.com/goccy/go-yaml/parser"
	"github.com/goccy/go-yaml/token"
)

// Parse reads a YAML document: mappings with scalar keys, lists and scalars,
// anchors, aliases and merge keys. It refuses files over 1 MiB or 100000 words,
// nesting over 32 levels, tags, duplicate keys, a second document, and aliases
// that contain themselves or multiply beyond a budget. An empty file is a Null
// node. The
// node is nil where there are complaints that leave nothing to go on with; with
// complaints and a node, both are worth looking at.
func Parse(file string, text []byte) (*Node, Complaints) {
	n, _, complaints := parse(file, text)
	return n, complaints
}

// parse is Parse; it also tells which anchors are used where.
func parse(file string, text []byte) (*Node, []*anchor, Complaints) {
	source, bad := clean(file, text)
	if bad == nil {
		bad = badLayout(source)
	}
	if bad != nil {
		bad.File = file
		return nil, nil, Complaints{*bad}
	}
	tree, bad := parseTree(source)
	if bad != nil {
		bad.File = file
		return nil, nil, Complaints{*bad}
	}
	body, bad := onlyBody(tree)
	if bad != nil {
		bad.File = file
		return nil, nil, Complaints{*bad}
	}
	if body == nil {
		return &Node{Kind: Null, File: file, Line: 1, Column: 1, Span: uncertain}, nil, nil
	}
	c := converter{file: file, source: newSource(text), lines: strings.Split(source, "\n"), anchors: map[string]*anchor{}, budget: nodeBudget}
	n := c.node(body, 0)
	if c.spent {
		return nil, nil, c.faults.List()
	}
	return n.Node, c.named, c.faults.List()
}

// parseTree runs the YAML library, whose panics become complaints: a file that
// trips one is a bad file as far as its owner is concerned.
func parseTree(source string) (tree *ast.File, bad *Complaint) {
	defer func() {
		if r := recover(); r != nil {
			tree, bad = nil, &Complaint{Message: "this is not YAML that can be read", Found: fmt.Sprint(r)}
		}
	}()
	tokens := lexer.Tokenize(source)
	if bad := badNesting(tokens); bad != nil {
		return nil, bad
	}
	tree, err := parser.Parse(tokens, 0, parser.AllowDuplicateMapKey())
	if err == nil {
		return tree, nil
	}
	bad = &Complaint{Message: "not valid YAML"}
	var syntax *yaml.SyntaxError
	if errors.As(err, &syntax) {
		bad.Message += ": " + strings.TrimSuffix(syntax.Message, ".")
		if t := syntax.Token; t != nil && t.Position != nil {
			bad.Line, bad.Column = t.Position.Line, t.Position.Column
			bad.Found = firstLine(t)
			bad.Expected = mend(t, bad.Message)
		}
	}
	return nil, bad
}

// mend is advice on the mistakes that quantities and equations invite.
func mend(t *token.Token, message string) string {
	switch first := strings.TrimSpace(t.Value + t.Origin); {
	case strings.HasPrefix(first, "%"), strings.HasPrefix(first, "@"), strings.HasPrefix(first, "`"):
		return "quotes around a value that begins with " + first[:1]
	case strings.Contains(message, "mapping value is not allowed"):
		return "quotes around a value with a colon and a space in it"
	case strings.Contains(message, "not found"), strings.Contains(message, "end character"):
		return "its closing mark"
	}
	return ""
}

func firstLine(t *token.Token) string {
	line, _, _ := strings.Cut(strings.TrimSpace(t.Value), "\n")
	return line
}

// onlyBody is the body of the one document, nil if there is none.
func onlyBody(tree *ast.File) (ast.Node, *Complaint) {
	var body ast.Node
	for _, doc := range tree.Docs {
		switch {
		case doc.Body == nil || doc.Body.Type() == ast.DirectiveType || doc.Body.Type() == ast.CommentType:
			continue
		case body != nil:
			c := &Complaint{Message: "a second document in one file", Expected: "one document a file"}
			if t := doc.Start; t != nil && t.Position != nil {
				c.Line, c.Column = t.Position.Line, t.Position.Column
			}
			return nil, c
		}
		body = doc.Body
	}
	return body, nil
}
