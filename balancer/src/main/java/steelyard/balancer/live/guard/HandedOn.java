package steelyard.balancer.live.guard;

import io.netty.util.concurrent.EventExecutor;
import steelyard.balancer.core.decide.Orders;

/** Orders as the Decider gives them, inside its lock: handed to an executor, which carries them out in their order. */
final class HandedOn implements Orders {
    private final EventExecutor executor;
    private final Orders carriedOut;
    private boolean ended;

    HandedOn(EventExecutor executor, Orders carriedOut) {
        this.executor = executor;
        this.carriedOut = carriedOut;
    }

    /** Drops what still comes; inside the lock. */
    void end() {
        ended = true;
    }

    @Override
    public void startProbe(int backend, long probe) {
        hand(() -> carriedOut.startProbe(backend, probe));
    }

    @Override
    public void dropProbe(int backend, long probe) {
        hand(() -> carriedOut.dropProbe(backend, probe));
    }

    @Override
    public void startReading(int backend, long number) {
        hand(() -> carriedOut.startReading(backend, number));
    }

    @Override
    public void dropReading(int backend, long number) {
        hand(() -> carriedOut.dropReading(backend, number));
    }

    @Override
    public void place(long ticket, int backend) {
        hand(() -> carriedOut.place(ticket, backend));
    }

    @Override
    public void cut(int backend) {
        hand(() -> carriedOut.cut(backend));
    }

    private void hand(Runnable order) {
        if (!ended) {
            executor.execute(order);
        }
    }
}
