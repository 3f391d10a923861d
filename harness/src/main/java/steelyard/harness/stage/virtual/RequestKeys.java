package steelyard.harness.stage.virtual;

import java.util.List;
import java.util.function.IntFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.Keys;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.HashSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Traffic;
import steelyard.harness.record.Cast;
import steelyard.harness.stage.Clientele;

/**
 * The keys of requests by stream, kind and client, worked out once from the texts that the live side reads off the wire.
 */
final class RequestKeys {
    private static final String COOKIE = "cookie";

    private final List<Traffic> traffic;
    private final List<PoolSettings> pools;
    private final int[] poolOf;
    private final Clientele clientele;
    /** By stream and kind: by client, or one for all; null until it is asked for. */
    private final long[] @Nullable [][] keys;
    /** By stream and client; null until it is asked for. */
    private final long[] @Nullable [] addresses;

    RequestKeys(Drill drill, List<PoolSettings> pools) {
        this.traffic = drill.traffic();
        this.pools = pools;
        poolOf = new Cast(drill).poolsOfTraffic();
        clientele = new Clientele(traffic);
        keys = new long[traffic.size()][][];
        addresses = new long[traffic.size()][];
    }

    /** Of what the pool of a stream hashes. */
    long key(int stream, int kind, int client) {
        long[][] ofStream = keys[stream];
        if (ofStream == null) {
            ofStream = ofStream(stream);
            keys[stream] = ofStream;
        }
        long[] ofKind = ofStream[kind];
        return ofKind[ofKind.length == 1 ? 0 : client];
    }

    /** Of a client's address. */
    long address(int stream, int client) {
        long[] ofStream = addresses[stream];
        if (ofStream == null) {
            ofStream = each(stream, number -> Clientele.address(clientele.number(stream, number)));
            addresses[stream] = ofStream;
        }
        return ofStream[client];
    }

    private long[][] ofStream(int stream) {
        PoolSettings pool = pools.get(poolOf[stream]);
        HashSettings hash = pool.pick().hash();
        long[][] ofKinds = new long[traffic.get(stream).requests().size()][];
        for (int kind = 0; kind < ofKinds.length; kind++) {
            ofKinds[kind] = pool.front().kind() == FrontSettings.Kind.TCP || hash.by() == HashSettings.By.CLIENT
                    ? each(stream, number -> Clientele.address(clientele.number(stream, number)))
                    : ofTexts(stream, kind, hash);
        }
        return ofKinds;
    }

    private long[] ofTexts(int stream, int kind, HashSettings hash) {
        Traffic.Request request = traffic.get(stream).requests().get(kind);
        boolean alike = !request.path().contains(Traffic.Request.CLIENT)
                && request.headers().values().stream().noneMatch(each -> each.contains(Traffic.Request.CLIENT));
        return alike
                ? new long[] {Keys.of(text(stream, kind, 0, hash))}
                : each(stream, number -> text(stream, kind, number, hash));
    }

    private String text(int stream, int kind, int client, HashSettings hash) {
        String text = switch (hash.by()) {
            case CLIENT -> Clientele.address(clientele.number(stream, client));
            case PATH -> clientele.path(stream, kind, client);
            case HEADER -> clientele.header(stream, kind, client, hash.name());
            case COOKIE -> cookie(clientele.header(stream, kind, client, COOKIE), hash.name());
        };
        return text == null ? "" : text;
    }

    /** The value of a cookie in a Cookie field (RFC 6265, 4.2.1); null without one. */
    private static @Nullable String cookie(@Nullable String field, String name) {
        if (field == null) {
            return null;
        }
        for (String pair : field.split(";")) {
            String each = pair.strip();
            if (each.startsWith(name + "=")) {
                return each.substring(name.length() + 1);
            }
        }
        return null;
    }

    private long[] each(int stream, IntFunction<String> text) {
        long[] all = new long[traffic.get(stream).clients()];
        for (int client = 0; client < all.length; client++) {
            all[client] = Keys.of(text.apply(client));
        }
        return all;
    }
}
