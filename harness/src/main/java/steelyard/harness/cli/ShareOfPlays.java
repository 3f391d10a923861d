package steelyard.harness.cli;

import java.math.BigDecimal;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import picocli.CommandLine.ITypeConverter;
import picocli.CommandLine.TypeConversionException;

/** {@code 90%}: a share with its unit, as in a drill. */
final class ShareOfPlays implements ITypeConverter<Double> {
    private static final Pattern SHARE = Pattern.compile("(\\d{1,3}(?:\\.\\d{1,9})?)%");
    private static final BigDecimal ALL = BigDecimal.valueOf(100);

    @Override
    public Double convert(String word) {
        Matcher share = SHARE.matcher(word);
        if (!share.matches() || new BigDecimal(share.group(1)).compareTo(ALL) > 0) {
            throw new TypeConversionException("'" + word + "' is not a share from 0% to 100%, such as 90%");
        }
        return new BigDecimal(share.group(1)).movePointLeft(2).doubleValue();
    }
}
