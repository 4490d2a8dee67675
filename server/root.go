package server

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os/signal"
	"syscall"

	"github.com/spf13/cobra"
)

// Version of the program.
const Version = "0.1.0"

// Exit statuses of the program.
const (
	exitDone     = 0
	exitPartial  = 1 // some records failed, or the work was interrupted or could not be finished; the rest is in the output
	exitUnusable = 2 // the input or the options cannot be used
)

// partialError says that some of the work failed after the rest was done.
type partialError struct{ reason string }

func (e *partialError) Error() string { return e.reason }

// Main runs the program with its arguments and returns the exit status. SIGINT and SIGTERM end it gently.
func Main(arguments []string, in io.Reader, out, errOut io.Writer) int {
	ctx, stop := signal.NotifyContext(context.Background(), syscall.SIGINT, syscall.SIGTERM)
	defer stop()
	context.AfterFunc(ctx, stop) // a second signal ends the program at once
	return run(ctx, arguments, in, out, errOut)
}

func run(ctx context.Context, arguments []string, in io.Reader, out, errOut io.Writer) int {
	root := command(in, out, errOut)
	root.SetArgs(arguments)
	err := root.ExecuteContext(ctx)
	var partial *partialError
	switch {
	case err == nil:
		return exitDone
	case errors.As(err, &partial):
		fmt.Fprintln(errOut, "tarn:", err)
		return exitPartial
	case errors.Is(err, context.Canceled):
		fmt.Fprintln(errOut, "tarn: interrupted before there was anything to show")
		return exitPartial
	}
	fmt.Fprintln(errOut, "tarn:", err)
	return exitUnusable
}

func command(in io.Reader, out, errOut io.Writer) *cobra.Command {
	root := &cobra.Command{
		Use:   "tarn",
		Short: "Find every low-energy conformer of a flexible molecule, each one once",
		Long: `Tarn explores the potential energy surface of a molecule by annealing or high-temperature dynamics, quenches
what it meets, drops duplicates, and ranks the minima with their Boltzmann populations.

Results are force-field models of isolated molecules: verify against experiment or higher-level theory. They are
no basis for clinical, safety or regulatory decisions.`,
		SilenceErrors: true,
		SilenceUsage:  true,
		Version:       Version,
	}
	root.SetIn(in)
	root.SetOut(out)
	root.SetErr(errOut)
	root.CompletionOptions.HiddenDefaultCmd = true
	root.AddCommand(serveCommand(), searchCommand(), energyCommand(), quenchCommand(), buildCommand(), moleculeCommand(),
		&cobra.Command{
			Use: "version", Short: "Print the version of the program", Args: cobra.NoArgs,
			Run: func(cmd *cobra.Command, _ []string) { fmt.Fprintln(cmd.OutOrStdout(), "tarn", Version) },
		})
	return root
}
