package steelyard.balancer.live.guard;

import io.netty.util.concurrent.EventExecutor;
import java.util.ArrayList;
import java.util.List;

/** The waiting rooms of all event loops. May be used from any thread. */
public final class WaitingRooms {
    private final List<EventExecutor> loops;
    private final List<WaitingRoom> rooms = new ArrayList<>();

    public WaitingRooms(List<? extends EventExecutor> loops) {
        this.loops = List.copyOf(loops);
        for (int loop = 0; loop < loops.size(); loop++) {
            rooms.add(new WaitingRoom(loop, loops.size()));
        }
    }

    /** The room of a loop. */
    public WaitingRoom of(EventExecutor loop) {
        int place = loops.indexOf(loop);
        if (place < 0) {
            throw new IllegalStateException("a loop of another balancer");
        }
        return rooms.get(place);
    }

    /** Passes an answer on to the loop of its ticket. */
    public void placed(long ticket, int backend) {
        int place = (int) (ticket % loops.size());
        loops.get(place).execute(() -> rooms.get(place).placed(ticket, backend));
    }
}
