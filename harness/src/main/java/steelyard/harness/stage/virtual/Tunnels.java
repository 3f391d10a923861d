package steelyard.harness.stage.virtual;

import java.util.ArrayList;
import java.util.List;
import steelyard.drills.model.Traffic;
import steelyard.harness.stage.virtual.Post.Kind;

/** The clients' ends of tunnels: each is closed when it has stood as long as its request wants. */
final class Tunnels {
    private final Post post;
    private final Flights flights;
    private final int[][] laneOf;
    private final List<Lane> lanes = new ArrayList<>();

    Tunnels(Post post, Flights flights, List<Traffic> traffic) {
        this.post = post;
        this.flights = flights;
        laneOf = traffic.stream()
                .map(stream -> stream.requests().stream()
                        .mapToInt(each -> lane(each.openNanos()))
                        .toArray())
                .toArray(int[][]::new);
    }

    private int lane(long openNanos) {
        for (int i = 0; i < lanes.size(); i++) {
            if (lanes.get(i).delayNanos() == openNanos) {
                return i;
            }
        }
        if (openNanos > 0) {
            lanes.add(new Lane(openNanos));
        }
        return lanes.size() - 1;
    }

    /** Whether any request asks for one. */
    boolean any() {
        return !lanes.isEmpty();
    }

    /** When the next one is closed. */
    long nextNanos() {
        long next = Lane.NEVER;
        for (Lane lane : lanes) {
            next = Math.min(next, lane.nextNanos());
        }
        return next;
    }

    /** A client learns that its tunnel stands. */
    void opened(long token, long nowNanos) {
        int flight = Slots.of(token);
        if (flights.current(token) && !flights.told[flight]) {
            flights.openedNanos[flight] = nowNanos;
            lanes.get(laneOf[flights.traffic[flight]][flights.kind[flight]]).send(nowNanos, token, 0, 0);
        }
    }

    /** Closes those whose time has come; the balancer is done with one when the backend has closed it too. */
    void poll(long nowNanos) {
        for (Lane lane : lanes) {
            while (lane.nextNanos() <= nowNanos) {
                long token = lane.what();
                lane.drop();
                if (flights.current(token)) {
                    post.send(Kind.TUNNEL_ENDED, nowNanos, token, 0);
                }
            }
        }
    }
}
