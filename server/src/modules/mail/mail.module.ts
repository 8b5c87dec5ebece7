import { Module } from '@nestjs/common';
import { MailSink } from './received/mail-sink.service.js';
import { ReceivedMailController } from './received/received-mail.controller.js';
import { ReceivedMailService } from './received/received-mail.service.js';

@Module({ controllers: [ReceivedMailController], providers: [MailSink, ReceivedMailService] })
export class MailModule {}
