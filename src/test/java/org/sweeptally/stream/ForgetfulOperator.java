package org.sweeptally.stream;

import java.nio.file.Path;
import java.util.ArrayDeque;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import org.sweeptally.region.wire.Wire;

/**
 * An operator that is broken on purpose: on recovery it applies nothing of the tail of its log, only as many entries
 * without content, so that its own count of them finds nothing. What looks over the operator's shoulder must see it.
 */
public final class ForgetfulOperator {

    private ForgetfulOperator() {}

    /** @param args those of the command {@code run}, each option given in full */
    public static void main(String[] args) throws InterruptedException {
        Map<String, String> options = new TreeMap<>();
        Map<String, String> kafka = new TreeMap<>();
        ArrayDeque<String> left = new ArrayDeque<>(List.of(args).subList(1, args.length));
        while (!left.isEmpty()) {
            String option = left.remove();
            String value = left.remove();
            if (option.equals("--kafka")) {
                kafka.put(value.substring(0, value.indexOf('=')), value.substring(value.indexOf('=') + 1));
            } else {
                options.put(option, value);
            }
        }
        kafka.put("bootstrap.servers", options.get("--bus"));
        var site = TestSite.read(Path.of(options.get("--site")));
        run(new OperatorSettings(site, new TopicNames(site.name(), options.get("--detections")),
                new ClientSettings(kafka), Path.of(options.get("--state"))));
    }

    private static void run(OperatorSettings settings) throws InterruptedException {
        LogReader tail = new KafkaLogReader(settings.clients(), settings.topics().regionLog());
        byte[] nothing = Wire.encode(OperatorEntries.tick(0));
        Operator operator = new Operator(settings, System.out::println, (partition, from, to, sink) ->
                tail.read(partition, from, to, (offset, key, value) -> sink.entry(offset, key, nothing)));
        Runtime.getRuntime().addShutdownHook(new Thread(() -> {
            operator.close();
            Runtime.getRuntime().halt(0);
        }));
        operator.start();
        operator.await();
    }
}
