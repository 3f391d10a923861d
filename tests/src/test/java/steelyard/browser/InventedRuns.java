package steelyard.browser;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** The invented runs by name: the shapes that a report has to carry. */
final class InventedRuns {
    private static final List<String> BIRDS = List.of(
            "fulmar",
            "gannet",
            "petrel",
            "puffin",
            "razorbill",
            "kittiwake",
            "guillemot",
            "shag",
            "cormorant",
            "skua",
            "tern",
            "shearwater");
    private static final String SOURCE = """
            drill: Lose one of three at the evening peak
            stage:
              pools:
                seats:
                  method: weighted-round-robin
                  probe: {path: /afloat, every: 1s, within: 400ms, misses: 3, passes: 2}   # a comment with </script> in it
            lasts: 60s
            """;

    private InventedRuns() {}

    static Map<String, InventedRun> all() {
        Map<String, InventedRun> runs = new LinkedHashMap<>();
        runs.put("lose-one", loseOne());
        runs.put("two-pools", twoPools());
        runs.put("twelve", twelve());
        runs.put("forty", forty());
        runs.put("five-minutes", fiveMinutes());
        runs.put("interrupted", interrupted());
        runs.put("failures", failures());
        runs.put("crowded", crowded());
        runs.put("by-load", byLoad());
        return runs;
    }

    static InventedRun loseOne() {
        InventedRun run = new InventedRun("Lose one of three at the evening peak", 60).source(SOURCE);
        run.backend("fulmar", "seats", 1, 900).losesAndReturns(15, 35);
        run.backend("gannet", "seats", 1, 900);
        run.backend("petrel", "seats", 1, 900);
        return expected(run.cue(15, "fulmar dies", "kill fulmar").cue(35, "fulmar returns", "revive fulmar"));
    }

    private static InventedRun expected(InventedRun run) {
        return run.expect("failed, from 14.9 s to 20 s", "at most 0.3 %", "0 %", "0.3 %", true, "")
                .expect("detected-in of fulmar, after fulmar dies", "1.9 s to 3.2 s", "2.612 s", "0.588 s", true, "")
                .expect("share of gannet, from 25 s to 35 s", "49 % to 51 %", "50.02 %", "0.98 %", true, "")
                .expect("share of fulmar, from 38 s to 41 s", "18 % to 30 %", "23.1 %", "5.1 %", true, "")
                .expect("settled-in, after fulmar returns", "3.5 s to 8 s", "5.4 s", "1.9 s", true, "")
                .expect("latency 99 %, from 25 s to 35 s", "at most 150 ms", "96.4 ms", "53.6 ms", true, "");
    }

    static InventedRun twoPools() {
        InventedRun run = new InventedRun("Uneven hosts under two pools", 60);
        run.backend("fulmar", "seats", 2, 600);
        run.backend("gannet", "seats", 7, 600).reweigh(30, 2);
        run.backend("petrel", "seats", 5, 600).reweigh(30, 10);
        run.backend("puffin", "berths", 15, 300);
        run.backend("razorbill", "berths", 24, 300)
                .stands(20, "draining", "drain")
                .stands(40, "up", "admit");
        return run.cue(20, "razorbill drains", "drain razorbill")
                .cue(30, "seats reweighed", "reweigh gannet to 2, petrel to 10")
                .cue(40, "razorbill admitted", "admit razorbill")
                .expect("share of puffin, from 20 s to 40 s", "at least 99 %", "100 %", "1 %", true, "");
    }

    static InventedRun twelve() {
        InventedRun run = new InventedRun("A pool of twelve loses three", 60);
        for (String bird : BIRDS) {
            InventedRun.Member member = run.backend(bird, "seats", 1, 2400);
            if (bird.equals("gannet") || bird.equals("skua")) {
                member.losesAndReturns(12, 30);
            }
        }
        return run.cue(12, "two die", "kill gannet, skua")
                .cue(30, "two return", "revive gannet, skua")
                .expect("failed, from 12 s to 20 s", "at most 0.3 %", "0 %", "0.3 %", true, "");
    }

