package steelyard.harness.stage.live;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.net.Socket;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.Pool;
import steelyard.harness.stage.CannotPlay;
import steelyard.harness.stage.Clientele;

/** Where clients connect from: addresses of their own, where the system has the whole loopback network. */
final class ClientAddresses {
    private static final ClientAddresses NONE = new ClientAddresses(false);

    private final boolean own;

    private ClientAddresses(boolean own) {
        this.own = own;
    }

    /**
     * Tries what the system allows.
     *
     * @throws CannotPlay when it has but one address and the drill tells clients apart by theirs
     */
    static ClientAddresses of(Drill drill) throws CannotPlay {
        return of(drill, new InetSocketAddress(Clientele.address(0), 0));
    }

    /** As {@link #of(Drill)}; {@code tried} stands for all that clients would connect from. */
    static ClientAddresses of(Drill drill, InetSocketAddress tried) throws CannotPlay {
        if (allowed(tried)) {
            return new ClientAddresses(true);
        }
        for (Pool pool : drill.stage().pools()) {
            if (tellsThemApart(pool)) {
                throw new CannotPlay(
                        "pool " + pool.name() + " knows clients by their addresses, and this system lets"
                                + " them connect from 127.0.0.1 alone: give lo the whole of 127.0.0.0/8, or forecast the drill");
            }
        }
        return NONE;
    }

    private static boolean tellsThemApart(Pool pool) {
        Hashing hash = pool.picking().hash();
        Affinity affinity = pool.picking().affinity();
        return hash != null && hash.by() == Hashing.By.CLIENT
                || affinity != null && affinity.by() == Affinity.By.CLIENT;
    }

    private static boolean allowed(InetSocketAddress tried) {
        try (Socket socket = new Socket()) {
            socket.bind(tried);
            return true;
        } catch (IOException e) {
            return false;
        }
    }

    /** Whether each client has an address of its own. */
    boolean own() {
        return own;
    }

    /** Where a client connects from, by its number over all streams; null for wherever the system chooses. */
    @Nullable
    InetSocketAddress of(int client) {
        return own ? new InetSocketAddress(Clientele.address(client), 0) : null;
    }
}
