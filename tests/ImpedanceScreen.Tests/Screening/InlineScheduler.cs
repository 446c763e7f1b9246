namespace ImpedanceScreen.Tests.Screening;

/// <summary>Runs each task where it is started: with a fake clock no other thread may be waited for.</summary>
internal sealed class InlineScheduler : TaskScheduler
{
    protected override IEnumerable<Task> GetScheduledTasks() => [];

    protected override void QueueTask(Task task) => TryExecuteTask(task);

    protected override bool TryExecuteTaskInline(Task task, bool taskWasPreviouslyQueued) => TryExecuteTask(task);
}
