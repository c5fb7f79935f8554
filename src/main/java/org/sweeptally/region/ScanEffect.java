package org.sweeptally.region;

import java.util.List;
import java.util.Optional;
import org.ejml.data.DMatrix4x4;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.filter.Scan;
import org.sweeptally.filter.ScanResult;
import org.sweeptally.site.SensorSettings;

/** What a scan does when its turn has come: the filter takes it in, and the picture that follows is published. */
final class ScanEffect {

    private ScanConversion conversion;
    private final ObjectFilter filter;
    private final Publisher publisher;
    private final BoundWatch boundWatch;
    private long lastEffectMicros;

    /** The beginning: nothing has been seen. */
    ScanEffect(RegionRules rules) {
        this(
                rules.area(),
                new ObjectFilter(rules.filterSettings(), rules.area().core(), rules.area().apronMetres()),
                new Publisher(rules.area()),
                new BoundWatch(),
                Micros.BEFORE_ALL);
    }

    private ScanEffect(
            RegionArea area, ObjectFilter filter, Publisher publisher, BoundWatch boundWatch, long lastEffectMicros) {
        this.conversion = new ScanConversion(area);
        this.filter = filter;
        this.publisher = publisher;
        this.boundWatch = boundWatch;
        this.lastEffectMicros = lastEffectMicros;
    }

    /** Log time of the last scan that took effect, {@link Micros#BEFORE_ALL} before the first. */
    long lastEffectMicros() {
        return lastEffectMicros;
    }

    /** How many scans have taken effect. */
    long sequence() {
        return publisher.sequence();
    }

    ObjectFilter filter() {
        return filter;
    }

    /** Goes on under other settings. */
    void settings(RegionRules rules) {
        filter.settings(rules.filterSettings(), rules.area().apronMetres());
        conversion = new ScanConversion(rules.area());
    }

    /**
     * Takes in a whole scan.
     *
     * @return false, with nothing done, if its sensor moves and no part says where it was
     */
    boolean apply(ScanParts parts, RegionRules rules, Findings findings, MachineOutputs out) {
        SensorSettings sensor = rules.sensor(parts.sensor());
        Optional<Scan> scan = conversion.convert(parts, sensor);
        if (scan.isEmpty()) {
            return false;
        }
        long logTime = parts.logTimeMicros();
        if (lastEffectMicros != Micros.BEFORE_ALL) {
            filter.predict(Micros.toSeconds(logTime - lastEffectMicros));
        }
        ScanResult result = filter.update(scan.get(), logTime);
        lastEffectMicros = logTime;
        publisher.publish(parts, rules.revision(), filter, result, out);
        boundWatch.look(filter.counters(), logTime, findings, out);
        return true;
    }

    /** Throws where the state contradicts itself. */
    void check() {
        List<Component> components = filter.components();
        for (Component component : components) {
            double logOdds = component.existenceLogOdds();
            Invariant.holds(!Double.isNaN(logOdds), "the log-odds of %s are %s", component.identity(), logOdds);
            checkDensity(component);
        }
        publisher.check(components);
    }

    private static void checkDensity(Component component) {
        var mean = component.density().mean;
        Invariant.holds(Double.isFinite(mean.a1 + mean.a2 + mean.a3 + mean.a4), "the mean of %s is %s",
                component.identity(), mean);
        DMatrix4x4 p = component.density().covariance;
        Invariant.holds(Covariances.isSymmetric(p), "the covariance of %s is not symmetric: %s", component.identity(),
                p);
        Invariant.holds(Covariances.isPositive(p), "the covariance of %s is not positive semi-definite: %s",
                component.identity(), p);
    }

    void write(StateWriter out) {
        out.time(lastEffectMicros);
        publisher.write(out);
        boundWatch.write(out);
        out.piece(filter::write);
    }

    static ScanEffect read(StateReader in, RegionRules rules) {
        long lastEffect = in.time();
        RegionArea area = rules.area();
        Publisher publisher = Publisher.read(in, area);
        BoundWatch boundWatch = BoundWatch.read(in);
        ObjectFilter filter =
                in.piece(i -> ObjectFilter.read(i, rules.filterSettings(), area.core(), area.apronMetres()));
        return new ScanEffect(area, filter, publisher, boundWatch, lastEffect);
    }
}