    static InventedRun forty() {
        InventedRun run = new InventedRun("A pool of forty and a pool of one", 60);
        for (int number = 1; number <= 40; number++) {
            InventedRun.Member member = run.backend("fulmar-" + number, "seats", 1 + number % 3, 4000);
            if (number > 30) {
                member.losesAndReturns(20, 30);
            }
        }
        run.backend("gannet", "holds", 1, 100);
        return run.cue(20, "a quarter dies", "kill fulmar-31 to fulmar-40")
                .cue(30, "a quarter returns", "revive fulmar-31 to fulmar-40");
    }

    static InventedRun fiveMinutes() {
        InventedRun run = new InventedRun("Drain for patching, one after the other", 300);
        for (int at = 0; at < 3; at++) {
            double start = 40 + 80 * at;
            run.backend(BIRDS.get(at), "seats", 1, 500)
                    .stands(start, "draining", "drain")
                    .stands(start + 10, "withdrawn", "withdraw")
                    .stands(start + 40, "warming", "admit")
                    .stands(start + 45, "up", "ramped");
            run.cue(start, BIRDS.get(at) + " drains", "drain " + BIRDS.get(at));
            run.cue(start + 10, BIRDS.get(at) + " stops for its patches", "withdraw " + BIRDS.get(at));
            run.cue(start + 40, BIRDS.get(at) + " is back", "admit " + BIRDS.get(at));
        }
        return run.expect("cut", "at most 0", "0", "0", true, "");
    }

    static InventedRun interrupted() {
        InventedRun run = new InventedRun("Lose one of three, stopped half way", 60).interruptedAt(23.4);
        run.backend("fulmar", "seats", 1, 900).losesAndReturns(15, 35);
        run.backend("gannet", "seats", 1, 900);
        run.backend("petrel", "seats", 1, 900);
        return run.cue(15, "fulmar dies", "kill fulmar").cue(35, "fulmar returns", "revive fulmar");
    }

    static InventedRun failures() {
        InventedRun run = new InventedRun("Lose one of three with retries off", 60).withoutRetries();
        run.backend("fulmar", "seats", 1, 900).losesAndReturns(15, 35).failing(0, 1, 2, 4, 5, 6, 8);
        run.backend("gannet", "seats", 1, 900);
        run.backend("petrel", "seats", 1, 900);
        return run.cue(15, "fulmar dies", "kill fulmar")
                .cue(35, "fulmar returns", "revive fulmar")
                .expect("failed, from 14.9 s to 20 s", "at most 0.3 %", "17.2 %", "−16.9 %", false, "")
                .expect(
                        "detected-in of fulmar, after fulmar dies",
                        "1.9 s to 3.2 s",
                        "not measured",
                        "",
                        false,
                        "never detected: fulmar stayed pickable up to its next cue at 35 s")
                .expect("latency 99 %, from 25 s to 35 s", "at most 150 ms", "96.4 ms", "53.6 ms", true, "");
    }

    /** Weights that chase the load, a bench, a queue, and a pool of connections. */
    static InventedRun byLoad() {
        InventedRun run = new InventedRun("Weights by load, read too seldom", 60)
                .byLoad("seats")
                .queues("seats")
                .connections("mail")
                .unread("gannet", 22.4, 27.1)
                .unread("gannet", 40.2, 43.3);
        run.backend("fulmar", "seats", 1, 900);
        run.backend("gannet", "seats", 1, 900).slower(1.6);
        run.backend("petrel", "seats", 1, 900);
        run.backend("kittiwake", "seats", 2, 900)
                .stands(30, "benched", "failures")
                .stands(35, "warming", "bench-over")
                .stands(40, "up", "ramped");
        run.backend("skua", "mail", 1, 60);
        run.backend("tern", "mail", 1, 60);
        return run.cue(20, "gannet gets slower", "slow gannet")
                .expect("swing of seats", "at most 10 %", "14.2 %", "", false, "")
                .expect("weight-lag of gannet", "at most 2 s", "1.2 s", "0.8 s", true, "");
    }

    static InventedRun crowded() {
        InventedRun run = new InventedRun("A name with <b>marks</b> & \"quotes\" that is long enough to wrap", 60);
        run.backend("the-northernmost-fulmar-1", "seats", 1, 900);
        run.backend("gannet-on-the-far-side", "seats", 1, 900);
        for (int at = 0; at < 28; at++) {
            run.cue(10 + at * 0.7, "flap the probe, turn " + (at + 1), "fail-probe gannet-on-the-far-side");
        }
        return run.cue(59.5, "close to the very end", "heal gannet-on-the-far-side");
    }
}
