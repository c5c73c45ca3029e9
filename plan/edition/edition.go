package edition

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"strings"

	"footing/plan/result"
)

// Edition is a frozen run with everything that it used.
type Edition struct {
	Hash     string             `json:"-"` // of the edition's text; stands on the file's second line
	Schema   string             `json:"schema"`
	Number   int                `json:"number"`
	Date     string             `json:"date"`
	By       string             `json:"by"`
	Why      string             `json:"why"`
	Previous string             `json:"previous"` // hash of the edition before, "" for the first
	Tool     result.Tool        `json:"tool"`
	Plan     Source             `json:"plan"`
	Evidence *Source            `json:"evidence"` // null for a plan without evidence
	Options  []result.NamedText `json:"options"`  // every key of the plan as used, defaults included
	Result   *result.Plan       `json:"result"`   // without the series that only drawings need
}

// Source is a file that the edition used.
type Source struct {
	File   string   `json:"file"`
	SHA256 string   `json:"sha256"`
	Copy   string   `json:"copy,omitempty"`  // name of the copy in the store's folder
	Lines  []string `json:"lines,omitempty"` // the text itself, for a plan
}

const schema = "footing/edition/1"

// Text gives back a plan's text.
func (s Source) Text() []byte { return []byte(strings.Join(s.Lines, "\n")) }

// Ref names the edition in a result.
func (e *Edition) Ref() result.EditionRef {
	return result.EditionRef{Number: e.Number, Date: e.Date, By: e.By, Why: e.Why, Hash: e.Hash}
}

// marshal writes the edition's file: the hash of the text on a line of its own, then the text. It sets Hash.
func (e *Edition) marshal() ([]byte, error) {
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(e); err != nil {
		return nil, fmt.Errorf("edition %d can't be written as JSON: %w", e.Number, err)
	}
	body := b.Bytes()
	e.Hash = hashOf(body)
	out := append([]byte("{\n"+hashLine(e.Hash)), body[2:]...)
	return out, nil
}

func hashOf(body []byte) string {
	sum := sha256.Sum256(body)
	return hex.EncodeToString(sum[:])
}

func hashLine(h string) string { return "  \"hash\": \"" + h + "\",\n" }

// unmarshal reads an edition's file and checks its text against its hash.
func unmarshal(data []byte) (*Edition, error) {
	data = bytes.ReplaceAll(data, []byte("\r\n"), []byte("\n")) // version control may turn line ends around
	const start = "{\n  \"hash\": \""
	if len(data) < len(start)+64+3 || string(data[:len(start)]) != start {
		return nil, fmt.Errorf("it does not begin with the hash of an edition")
	}
	stated := string(data[len(start) : len(start)+64])
	rest := data[len(start)+64:]
	if string(rest[:3]) != "\",\n" {
		return nil, fmt.Errorf("it does not begin with the hash of an edition")
	}
	body := append([]byte("{\n"), rest[3:]...)
	if got := hashOf(body); got != stated {
		return nil, fmt.Errorf("its text was changed after it was frozen (its hash is %s, it states %s)", got[:12], stated[:12])
	}
	e := &Edition{Hash: stated}
	if err := json.Unmarshal(body, e); err != nil {
		return nil, fmt.Errorf("it is no edition: %w", err)
	}
	return e, nil
}

// slim leaves out of a result what only drawings need and what follows from the rest.
func slim(p *result.Plan) *result.Plan {
	c := *p
	c.Since = nil
	c.Size.Grid = nil
	c.Size.Curves = []result.PowerCurve{}
	c.Size.NeedCurve = []result.NeedPoint{}
	if a := c.Size.Assurance; a != nil {
		copied := *a
		copied.Curve = []result.AssurancePoint{}
		c.Size.Assurance = &copied
	}
	if r := c.Range; r != nil {
		copied := *r
		copied.Curve, copied.AdjustedCurve = []result.DensityPoint{}, []result.DensityPoint{}
		c.Range = &copied
	}
	return &c
}

// Of makes an edition out of a run; its number and its place in the chain are given when it is kept.
func Of(p *result.Plan, planText []byte, options []result.NamedText) *Edition {
	e := &Edition{Schema: schema, Tool: p.Tool, Options: options, Result: slim(p),
		Plan: Source{File: p.File, SHA256: p.SHA256, Lines: strings.Split(string(planText), "\n")}}
	if p.Pool != nil {
		e.Evidence = &Source{File: p.Pool.Evidence.File, SHA256: p.Pool.Evidence.SHA256}
	}
	return e
}
