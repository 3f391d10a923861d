package steelyard.balancer.live.http;

import io.netty.handler.codec.http.DefaultHttpHeadersFactory;
import io.netty.handler.codec.http.HttpDecoderConfig;
import io.netty.handler.codec.http.HttpMessage;
import io.netty.handler.codec.http.HttpRequestDecoder;

/** Limits of the decoders: a request line of 8 KiB (RFC 9112, 3, asks for 8000 octets), a header section of 32 KiB. */
final class Codecs {
    private static final int MOST_LINE = 8192;
    private static final int MOST_FIELDS = 32 * 1024;
    private static final int MOST_PIECE = 64 * 1024;

    private Codecs() {}

    static HttpRequestDecoder requests() {
        return new HttpRequestDecoder(config()) {
            @Override
            protected HttpMessage createMessage(String[] line) throws Exception {
                if (!line[2].startsWith("HTTP/")) { // the decoder itself would take small letters
                    throw new IllegalArgumentException("a version is written in capitals (RFC 9112, 2.3)");
                }
                return super.createMessage(line);
            }
        };
    }

    static BackendDecoder answers(Runnable bytesCame) {
        return new BackendDecoder(config(), bytesCame);
    }

    /** Header fields are checked once, where they come in; the encoders write the same objects out. */
    private static HttpDecoderConfig config() {
        return new HttpDecoderConfig()
                .setMaxInitialLineLength(MOST_LINE)
                .setMaxHeaderSize(MOST_FIELDS)
                .setMaxChunkSize(MOST_PIECE)
                .setHeadersFactory(DefaultHttpHeadersFactory.headersFactory().withValidation(true))
                .setTrailersFactory(DefaultHttpHeadersFactory.trailersFactory().withValidation(true));
    }
}
