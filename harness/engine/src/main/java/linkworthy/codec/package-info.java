/**
 * The options compared: codecs turn a picture into packets, and packets that arrive back into a
 * picture.
 *
 * <p>The transform codec is an {@link linkworthy.codec.Arrangement} (rows or blocks) times a {@link
 * linkworthy.codec.Basis} (mean, dct, wht, pca, pca-shared) times a {@link linkworthy.codec.Keep}
 * times a {@link linkworthy.codec.Quantizer} or the like, coded by {@link
 * linkworthy.codec.RiceCoder} into units that decode alone.
 *
 * <p>Beside it stand baseline JPEG ({@link linkworthy.codec.JpegCodec}) and wavelets ({@link
 * linkworthy.codec.WaveletCodec}). All fill packets through {@link linkworthy.link.Packetizer} and
 * start them with a {@link linkworthy.codec.Preamble}.
 *
 * <p>What must stay fixed: every bit is counted; a decoder returns a picture whatever it is fed;
 * work that several codecs share goes through {@link linkworthy.codec.Memo}.
 *
 * <p>To add a codec: one {@link linkworthy.codec.CodecFamily}, one line in {@code
 * META-INF/services}, one test that extends {@code CodecContractTest}, one line of docs. The same
 * in a jar of one's own is a plugin, read by {@link linkworthy.codec.PluginFolder}; {@code
 * harness/handbook/plugin-example} is a whole one. Programs in any language are codecs through
 * {@link linkworthy.codec.CommandCodecFamily}. What such codecs do wrong is a {@link
 * linkworthy.codec.Failure}, recorded with its trial. To add a basis: one {@link
 * linkworthy.codec.Basis} named in {@link linkworthy.codec.Basis#all()}.
 */
@NullMarked
package linkworthy.codec;

import org.jspecify.annotations.NullMarked;
