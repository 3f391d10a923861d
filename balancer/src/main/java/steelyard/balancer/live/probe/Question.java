package steelyard.balancer.live.probe;

import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandler;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/** One question to a backend, on a connection of its own that is closed with it. */
final class Question {
    private final Lane<?> lane;
    private final long number;
    private @Nullable Channel channel;
    private boolean over;

    Question(Lane<?> lane, long number) {
        this.lane = lane;
        this.number = number;
    }

    long number() {
        return number;
    }

    /** @param told whether the connection came to stand */
    void connect(ChannelHandler handler, Consumer<Boolean> told) {
        ChannelFuture connecting = lane.client().handler(handler).connect();
        channel = connecting.channel();
        connecting.addListener(done -> told.accept(done.isSuccess()));
    }

    /** Ends it; false when it has ended before, so that whoever reports does so once. */
    boolean close() {
        boolean wasOpen = !over;
        over = true;
        lane.over(this);
        if (channel != null) {
            channel.close();
        }
        return wasOpen;
    }
}
