package steelyard.bench;

import java.util.List;
import steelyard.drills.model.Drill;

/**
 * A long play whose cues never stop: every one and a half seconds something is done to the next backend, and undone two
 * seconds later. There are six things to do and seven backends, so that everything happens to everybody in turn.
 * Connections are not kept for long: what an act made necessary is gone before the next but one.
 */
final class SoakDrill {
    private static final List<String> BACKENDS =
            List.of("fulmar", "gannet", "petrel", "kittiwake", "puffin", "razorbill", "guillemot");

    private static final int FIRST_MILLIS = 1_000;
    private static final int EVERY_MILLIS = 1_500;
    /** From an act's first cue to when its last is over. */
    private static final int ACT_MILLIS = 2_000;

    private static final int SEATS_PERCENT = 60;

    private static final String STAGE = """
            drill: A season without a calm day
            about: Skerry Ferries sells seats and takes holds while its backends are killed, drained and slowed in turn.
            stage:
              pools:
                seats:
                  method: weighted-round-robin
                  warm-up: 1s
                  retry: {at-most: 1, budget: 20%%}
                  timeouts: {idle: 4s}
                  probe: {path: /afloat, every: 500ms, within: 400ms, misses: 2, passes: 1}
                  serves: {workers: 600, queue: 400, time: {exponential: 4ms}}
                  backends: {fulmar: {weight: 2}, gannet: {weight: 3}, petrel: {weight: 2}, kittiwake: {weight: 1}}
                holds:
                  method: least-connections
                  retry: {at-most: 1, budget: 20%%}
                  timeouts: {idle: 4s}
                  probe: {path: /afloat, every: 500ms, within: 400ms, misses: 2, passes: 1}
                  serves: {workers: 600, queue: 400, time: {exponential: 4ms}}
                  backends: {puffin: , razorbill: , guillemot: }
            traffic:
              - to: seats
                rate: %d/s
                clients: 200
                give-up: 1s
                requests: [{get: /sailings/today, share: 80%%}, {get: /sailings/tomorrow, share: 20%%}]
              - to: holds
                rate: %d/s
                clients: 200
                give-up: 1s
                requests: [{post: /holds, body: 512B, share: 70%%}, {get: /holds/mine, share: 30%%}]
            lasts: %ds
            cues:
            """;

    private SoakDrill() {}

    /** So many requests at least, at so many a second on average; Poisson counts lie within four deviations. */
    static Drill of(long requests, int perSecond) {
        int seconds = seconds(requests, perSecond);
        int seats = perSecond * SEATS_PERCENT / 100;
        StringBuilder text = new StringBuilder(STAGE.formatted(seats, perSecond - seats, seconds));
        int begins = FIRST_MILLIS;
        for (int act = 0; begins + ACT_MILLIS < seconds * 1_000; act++) {
            act(text, act, begins, BACKENDS.get(act % BACKENDS.size()));
            begins += EVERY_MILLIS;
        }
        return ForecastPlays.read(text.toString());
    }

    /** How long such a play lasts. */
    static int seconds(long requests, int perSecond) {
        return (int) Math.ceil((requests + 4 * Math.sqrt(requests)) / perSecond);
    }

    private static void act(StringBuilder text, int act, int at, String backend) {
        switch (act % 6) {
            case 0 -> {
                cue(text, at, "kill: " + backend);
                cue(text, at + ACT_MILLIS, "revive: " + backend);
            }
            case 1 -> cue(text, at, "reweigh: " + backend + ", weight: " + (1 + act % 5));
            case 2 -> {
                cue(text, at, "drain: " + backend + ", limit: 1s");
                cue(text, at + ACT_MILLIS, "admit: " + backend);
            }
            case 3 -> {
                cue(text, at, "slow: " + backend + ", factor: 10");
                cue(text, at + ACT_MILLIS, "heal: " + backend);
            }
            case 4 -> cue(text, at, "hang: " + backend + ", for: 500ms");
            default -> {
                // What is in flight outlasts the drain's limit, and is cut.
                cue(text, at, "slow: " + backend + ", plus: 600ms, for: 1s");
                cue(text, at + 500, "drain: " + backend + ", limit: 300ms");
                cue(text, at + ACT_MILLIS, "admit: " + backend);
            }
        }
    }

    private static void cue(StringBuilder text, int atMillis, String cue) {
        text.append("  - {at: ").append(atMillis).append("ms, ").append(cue).append("}\n");
    }
}
