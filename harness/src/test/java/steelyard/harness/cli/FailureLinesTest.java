package steelyard.harness.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.PrintWriter;
import java.io.StringWriter;
import org.junit.jupiter.api.Test;
import picocli.CommandLine;

class FailureLinesTest {
    private final StringWriter err = new StringWriter();

    private int fail(Exception failure, String... arguments) {
        CommandLine line = new CommandLine(new Steelyard()).setErr(new PrintWriter(err, true));
        CommandLine.ParseResult parsed = line.parseArgs(arguments);
        return new FailureLines().handleExecutionException(failure, line, parsed);
    }

    @Test
    void unexpected_withoutDebug_isOneLineAndAHint() {
        int status = fail(new IllegalStateException("a thing\n  went wrong"), "version");
        assertThat(status).isEqualTo(3);
        assertThat(err.toString().strip())
                .isEqualTo("steelyard: unexpected: a thing went wrong; the same command with --debug shows where");
    }

    @Test
    void unexpected_withoutAMessage_namesItsKind() {
        fail(new NullPointerException(), "version");
        assertThat(err.toString()).contains("unexpected: NullPointerException");
    }

    @Test
    void unexpected_withDebug_showsWhere() {
        fail(new IllegalStateException("gone"), "--debug", "version");
        assertThat(err.toString()).contains("unexpected: gone", "\tat steelyard.harness.cli.FailureLinesTest");
    }

    @Test
    void commandFailure_withoutDebug_isItsLinesAndItsStatus() {
        int status = fail(CommandFailure.wrong(java.util.List.of("one", "two")), "version");
        assertThat(status).isEqualTo(2);
        assertThat(err.toString().lines()).containsExactly("one", "two");
    }
}
