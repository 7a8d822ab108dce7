package pipeline

import (
	"bytes"
	"context"
	"fmt"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// verify judges the record as a stranger would: it is written out, read back, and judged from what was read.
func (g *growth) verify(context.Context) (string, error) {
	var b bytes.Buffer
	if err := layout.Write(&b, g.out.Record); err != nil {
		return "", err
	}
	read, err := layout.Read(&b)
	if err != nil {
		return "", fmt.Errorf("the record does not read back: %w", err)
	}
	if g.out.Verdict, err = layout.Verify(read); err != nil {
		return "", err
	}
	failed := 0
	for _, c := range g.out.Verdict.Checks {
		if !c.OK {
			failed++
			g.obs.Issue(geom.Issue{Feature: "verify", Severity: geom.Error, Text: FailedText(c)})
		}
	}
	if failed > 0 {
		return fmt.Sprintf("%d of %s failed", failed, count(len(g.out.Verdict.Checks), "check")), nil
	}
	return count(len(g.out.Verdict.Checks), "check") + " passed", nil
}

// FailedText says what a failed check found.
func FailedText(c layout.Check) string {
	return fmt.Sprintf("%s: %.3g, at most %.3g is allowed; %s", c.Name, c.Value, c.Limit, c.Text)
}
