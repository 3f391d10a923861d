package steelyard.bench;

import java.util.ArrayDeque;
import umontreal.ssj.randvar.ExponentialGen;
import umontreal.ssj.randvar.LognormalGen;
import umontreal.ssj.rng.MRG32k3a;
import umontreal.ssj.rng.RandomStream;
import umontreal.ssj.simevents.Event;
import umontreal.ssj.simevents.Simulator;
import umontreal.ssj.simevents.eventlist.SplayTree;
import umontreal.ssj.stat.Tally;

/**
 * The pool of {@code lose-one-of-three} as a user of SSJ, a general-purpose library for discrete-event simulation, would
 * model it: Poisson arrivals, three backends in turn, eight workers and a queue each, lognormal service, a hop of 50 us
 * between client, balancer and backend, each an event, and clients that give up after 2 s, which is an event that is nearly
 * always cancelled. No probes, connections, mixes or slices: what it leaves out makes it faster.
 */
final class LibraryPool {
    private static final int BACKENDS = 3;
    private static final int WORKERS = 8;
    private static final int QUEUE = 64;
    private static final double ARRIVALS_A_SECOND = 900;
    private static final double HOP_SECONDS = 50e-6;
    private static final double GIVE_UP_SECONDS = 2;
    private static final double MU = Math.log(0.012);
    private static final double SIGMA = Math.log(60.0 / 12) / 2.3263478740408408;

    private final Simulator simulator = new Simulator(new SplayTree());
    private final RandomStream gaps = new MRG32k3a();
    private final RandomStream work = new MRG32k3a();
    private final Tally sojourns = new Tally();
    private final Backend[] backends = new Backend[BACKENDS];
    private final long requests;
    private long arrived;
    private long failed;
    private int turn;

    private LibraryPool(long requests) {
        this.requests = requests;
        for (int i = 0; i < BACKENDS; i++) {
            backends[i] = new Backend();
        }
    }

    /** Simulates so many requests. Returns those that were answered. */
    static long run(long requests) {
        LibraryPool pool = new LibraryPool(requests);
        pool.simulator.init();
        pool.new Arrival().schedule(0);
        pool.simulator.start();
        if (pool.sojourns.numberObs() + pool.failed != requests) {
            throw new IllegalStateException("requests got lost");
        }
        return pool.sojourns.numberObs();
    }

    /** Where a request is on its way; one event object goes all of it. */
    private enum At {
        BALANCER,
        BACKEND,
        BALANCER_AGAIN,
        CLIENT
    }

    private final class Arrival extends Event {
        Arrival() {
            super(simulator);
        }

        @Override
        public void actions() {
            Request request = new Request();
            request.giveUp.schedule(GIVE_UP_SECONDS);
            request.hop(At.BALANCER);
            if (++arrived < requests) {
                schedule(ExponentialGen.nextDouble(gaps, ARRIVALS_A_SECOND));
            }
        }
    }

    private final class Request extends Event {
        private final double sentAt = simulator.time();
        private final GiveUp giveUp = new GiveUp(this);
        private At at = At.BALANCER;
        private Backend backend = backends[0];
        private boolean served;
        private boolean gaveUp;

        Request() {
            super(simulator);
        }

        void hop(At to) {
            at = to;
            schedule(HOP_SECONDS);
        }

        @Override
        public void actions() {
            switch (at) {
                case BALANCER -> {
                    backend = backends[turn];
                    turn = (turn + 1) % BACKENDS;
                    hop(At.BACKEND);
                }
                case BACKEND -> backend.take(this);
                case BALANCER_AGAIN -> hop(At.CLIENT);
                case CLIENT -> end();
            }
        }

        private void end() {
            if (gaveUp) {
                return;
            }
            giveUp.cancel();
            if (served) {
                sojourns.add(simulator.time() - sentAt);
            } else {
                failed++;
            }
        }
    }

    private final class GiveUp extends Event {
        private final Request request;

        GiveUp(Request request) {
            super(simulator);
            this.request = request;
        }

        @Override
        public void actions() {
            request.gaveUp = true;
            failed++;
        }
    }

    private final class Backend {
        private final ArrayDeque<Request> line = new ArrayDeque<>();
        private int busy;

        void take(Request request) {
            if (busy < WORKERS) {
                busy++;
                new Service(this, request).begin();
            } else if (line.size() < QUEUE) {
                line.add(request);
            } else {
                request.hop(At.BALANCER_AGAIN);
            }
        }
    }

    private final class Service extends Event {
        private final Backend backend;
        private Request request;

        Service(Backend backend, Request request) {
            super(simulator);
            this.backend = backend;
            this.request = request;
        }

        void begin() {
            schedule(LognormalGen.nextDouble(work, MU, SIGMA));
        }

        @Override
        public void actions() {
            request.served = true;
            request.hop(At.BALANCER_AGAIN);
            Request next = backend.line.poll();
            if (next == null) {
                backend.busy--;
            } else {
                request = next;
                begin();
            }
        }
    }
}
