package org.sweeptally.stream;

import java.time.Duration;
import java.util.function.Consumer;
import org.apache.kafka.common.errors.InterruptException;

/** Follows the settings topic, so that this process routes by revisions that others write. */
final class SettingsWatch implements AutoCloseable {

    private static final Duration PERIOD = Duration.ofSeconds(1);

    private final ClientSettings clients;
    private final String topic;
    private final Revisions revisions;
    private final Consumer<String> says;
    private final Thread thread = new Thread(this::run, "settings-watch");

    SettingsWatch(ClientSettings clients, String topic, Revisions revisions, Consumer<String> says) {
        this.clients = clients;
        this.topic = topic;
        this.revisions = revisions;
        this.says = says;
        thread.setDaemon(true);
    }

    void start() {
        thread.start();
    }

    private void run() {
        while (!Thread.currentThread().isInterrupted()) {
            try (SettingsLog log = new SettingsLog(clients, topic)) {
                follow(log);
            } catch (InterruptedException | InterruptException e) {
                return;
            } catch (OperatorStoppedException e) {
                // The regions meet the same settings in their logs, and stop there if they must.
                says.accept("settings of others are not seen for now: " + e.getMessage());
                if (!rests()) {
                    return;
                }
            }
        }
    }

    private void follow(SettingsLog log) throws InterruptedException {
        while (true) {
            int before = revisions.version();
            log.news().forEach(revisions::add);
            if (revisions.version() > before) {
                says.accept("parts are routed by settings revision "
                        + revisions.all().get(revisions.all().size() - 1).number() + " from now on");
            }
            Thread.sleep(PERIOD.toMillis());
        }
    }

    private static boolean rests() {
        try {
            Thread.sleep(PERIOD.multipliedBy(10).toMillis());
            return true;
        } catch (InterruptedException e) {
            return false;
        }
    }

    @Override
    public void close() {
        thread.interrupt();
        try {
            thread.join(PERIOD.multipliedBy(5).toMillis());
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
    }
}
