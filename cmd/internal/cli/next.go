package cli

import (
	"fmt"

	"github.com/spf13/cobra"
)

func newNext(e *env) *cobra.Command {
	return &cobra.Command{
		Use:   "next FOLDER",
		Short: "say which reading would settle what is still open",
		Long: `next fits the survey and, for every finding whose cause the readings cannot tell,
ranks the readings that could still be taken: every tap, a new tap at a point, either
side of a suspected fitting, half way along a suspected pipe, a second flow
measurement; with the draw-offs of the busiest round, half as much again, and none.
Each line says what the two causes it parts best would differ by there, and the
probability that the reading puts the true one of the two first.`,
		Example: "  tapround next surveys/2026-03-harrowgill",
		Args:    cobra.ExactArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			fsys, err := openFolder(args[0])
			if err != nil {
				return err
			}
			d := readSurvey(fsys)
			if d.problems.Fatal() {
				return refuse(e, d.problems)
			}
			_, diagnosis, err := reconcile(d, nil)
			if err != nil {
				return err
			}
			list := diagnosis.NextReadings()
			if len(list) == 0 {
				fmt.Fprintln(e.out, "No finding of this survey is left open between causes.")
				return nil
			}
			last := ""
			for _, n := range list {
				if n.Finding != last {
					fmt.Fprintf(e.out, "\n%s\n", n.Finding)
					last = n.Finding
				}
				fmt.Fprintf(e.out, "  %s\n", n.Sentence())
			}
			fmt.Fprintln(e.out, "\nMove valves and hydrants slowly; local codes and licensed practice decide.")
			return nil
		},
	}
}
