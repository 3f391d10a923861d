package steelyard.harness.console;

import org.jline.utils.AttributedStyle;

/**
 * Colours of the terminal view: backends by the palette of Okabe and Ito in the order of the report, each as the nearest
 * of the 256 colours; red for failures and nothing else. Words say everything that a colour says.
 */
enum Colours {
    NONE,
    SOME;

    /** The palette's black stands for the terminal's own ink. */
    private static final int INK = -1;

    private static final int[] BACKENDS = {178, 74, 36, 221, 25, 175, INK, 166};
    private static final int RED = 160;

    /** Colours where the terminal has them, unless the person asked for none. */
    static Colours of(boolean terminalHasThem, boolean refused) {
        return terminalHasThem && !refused ? SOME : NONE;
    }

    AttributedStyle backend(int number) {
        int colour = BACKENDS[number % BACKENDS.length];
        return this == NONE || colour == INK ? AttributedStyle.DEFAULT : AttributedStyle.DEFAULT.foreground(colour);
    }

    AttributedStyle failure() {
        return this == NONE ? AttributedStyle.DEFAULT : AttributedStyle.DEFAULT.foreground(RED);
    }
}
