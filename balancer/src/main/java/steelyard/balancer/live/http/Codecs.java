package steelyard.balancer.live.http;

import io.netty.handler.codec.http.DefaultHttpHeadersFactory;
import io.netty.handler.codec.http.HttpDecoderConfig;
import steelyard.balancer.settings.LimitSettings;

/** The decoders and their limits: those of requests are the pool's, those of answers are fixed. */
final class Codecs {
    private static final int MOST_LINE = 8192;
    private static final int MOST_FIELDS = 32 * 1024;
    private static final int MOST_PIECE = 64 * 1024;

    private Codecs() {}

    static RequestDecoder requests(LimitSettings limits) {
        return new RequestDecoder(config(RequestDecoder.longestLine(limits), limits.headBytes()), limits);
    }

    static BackendDecoder answers(Runnable bytesCame) {
        return new BackendDecoder(config(MOST_LINE, MOST_FIELDS), bytesCame);
    }

    /** Header fields are checked once, where they come in; the encoders write the same objects out. */
    private static HttpDecoderConfig config(int mostLine, int mostFields) {
        return new HttpDecoderConfig()
                .setMaxInitialLineLength(mostLine)
                .setMaxHeaderSize(mostFields)
                .setMaxChunkSize(MOST_PIECE)
                .setHeadersFactory(DefaultHttpHeadersFactory.headersFactory().withValidation(true))
                .setTrailersFactory(DefaultHttpHeadersFactory.trailersFactory().withValidation(true));
    }
}
