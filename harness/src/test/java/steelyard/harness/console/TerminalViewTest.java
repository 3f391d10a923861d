package steelyard.harness.console;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.List;
import org.jline.terminal.Attributes;
import org.jline.terminal.Size;
import org.jline.terminal.impl.ExternalTerminal;
import org.jline.utils.AttributedString;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Drill;
import steelyard.harness.record.Cast;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.Sample;

class TerminalViewTest {
    private static final String HIDE = "\033[?25l";
    private static final String SHOW = "\033[?25h";
    private static final String OTHER_SCREEN = "\033[?1049h";

    private final Drill drill = Boards.drill("Lose one", List.of("fulmar", "gannet"));
    private final PlayBoard board = new PlayBoard(new Cast(drill));
    private final ByteArrayOutputStream written = new ByteArrayOutputStream();

    private ExternalTerminal terminal() throws IOException {
        ExternalTerminal terminal = new ExternalTerminal(
                "test", "xterm-256color", new ByteArrayInputStream(new byte[0]), written, StandardCharsets.UTF_8);
        terminal.setSize(new Size(80, 24));
        return terminal;
    }

    private String written() {
        return written.toString(StandardCharsets.UTF_8);
    }

    @Test
    void view_whenClosed_showsTheLastStateAndGivesTheTerminalBack() throws IOException {
        ExternalTerminal terminal = terminal();
        boolean echoed = terminal.getAttributes().getLocalFlag(Attributes.LocalFlag.ECHO);
        TerminalView view = new TerminalView(drill, board, terminal);
        view.begin();
        board.sampled(7 * Boards.SECOND, new Sample(2));
        view.close();
        String text = AttributedString.stripAnsi(written());
        assertThat(text).contains("Lose one", "fulmar", "gannet", "7.0 s");
        assertThat(written()).doesNotContain(OTHER_SCREEN);
        assertThat(written().lastIndexOf(SHOW))
                .isGreaterThan(written().lastIndexOf(HIDE))
                .isPositive();
        assertThat(written()).contains(HIDE).endsWith("\n");
        assertThat(terminal.getAttributes().getLocalFlag(Attributes.LocalFlag.ECHO))
                .isEqualTo(echoed);
    }

    @Test
    void close_twice_writesNothingMore() throws IOException {
        TerminalView view = new TerminalView(drill, board, terminal());
        view.begin();
        view.close();
        String once = written();
        view.close();
        assertThat(written()).isEqualTo(once);
    }

    @Test
    void width_always_isTheTerminals() throws IOException {
        assertThat(new TerminalView(drill, board, terminal()).width()).isEqualTo(80);
    }
}
