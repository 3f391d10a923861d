package steelyard.bench;

import java.util.Locale;
import java.util.function.Supplier;
import steelyard.bench.ForecastPlays.Clocked;
import steelyard.drills.read.DrillLibrary;

/**
 * How fast drills are forecast on one core, in processor time of the playing thread, and under how small a heap.
 *
 * <p>Closes with {@code name: value} lines: requests a second for the bundled drill of three backends, with probes,
 * clients, the judge and slices on; what a request costs with 2,000 backends over what it costs with 3; seconds for one play
 * of {@code many-quays}; and the requests a second of one pool without trouble, unjudged, over those of the same pool in a
 * general-purpose library for discrete-event simulation.
 */
public final class Forecast {
    private static final long REQUESTS = 4_000_000;
    private static final int[] BACKENDS = {3, 30, 300, 2_000};
    private static final int ROUNDS = 3;
    private static final String PROBED = """
            probe: {path: /afloat, every: 1s, within: 400ms, misses: 3, passes: 2}
                  warm-up: 5s
                  retry: {at-most: 1, budget: 40%}""";

    private Forecast() {}

    /** The benchmark's entry; takes no arguments. */
    public static void main(String[] args) {
        say("%-36s %10s %12s %14s", "played", "ns/request", "requests/s", "bytes/request");
        ForecastPlays bundled = judged(DrillLibrary.text("lose-one-of-three").orElseThrow());
        Clocked three = best("lose-one-of-three", () -> bundled.play(REQUESTS));
        double growth = growth();
        Clocked quays = judged(DrillLibrary.text("many-quays").orElseThrow()).play(1);
        row("many-quays, one play", quays);
        row("three, a day in one play", judged(pool(3, 1_200, PROBED, "24h")).play(1));
        double ratio = ratio();
        say("heap-mebibytes: %d", Runtime.getRuntime().maxMemory() >> 20);
        say("requests-per-second: %.0f", three.perSecond());
        say("growth-3-to-2000: %.2f", growth);
        say("many-quays-seconds: %.1f", quays.nanos() / 1e9);
        say("ratio-to-library: %.2f", ratio);
    }

    /** The same load on every backend, however many there are. */
    private static double growth() {
        double[] nanos = new double[BACKENDS.length];
        for (int i = 0; i < BACKENDS.length; i++) {
            int backends = BACKENDS[i];
            ForecastPlays plays = judged(pool(backends, 300L * backends, PROBED, Math.max(5, 180 / backends) + "s"));
            nanos[i] = best(backends + " backends alike", () -> plays.play(REQUESTS))
                    .nanosEach();
        }
        return nanos[BACKENDS.length - 1] / nanos[0];
    }

    private static double ratio() {
        ForecastPlays plays = new ForecastPlays(ForecastPlays.read(pool(3, 900, "", "60s")), false);
        Clocked ours = best("one pool, unjudged", () -> plays.play(REQUESTS));
        Clocked library = best("the same in SSJ", () -> ForecastPlays.clock(() -> LibraryPool.run(REQUESTS)));
        return ours.perSecond() / library.perSecond();
    }

    private static ForecastPlays judged(String text) {
        return new ForecastPlays(ForecastPlays.read(text), true);
    }

    private static String pool(int backends, long perSecond, String settings, String lasts) {
        return """
                drill: Alike
                about: Equal backends, and nothing goes wrong.
                stage:
                  connections: 1000000
                  pools:
                    seats:
                      method: %s
                      %s
                      serves: {workers: 8, queue: 64, time: {lognormal: {median: 12ms, 99%%: 60ms}}}
                      backends: {fulmar: {times: %d}}
                traffic: [{to: seats, arrivals: poisson, rate: %d/s, clients: %d, give-up: 2s}]
                lasts: %s
                """.formatted(
                        settings.isEmpty() ? "round-robin" : "weighted-round-robin",
                        settings,
                        backends,
                        perSecond,
                        backends * 20,
                        lasts);
    }

    /** The best of some rounds, after one that lets the machine's compilers come to rest. */
    private static Clocked best(String what, Supplier<Clocked> round) {
        round.get();
        Clocked best = round.get();
        for (int i = 1; i < ROUNDS; i++) {
            Clocked again = round.get();
            best = again.nanosEach() < best.nanosEach() ? again : best;
        }
        row(what, best);
        return best;
    }

    private static void row(String what, Clocked clocked) {
        say("%-36s %10.1f %12.0f %14.2f", what, clocked.nanosEach(), clocked.perSecond(), clocked.bytesEach());
    }

    private static void say(String format, Object... values) {
        System.out.println(String.format(Locale.ROOT, format, values));
    }
}
