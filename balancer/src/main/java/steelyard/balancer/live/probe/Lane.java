package steelyard.balancer.live.probe;

import io.netty.bootstrap.Bootstrap;
import io.netty.channel.Channel;
import java.net.InetSocketAddress;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.tls.BackendTls;

/**
 * The way to one backend on which it is asked something, and the question that is under way there: never two at once.
 *
 * @param <S> the settings of what is asked
 */
final class Lane<S> {
    private final Bootstrap client;
    private final InetSocketAddress address;
    private final @Nullable BackendTls tls;
    private final @Nullable S settings;
    private @Nullable Question running;

    /**
     * @param tls null for none
     * @param settings null for a backend that is not asked
     */
    Lane(Bootstrap client, InetSocketAddress address, @Nullable BackendTls tls, @Nullable S settings) {
        this.client = client;
        this.address = address;
        this.tls = tls;
        this.settings = settings;
    }

    @Nullable
    S settings() {
        return settings;
    }

    @Nullable
    Question running() {
        return running;
    }

    /** The field Host of a request to the backend. */
    String host() {
        return address.getHostString() + ":" + address.getPort();
    }

    /** Has a connection to the backend made secure where that is asked for. */
    void secure(Channel channel) {
        BackendTls.secure(tls, channel);
    }

    /** A client that connects to the backend; the caller adds the handler. */
    Bootstrap client() {
        return client.clone().remoteAddress(address);
    }

    /** A question begins; that before it, if any, is over. */
    Question begin(long number) {
        Question begun = new Question(this, number);
        running = begun;
        return begun;
    }

    void over(Question question) {
        if (running == question) {
            running = null;
        }
    }
}
