package steelyard.bench;

import org.jspecify.annotations.Nullable;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.live.LiveStage;

/**
 * Three million requests through a live stage whose cues never stop, recorded and judged as a rehearsal is. At the end
 * every count has to be exact, every socket closed, no buffer lost, and the heap as large as it was at half time.
 *
 * <p>Takes {@code --requests N} and {@code --rate N} (requests a second). Exit status: 0 all of that held, 1 something did
 * not, 2 wrong use, 3 it could not be played here. A machine that could not keep the pace is told of and fails nothing:
 * counts have to be exact all the same.
 */
public final class Soak {
    private static final int REQUESTS = 3_000_000;
    private static final int PER_SECOND = 4_000;
    private static final int LONGEST_SECONDS = 14 * 60;

    private int requests = REQUESTS;
    private int perSecond = PER_SECOND;

    private Soak() {}

    /** The benchmark's entry; arguments as above. */
    public static void main(String[] args) throws Exception {
        Soak soak = new Soak();
        String wrong = soak.read(args);
        if (wrong != null) {
            System.err.println("tests/bench/run: " + wrong);
            System.exit(2);
        }
        System.exit(soak.status());
    }

    /** Returns what is wrong with the arguments, or null. */
    private @Nullable String read(String[] args) {
        for (int i = 0; i < args.length; i += 2) {
            int value =
                    i + 1 < args.length && args[i + 1].matches("[1-9][0-9]{0,8}") ? Integer.parseInt(args[i + 1]) : 0;
            if (args[i].equals("--requests") && value > 0) {
                requests = value;
            } else if (args[i].equals("--rate") && value > 0 && value <= LiveStage.MOST_REQUESTS_A_SECOND) {
                perSecond = value;
            } else {
                return "'" + String.join(" ", args) + "' is not understood; soak takes --requests N and --rate N, of "
                        + LiveStage.MOST_REQUESTS_A_SECOND + " a second at most";
            }
        }
        return SoakDrill.seconds(requests, perSecond) <= LONGEST_SECONDS
                ? null
                : requests + " requests at " + perSecond + " a second take too long; raise --rate until it is over in "
                        + LONGEST_SECONDS / 60 + " minutes";
    }

    private int status() throws Exception {
        BufferLeaks leaks = BufferLeaks.watch();
        try {
            return new SoakPlay(requests, perSecond, leaks).play() ? 0 : 1;
        } catch (CannotPlay cannot) {
            System.err.println("tests/bench/run: " + cannot.getMessage());
            return 3;
        }
    }
}
