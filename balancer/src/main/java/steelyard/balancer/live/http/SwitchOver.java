package steelyard.balancer.live.http;

import io.netty.channel.Channel;
import io.netty.channel.ChannelPipeline;
import steelyard.balancer.live.tcp.Relay;

/** Makes a tunnel of two connections that have agreed to speak something else than HTTP. */
final class SwitchOver {
    private SwitchOver() {}

    /**
     * Both channels are the relay's from here on, whatever came behind the heads included.
     *
     * @param idleNanos how long neither side may move
     * @param attempts told of the end
     */
    static void join(
            Channel client,
            ClientEncoder encoder,
            RequestDecoder decoder,
            BackendConnection backend,
            Attempts attempts,
            long idleNanos) {
        Relay relay = new Relay(client, backend.opened(), idleNanos, outcome -> {
            attempts.ended(outcome);
            backend.gone();
        });
        backend.become(relay);
        relay.join();
        // The decoders come last: what they hold is passed on at once, and no encoder may see it.
        ChannelPipeline pipeline = client.pipeline();
        pipeline.remove(ClientHandler.class);
        pipeline.remove(encoder);
        backend.removeEncoder();
        backend.removeDecoder();
        pipeline.remove(decoder);
        relay.start();
    }
}
